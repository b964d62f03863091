"use client";

import { useState, useTransition } from "react";
import { Button } from "@/components/ui/button";
import { Problem } from "@/components/ui/problem";
import { sumOf } from "./line-sums";
import type { ShortlistLine } from "./shortlist-line";

export type PlaceOrderAction = (
  input: { productionId: string; lines: { familyId: string; use: never }[] },
  operationId?: string,
) => Promise<{ ok: true } | { ok: false; message: string }>;

interface OrderButtonsProps {
  productionId: string;
  lines: readonly ShortlistLine[];
  use: Record<string, unknown> | null;
  placeOrder: PlaceOrderAction;
}

/** One order a library: what is picked and can be licensed. The first is the screen's main action. */
export function OrderButtons({ productionId, lines, use, placeOrder }: OrderButtonsProps) {
  const [pending, start] = useTransition();
  const [problem, setProblem] = useState<string | null>(null);
  const [operationId] = useState(() => crypto.randomUUID());
  const ready = lines.filter((line) => line.state === "picked" && !line.unavailable && line.price?.minor);
  const libraries = [...new Set(ready.map((line) => line.libraryName))];
  if (!use || lines.length === 0) return null;
  if (libraries.length === 0)
    return (
      <p className="mt-5 text-small text-ink-soft">
        Pick a cue that has a price, and it can be ordered from here.
      </p>
    );
  const order = (library: string) =>
    start(async () => {
      const own = ready.filter((line) => line.libraryName === library);
      const answer = await placeOrder(
        { productionId, lines: own.map((line) => ({ familyId: line.familyId, use: use as never })) },
        `${operationId}:${library}:${own.map((line) => line.familyId).join()}`.slice(0, 80),
      );
      if (answer && !answer.ok) setProblem(answer.message);
    });
  return (
    <div className="mt-6 grid gap-2.5">
      {libraries.map((library, index) => (
        <Button
          busy={pending && "Placing the order"}
          key={library}
          kind={index === 0 ? "main" : "plain"}
          onClick={() => order(library)}
          wide
        >
          Order from {library}, {sumOf(ready.filter((line) => line.libraryName === library))}
        </Button>
      ))}
      {problem && <Problem live>{problem}</Problem>}
    </div>
  );
}
