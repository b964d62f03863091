import { type RateCard, RateCard as RateCardSchema } from "@/lib/licensing/rate-card";
import {
  episodeFactors,
  extras,
  type Factor,
  mediaClasses,
  rateCardVersion,
  termFactors,
  territoryFactors,
} from "./data/rate-card";

const exact = (factor: Factor) => (factor.numerator / factor.denominator).toFixed(2);
const amount = (minor: number) => (minor / 100).toFixed(2);

/** The demonstration's card, the same figures in each library's own currency. */
export function demoRateCard(currency: string): RateCard {
  return RateCardSchema.parse({
    version: `demonstration-${rateCardVersion.number}`,
    currency,
    unit: rateCardVersion.usedUnit,
    minimumFee: amount(extras.minimumFeeMinor),
    classes: mediaClasses.map((row) => ({
      code: row.id,
      words: row.label,
      base: amount(row.baseMinor),
      tier: tierOf(row),
      worldIncluded: row.worldOnly,
      perEpisode: row.episodes,
      cutdowns: ["MC07", "MC08", "MC09", "MC03"].includes(row.id),
      studentOrCharity: row.studentOrCharity,
    })),
    territory: {
      country: exact(territoryFactors.country),
      region: exact(territoryFactors.region),
      world: exact(territoryFactors.world),
    },
    regions: [{ code: "UK+IE", words: "the United Kingdom and Ireland", countries: ["GB", "IE"] }],
    terms: termFactors.map((row) => ({ months: row.months, words: row.label, factor: exact(row.factor) })),
    episodes: episodeFactors.map((row) => ({ upTo: row.upTo, factor: exact(row.factor) })),
    cutdown: exact(extras.extraCutdown),
    tagChange: exact(extras.tagOnlyChange),
    studentOrCharity: exact(extras.studentOrCharity),
  });
}

function tierOf(row: (typeof mediaClasses)[number]) {
  if (row.quoteUnlessBand) return { kind: "quote" };
  const bands = row.tiers.flatMap((tier) =>
    tier.factor
      ? [
          {
            words: tier.label,
            limit: tier.below,
            including: row.id === "MC05" || row.id === "MC15",
            factor: exact(tier.factor),
          },
        ]
      : [],
  );
  return bands.length === 0 || !row.tierMeasure
    ? { kind: "none" }
    : { kind: "bands", measure: row.tierMeasure, bands };
}
