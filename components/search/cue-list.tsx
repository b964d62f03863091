"use client";

import { keepPreviousData, useInfiniteQuery } from "@tanstack/react-query";
import { type ReactNode, useState } from "react";
import { listScaleS } from "@/components/contour/contour-strip";
import { usePlayer } from "@/components/player/use-player";
import { Button } from "@/components/ui/button";
import { useKeys } from "@/components/ui/keys";
import { Problem } from "@/components/ui/problem";
import { notify } from "@/components/ui/toaster";
import type { Brief } from "@/lib/catalogue/schemas";
import { briefQuery } from "./brief-query";
import { CueRow } from "./cue-row";
import type { FoundPage } from "./find-types";
import { trackOf } from "./tracks";

export interface ListProduction {
  id: string;
  /** "episode 4" */
  words: string;
  /** Whether it says what it is licensed for, so that its shortlist can be priced. */
  hasUse: boolean;
  /** Families on its shortlist. */
  families: readonly string[];
}

export type ShortlistAction = (input: {
  productionId: string;
  recordingId: string;
}) => Promise<{ ok: boolean; message?: string }>;

export type PriceAction = (input: { productionId: string }) => Promise<{ ok: boolean; message?: string }>;

interface CueListProps {
  brief: Brief;
  first: FoundPage;
  /** The brief that `first` answers, as its address. */
  firstQuery: string;
  head: (newest: FoundPage) => ReactNode;
  empty: (onSale: number) => ReactNode;
  production: ListProduction | null;
  shortlist?: ShortlistAction | undefined;
  priceProduction?: PriceAction | undefined;
}

const POLL_MS = 60_000;

async function readPage(query: string, productionId: string | null, page: number): Promise<FoundPage> {
  const search = new URLSearchParams(query);
  if (productionId) search.set("production", productionId);
  if (page > 0) search.set("page", String(page));
  const answer = await fetch(`/api/cues?${search}`);
  if (!answer.ok) throw new Error("The list could not be read.");
  return (await answer.json()) as FoundPage;
}

/** What a brief finds: paged, polled, and heard in place. Its first page comes with the document. */
export function CueList(props: CueListProps) {
  const { brief, first, firstQuery, head, empty, production, shortlist, priceProduction } = props;
  const query = briefQuery(brief);
  const list = useInfiniteQuery({
    queryKey: ["cues", query, production?.id ?? null],
    queryFn: ({ pageParam }) => readPage(query, production?.id ?? null, pageParam),
    initialPageParam: 0,
    getNextPageParam: (last) => ((last.page + 1) * last.pageSize < last.total ? last.page + 1 : undefined),
    ...(query === firstQuery ? { initialData: { pages: [first], pageParams: [0] } } : {}),
    placeholderData: keepPreviousData,
    refetchInterval: POLL_MS,
  });
  const pages = list.data?.pages ?? [];
  const cues = pages.flatMap((page) => page.cues);
  const newest = pages.at(-1) ?? first;
  const scaleS = listScaleS(cues.map((cue) => cue.durationS));
  const keep = useShortlisting(production, shortlist, priceProduction);
  useListKeys(cues, keep.add);
  return (
    <>
      {head(newest)}
      {list.isError && (
        <Problem live remedy="What was found before is still here; it is tried again in a minute.">
          The list could not be read just now.
        </Problem>
      )}
      {cues.length === 0 ? (
        empty(newest.onSale)
      ) : (
        <ul aria-busy={list.isPlaceholderData} aria-label="Cues found">
          {cues.map((cue) => (
            <CueRow
              cue={cue}
              isShortlisted={keep.has(cue.familyId)}
              key={cue.familyId}
              priceFor={production?.words ?? null}
              scaleS={scaleS}
              shortlist={
                production && shortlist
                  ? (recordingId, title) => keep.add(cue.familyId, recordingId, title)
                  : undefined
              }
            />
          ))}
        </ul>
      )}
      {list.hasNextPage && (
        <Button
          busy={list.isFetchingNextPage && "Reading more"}
          className="mt-4"
          onClick={() => list.fetchNextPage()}
        >
          Show {Math.min(newest.pageSize, newest.total - cues.length)} more of {newest.total}
        </Button>
      )}
    </>
  );
}

/** Shortlisting, with what has just been added known before the page has been read again. */
function useShortlisting(
  production: ListProduction | null,
  shortlist: ShortlistAction | undefined,
  price: PriceAction | undefined,
) {
  const [added, setAdded] = useState<readonly string[]>([]);
  const add = async (familyId: string, recordingId: string, title: string) => {
    if (!production || !shortlist) return;
    const answer = await shortlist({ productionId: production.id, recordingId });
    if (answer.ok) {
      setAdded((before) => [...before, `${production.id}:${familyId}`]);
      notify({ title: `${title} is on the shortlist.` });
      if (production.hasUse) await price?.({ productionId: production.id });
    } else notify({ title: answer.message ?? "It could not be put on the shortlist." });
  };
  const has = (familyId: string) =>
    production !== null &&
    (production.families.includes(familyId) || added.includes(`${production.id}:${familyId}`));
  return { add, has };
}

/** Keys of the list: the next cue, the one before, where it opens, on to the shortlist. */
function useListKeys(
  cues: FoundPage["cues"],
  add: (familyId: string, recordingId: string, title: string) => void,
): void {
  const { state, load, seek } = usePlayer();
  const at = cues.findIndex((cue) => cue.versions.some((version) => version.recordingId === state.track?.id));
  const go = (step: number) => {
    const cue = cues[at < 0 ? (step > 0 ? 0 : cues.length - 1) : at + step];
    const head = cue?.versions[0];
    if (!cue || !head?.canBeHeard) return;
    load(trackOf(cue, head, cue.contour), 0);
    document.querySelector(`[data-cue="${cue.number}"]`)?.scrollIntoView({ block: "nearest" });
  };
  const current = cues[at];
  useKeys("Finding", [
    { key: "j", does: "plays the next cue", run: () => go(1) },
    { key: "k", does: "plays the cue before", run: () => go(-1) },
    {
      key: "o",
      does: "goes to where it opens",
      run: () => current?.opensS !== undefined && current?.opensS !== null && seek(current.opensS),
    },
    {
      key: "s",
      does: "puts the playing version on the shortlist",
      run: () => current && state.track && add(current.familyId, state.track.id, current.title),
    },
  ]);
}
