import "server-only";
import { wordsOfUse } from "@/components/productions/words-of-use";
import { searchCues } from "@/lib/catalogue";
import type { Actor } from "@/lib/kernel/actor";
import { countryName, getCardForCue } from "@/lib/licensing";
import { type RateCard, Use } from "@/lib/licensing/rate-card";
import type { ProductionPage } from "@/lib/productions";

export interface ProductionUse {
  use: Use | null;
  /** The card whose words and choices are offered: of a shortlisted cue's library, or of any that sells. */
  card: RateCard | null;
  words: string | null;
}

export async function readProductionUse(actor: Actor, production: ProductionPage): Promise<ProductionUse> {
  const onSale = production.shortlist.find((item) => item.cue.availability.kind === "on sale");
  const familyId =
    onSale?.cue.familyId ?? (await searchCues(actor, { pageSize: 1 })).results[0]?.cue.familyId ?? null;
  const card = familyId ? await getCardForCue(actor, { familyId }) : null;
  const parsed = Use.safeParse(production.use);
  const use = parsed.success ? parsed.data : null;
  return { use, card, words: use && wordsOfUse(use, card, countryName) };
}
