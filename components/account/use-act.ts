"use client";

import { useState, useTransition } from "react";
import type { ActionResult } from "@/lib/web";

export type Act<I, R> = (input: I, operationId?: string) => Promise<ActionResult<R>>;
type Failure = Extract<ActionResult<unknown>, { ok: false }>;

/** Runs a server action, says while it runs, and keeps its refusal for the form to show. */
export function useAct<I, R>(act: Act<I, R>) {
  const [failure, setFailure] = useState<Failure | null>(null);
  const [isRunning, start] = useTransition();
  const run = (input: I, done?: (data: R) => void, operationId?: string) =>
    start(async () => {
      const answer = await act(input, operationId);
      setFailure(answer.ok ? null : answer);
      if (answer.ok) done?.(answer.data);
    });
  return { run, isRunning, failure, fieldError: (name: string) => failure?.fields[name] };
}
