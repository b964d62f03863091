"use client";

import { useQuery, useQueryClient } from "@tanstack/react-query";
import { useRef } from "react";
import type { DeliveryPage } from "./wire";

const BUSY = new Set(["arrived", "measuring", "screening"]);
const BUSY_MS = 1200;
const QUIET_MS = 20_000;

const keyOf = (deliveryId: string) => ["delivery", deliveryId];

/** The delivery as it is now: asked for often while something is being measured or screened. */
export function useDelivery(first: DeliveryPage) {
  const contours = useRef<Map<string, string> | null>(null);
  const id = first.delivery.id;
  return useQuery({
    queryKey: keyOf(id),
    initialData: first,
    staleTime: 0,
    queryFn: async ({ signal }): Promise<DeliveryPage> => {
      contours.current ??= contoursOf(first);
      const have = [...contours.current.keys()].join(",");
      const answer = await fetch(`/api/deliveries/${id}?have=${have}`, { signal });
      if (!answer.ok) throw new Error(`the delivery could not be read: ${answer.status}`);
      return withContours((await answer.json()) as DeliveryPage, contours.current);
    },
    refetchInterval: ({ state }) => (state.data && isBusy(state.data) ? BUSY_MS : QUIET_MS),
  });
}

/** Something goes on by itself: a file is read, or a delivery that has all it needs is being listed. */
function isBusy({ delivery }: DeliveryPage): boolean {
  const isListing = delivery.state === "delivered" && delivery.standing === "clear";
  return isListing || delivery.versions.some((version) => BUSY.has(version.state));
}

function contoursOf(page: DeliveryPage): Map<string, string> {
  return new Map(
    page.delivery.versions.flatMap((version) =>
      version.contour ? [[version.id, version.contour] as const] : [],
    ),
  );
}

/** A contour never changes, so it travels once. */
function withContours(page: DeliveryPage, known: Map<string, string>): DeliveryPage {
  const versions = page.delivery.versions.map((version) => {
    if (version.contour) known.set(version.id, version.contour);
    return { ...version, contour: version.contour ?? known.get(version.id) ?? null };
  });
  return { ...page, delivery: { ...page.delivery, versions } };
}

/** Reads the delivery again at once, after something was done to it. */
export function useReadAgain(deliveryId: string): () => Promise<void> {
  const client = useQueryClient();
  return () => client.invalidateQueries({ queryKey: keyOf(deliveryId) });
}
