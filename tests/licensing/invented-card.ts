import { RateCard, type RateCardClass } from "@/lib/licensing/rate-card";

const none = { kind: "none" } as const;
const bands = (
  measure: string,
  rows: ReadonlyArray<readonly [string, number | null, string]>,
  including = false,
) => ({
  kind: "bands" as const,
  measure,
  bands: rows.map(([words, limit, factor]) => ({ words, limit, including, factor })),
});
const spend = bands("advertising spend", [
  ["under 250,000", 250_000, "1.00"],
  ["under 1,000,000", 1_000_000, "1.75"],
  ["under 5,000,000", 5_000_000, "3.00"],
]);

type Traits = Partial<Pick<RateCardClass, "worldIncluded" | "perEpisode" | "cutdowns" | "studentOrCharity">>;
const row = (
  code: RateCardClass["code"],
  words: string,
  base: string,
  tier: RateCardClass["tier"],
  traits: Traits = {},
): RateCardClass => ({
  code,
  words,
  base,
  tier,
  worldIncluded: false,
  perEpisode: false,
  cutdowns: false,
  studentOrCharity: false,
  ...traits,
});

/** An invented card: the shape is common practice, every number is made up for the demonstration. */
export const INVENTED_CARD: RateCard = RateCard.parse({
  version: "invented-1",
  currency: "GBP",
  unit: "cue",
  minimumFee: "25.00",
  classes: [
    row(
      "MC01",
      "Podcast or audio-only online",
      "40",
      bands("downloads per episode", [
        ["under 10,000", 10_000, "1.00"],
        ["under 100,000", 100_000, "1.30"],
        ["under 1,000,000", 1_000_000, "2.50"],
      ]),
      { worldIncluded: true, studentOrCharity: true },
    ),
    row("MC02", "Online, no advertising spend", "50", none, { worldIncluded: true, studentOrCharity: true }),
    row(
      "MC03",
      "Online paid advertising",
      "180",
      bands("advertising spend", [
        ["under 10,000", 10_000, "1.00"],
        ["under 100,000", 100_000, "1.80"],
        ["under 500,000", 500_000, "3.00"],
      ]),
      { cutdowns: true },
    ),
    row(
      "MC04",
      "Inside an organisation",
      "60",
      bands("staff", [
        ["under 250", 250, "1.00"],
        ["under 5,000", 5_000, "1.50"],
        ["5,000 or more", null, "2.20"],
      ]),
      { studentOrCharity: true },
    ),
    row(
      "MC05",
      "Live event, exhibition, installation",
      "80",
      bands(
        "days",
        [
          ["up to 7", 7, "1.00"],
          ["up to 90", 90, "1.80"],
        ],
        true,
      ),
      { studentOrCharity: true },
    ),
    row("MC06", "TV or radio programme incl. catch-up", "150", none, {
      perEpisode: true,
      studentOrCharity: true,
    }),
    row(
      "MC07",
      "Radio advert",
      "160",
      bands("advertising spend", [
        ["under 50,000", 50_000, "1.00"],
        ["under 250,000", 250_000, "1.75"],
      ]),
      { cutdowns: true },
    ),
    row("MC08", "TV advert", "420", spend, { cutdowns: true }),
    row(
      "MC09",
      "Cinema advert",
      "300",
      bands("screens", [
        ["under 100", 100, "1.00"],
        ["under 500", 500, "1.60"],
      ]),
      { cutdowns: true },
    ),
    row("MC10", "Film, festivals only", "95", none, { studentOrCharity: true }),
    row(
      "MC11",
      "Film, all media",
      "520",
      bands("budget", [
        ["under 1,000,000", 1_000_000, "0.50"],
        ["under 5,000,000", 5_000_000, "1.00"],
        ["under 20,000,000", 20_000_000, "2.50"],
      ]),
    ),
    row("MC12", "Subscription or on-demand series", "260", { kind: "quote" }, { perEpisode: true }),
    row(
      "MC13",
      "Game or app",
      "220",
      bands("copies", [
        ["under 50,000", 50_000, "1.00"],
        ["under 500,000", 500_000, "2.00"],
      ]),
      { worldIncluded: true },
    ),
    row("MC14", "Trailer or promo, out of context", "380", spend, { cutdowns: true }),
    row(
      "MC15",
      "Telephone hold, shop or venue background",
      "70",
      bands(
        "lines or sites",
        [
          ["up to 10", 10, "1.00"],
          ["up to 100", 100, "2.00"],
        ],
        true,
      ),
    ),
  ],
  territory: { country: "1.00", region: "1.60", world: "2.40" },
  regions: [{ code: "UK+IE", words: "United Kingdom and Ireland", countries: ["GB", "IE"] }],
  terms: [
    { months: 3, words: "up to 3 months", factor: "0.60" },
    { months: 12, words: "1 year", factor: "1.00" },
    { months: 36, words: "3 years", factor: "1.60" },
    { months: 60, words: "5 years", factor: "2.00" },
    { months: null, words: "perpetual", factor: "2.50" },
  ],
  episodes: [
    { upTo: 1, factor: "1.00" },
    { upTo: 6, factor: "4.00" },
    { upTo: 13, factor: "7.50" },
  ],
  cutdown: "0.25",
  tagChange: "0.10",
  studentOrCharity: "0.40",
});
