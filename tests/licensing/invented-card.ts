import type { RateCard } from "@/lib/licensing/rate-card";
import { startingCard } from "@/lib/licensing/starting-card";

/** An invented card: the shape is common practice, every number is made up. */
export const INVENTED_CARD: RateCard = { ...startingCard("GBP"), version: "invented-1" };
