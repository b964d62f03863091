import { startingCard } from "@/lib/licensing";
import type { RateCard } from "@/lib/licensing/rate-card";

/** The demonstration's card: the same figures in each library's own currency. */
export function demoRateCard(currency: string): RateCard {
  return { ...startingCard(currency), version: "demonstration-1" };
}
