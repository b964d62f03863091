"use client";

import { useState, useTransition } from "react";
import { Button } from "@/components/ui/button";
import type { ShortlistLine } from "./shortlist-line";

interface PriceButtonProps {
  productionId: string;
  lines: readonly ShortlistLine[];
  priceProduction: (input: { productionId: string }) => Promise<{ ok: boolean; message?: string }>;
}

/** Works the prices of the production's use out anew for the whole shortlist. */
export function PriceButton({ productionId, lines, priceProduction }: PriceButtonProps) {
  const [pending, start] = useTransition();
  const [problem, setProblem] = useState<string | null>(null);
  if (lines.length === 0) return null;
  const isPriced = lines.every((line) => line.price !== null || line.unavailable);
  return (
    <>
      <Button
        busy={pending && "Pricing"}
        kind="quiet"
        onClick={() =>
          start(async () => {
            const answer = await priceProduction({ productionId });
            setProblem(answer.ok ? null : (answer.message ?? "It could not be priced."));
          })
        }
      >
        {isPriced ? "Price it again today" : "Price the shortlist"}
      </Button>
      {problem && (
        <span className="text-magenta" role="alert">
          {problem}
        </span>
      )}
    </>
  );
}
