import { z } from "zod";
import { isCurrency } from "@/lib/kernel/currencies";

export const MEDIA_CLASS_CODES = [
  "MC01",
  "MC02",
  "MC03",
  "MC04",
  "MC05",
  "MC06",
  "MC07",
  "MC08",
  "MC09",
  "MC10",
  "MC11",
  "MC12",
  "MC13",
  "MC14",
  "MC15",
] as const;

const Factor = z
  .string()
  .regex(/^\d{1,6}(\.\d{1,4})?$/, "Write a factor as a decimal number, for example 1.60.");
const Amount = z.string().regex(/^\d{1,9}(\.\d{1,4})?$/, "Write an amount in figures, for example 25.00.");
const Country = z.string().regex(/^[A-Z]{2}$/, "Use the two-letter code of ISO 3166.");

/** A band ends below its limit, or at it where `including`; only the last band may have none. */
const TierBand = z.strictObject({
  words: z.string().min(1),
  limit: z.number().int().positive().nullable(),
  including: z.boolean(),
  factor: Factor,
});

const TierScale = z.discriminatedUnion("kind", [
  z.strictObject({ kind: z.literal("none") }),
  /** The library answers every use of the class itself. */
  z.strictObject({ kind: z.literal("quote") }),
  z.strictObject({ kind: z.literal("bands"), measure: z.string().min(1), bands: z.array(TierBand).min(1) }),
]);

const CardClass = z.strictObject({
  code: z.enum(MEDIA_CLASS_CODES),
  words: z.string().min(1),
  base: Amount,
  /** Online use is World: the territory factor is always 1. */
  worldIncluded: z.boolean(),
  tier: TierScale,
  perEpisode: z.boolean(),
  cutdowns: z.boolean(),
  studentOrCharity: z.boolean(),
});

/** Factors are exact decimals in text; nothing of a card is ever a floating-point number. */
export const RateCard = z
  .strictObject({
    version: z.string().min(1),
    currency: z.string().refine(isCurrency, "This is not a circulating currency."),
    /** What one base price buys: the whole cue, each 30 seconds of music begun, or all cues of a production. */
    unit: z.enum(["cue", "30 seconds", "production"]),
    minimumFee: Amount,
    classes: z.array(CardClass).min(1),
    territory: z.strictObject({ country: Factor, region: Factor, world: Factor }),
    /** Named regions are frozen lists: a changed region is a new card version. */
    regions: z.array(
      z.strictObject({
        code: z.string().min(1),
        words: z.string().min(1),
        countries: z.array(Country).min(2),
      }),
    ),
    terms: z
      .array(
        z.strictObject({ months: z.number().int().positive().nullable(), words: z.string(), factor: Factor }),
      )
      .min(1),
    episodes: z.array(z.strictObject({ upTo: z.number().int().positive(), factor: Factor })),
    cutdown: Factor,
    tagChange: Factor,
    studentOrCharity: Factor,
  })
  .refine((card) => new Set(card.classes.map(({ code }) => code)).size === card.classes.length, {
    message: "A class stands on the card once.",
    path: ["classes"],
  })
  .refine((card) => ascends(card.terms.map(({ months }) => months)), {
    message: "Terms go from short to long; perpetual, if offered, is last.",
    path: ["terms"],
  })
  .refine((card) => ascends(card.episodes.map(({ upTo }) => upTo)), {
    message: "Episode rows go from few to many.",
    path: ["episodes"],
  })
  .refine(
    (card) =>
      card.classes.every(
        ({ tier }) => tier.kind !== "bands" || ascends(tier.bands.map(({ limit }) => limit)),
      ),
    { message: "Bands go from low to high; only the last may be without a limit.", path: ["classes"] },
  );
export type RateCard = z.infer<typeof RateCard>;
export type RateCardClass = z.infer<typeof CardClass>;

function ascends(limits: ReadonlyArray<number | null>): boolean {
  return limits.every((limit, i) => {
    const next = limits[i + 1];
    return next === undefined || (limit !== null && (next === null || next > limit));
  });
}

/** One exact use of one cue, as the buyer states it. */
export const Use = z.strictObject({
  mediaClass: z.enum(MEDIA_CLASS_CODES),
  territory: z.discriminatedUnion("kind", [
    z.strictObject({ kind: z.literal("country"), country: Country }),
    z.strictObject({ kind: z.literal("region"), region: z.string().min(1) }),
    z.strictObject({ kind: z.literal("world") }),
  ]),
  /** null is perpetual. */
  termMonths: z.number().int().positive().nullable(),
  /** The band chosen (counted from 0), or the figure in whole units that decides it. */
  tier: z
    .union([
      z.strictObject({ band: z.number().int().min(0) }),
      z.strictObject({ amount: z.number().int().min(0) }),
    ])
    .optional(),
  episodes: z.number().int().positive().default(1),
  cutdowns: z.number().int().min(0).max(100).default(0),
  tagChanges: z.number().int().min(0).max(100).default(0),
  /** Music actually used, for cards that price each 30 seconds. */
  musicS: z.number().positive().optional(),
  studentOrCharity: z.boolean().default(false),
  exclusive: z.boolean().default(false),
  themeOrTitle: z.boolean().default(false),
});
export type Use = z.infer<typeof Use>;
export type UseInput = z.input<typeof Use>;
