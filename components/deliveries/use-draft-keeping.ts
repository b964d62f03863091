"use client";

import { useCallback, useEffect, useRef, useState } from "react";
import type { UseFormReturn } from "react-hook-form";
import { keepDraft } from "@/app/(composer)/actions";
import { type DraftInput, type DraftOutput, fromDraft } from "./draft-form";

const PAUSE_MS = 900;
const AGAIN_MS = 5000;

export type Keeping = { state: "kept" | "keeping" | "here"; at: Date | null; problem: string | null };
type Form = UseFormReturn<DraftInput, unknown, DraftOutput>;

const placeOf = (deliveryId: string) => `sedgewren.draft:${deliveryId}`;

/**
 * Keeps what is typed: in this browser at once, on the server after a short pause. What did not reach the server is sent
 * again until it does, also after a reload.
 */
export function useDraftKeeping(
  form: Form,
  deliveryId: string,
): { keeping: Keeping; flush: () => Promise<boolean> } {
  const [keeping, setKeeping] = useState<Keeping>({ state: "kept", at: null, problem: null });
  const timer = useRef<ReturnType<typeof setTimeout> | undefined>(undefined);
  const dirty = useRef(false);
  const sending = useRef<Promise<boolean> | null>(null);

  const send = useCallback(async (): Promise<boolean> => {
    while (dirty.current) {
      dirty.current = false;
      setKeeping((now) => ({ ...now, state: "keeping" }));
      const draft = JSON.parse(JSON.stringify(form.getValues())) as Record<string, unknown>;
      const answer = await keepDraft({ deliveryId, draft }).catch(() => null);
      if (answer?.ok) {
        if (!dirty.current) localStorage.removeItem(placeOf(deliveryId));
        setKeeping({ state: "kept", at: answer.data.savedAt, problem: null });
        continue;
      }
      if (answer && answer.code !== "unexpected") {
        setKeeping((now) => ({ ...now, state: "here", problem: answer.message }));
        return false;
      }
      dirty.current = true;
      setKeeping((now) => ({
        ...now,
        state: "here",
        problem:
          "The site cannot be reached just now. What you wrote is kept in this browser and is sent as soon as it can be.",
      }));
      timer.current = setTimeout(() => void flushRef.current(), AGAIN_MS);
      return false;
    }
    return true;
  }, [form, deliveryId]);

  const flush = useCallback(async (): Promise<boolean> => {
    clearTimeout(timer.current);
    await sending.current;
    const run = send();
    sending.current = run;
    return run;
  }, [send]);
  const flushRef = useRef(flush);

  useEffect(() => {
    const changed = () => {
      dirty.current = true;
      localStorage.setItem(placeOf(deliveryId), JSON.stringify(form.getValues()));
      clearTimeout(timer.current);
      timer.current = setTimeout(() => void flush(), PAUSE_MS);
    };
    const left = localStorage.getItem(placeOf(deliveryId));
    if (left) {
      form.reset(fromDraft(JSON.parse(left) as Record<string, unknown>));
      changed();
    }
    const watching = form.watch(changed);
    const online = () => void flush();
    window.addEventListener("online", online);
    return () => {
      watching.unsubscribe();
      window.removeEventListener("online", online);
      clearTimeout(timer.current);
    };
  }, [form, deliveryId, flush]);

  return { keeping, flush };
}
