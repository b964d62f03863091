import { RateCard, type RateCardClass } from "./rate-card";

type Tier = RateCardClass["tier"];
type BandRow = readonly [words: string, limit: number | null, factor: string];
type Traits = Partial<Pick<RateCardClass, "worldIncluded" | "perEpisode" | "cutdowns" | "studentOrCharity">>;

const none: Tier = { kind: "none" };
const bands = (measure: string, rows: readonly BandRow[], including = false): Tier => ({
  kind: "bands",
  measure,
  bands: rows.map(([words, limit, factor]) => ({ words, limit, including, factor })),
});
const SPEND: readonly BandRow[] = [
  ["under 250,000", 250_000, "1.00"],
  ["under 1,000,000", 1_000_000, "1.75"],
  ["under 5,000,000", 5_000_000, "3.00"],
];
const spend = bands("advertising spend", SPEND);
const charity: Traits = { studentOrCharity: true };

type Row = readonly [code: RateCardClass["code"], words: string, base: string, tier: Tier, traits?: Traits];

const ROWS: readonly Row[] = [
  [
    "MC01",
    "Podcast or audio-only online",
    "40",
    bands("downloads per episode", [
      ["under 10,000", 10_000, "1.00"],
      ["under 100,000", 100_000, "1.30"],
      ["under 1,000,000", 1_000_000, "2.50"],
    ]),
    { worldIncluded: true, ...charity },
  ],
  ["MC02", "Online, no advertising spend", "50", none, { worldIncluded: true, ...charity }],
  [
    "MC03",
    "Online paid advertising",
    "180",
    bands("advertising spend", [
      ["under 10,000", 10_000, "1.00"],
      ["under 100,000", 100_000, "1.80"],
      ["under 500,000", 500_000, "3.00"],
    ]),
    { cutdowns: true },
  ],
  [
    "MC04",
    "Inside an organisation",
    "60",
    bands("staff", [
      ["under 250", 250, "1.00"],
      ["under 5,000", 5_000, "1.50"],
      ["5,000 or more", null, "2.20"],
    ]),
    charity,
  ],
  [
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
    charity,
  ],
  ["MC06", "TV or radio programme incl. catch-up", "150", none, { perEpisode: true, ...charity }],
  [
    "MC07",
    "Radio advert",
    "160",
    bands("advertising spend", [
      ["under 50,000", 50_000, "1.00"],
      ["under 250,000", 250_000, "1.75"],
    ]),
    { cutdowns: true },
  ],
  ["MC08", "TV advert", "420", spend, { cutdowns: true }],
  [
    "MC09",
    "Cinema advert",
    "300",
    bands("screens", [
      ["under 100", 100, "1.00"],
      ["under 500", 500, "1.60"],
    ]),
    { cutdowns: true },
  ],
  ["MC10", "Film, festivals only", "95", none, charity],
  [
    "MC11",
    "Film, all media",
    "520",
    bands("budget", [
      ["under 1,000,000", 1_000_000, "0.50"],
      ["under 5,000,000", 5_000_000, "1.00"],
      ["under 20,000,000", 20_000_000, "2.50"],
    ]),
  ],
  ["MC12", "Subscription or on-demand series", "260", { kind: "quote" }, { perEpisode: true }],
  [
    "MC13",
    "Game or app",
    "220",
    bands("copies", [
      ["under 50,000", 50_000, "1.00"],
      ["under 500,000", 500_000, "2.00"],
    ]),
    { worldIncluded: true },
  ],
  ["MC14", "Trailer or promo, out of context", "380", spend, { cutdowns: true }],
  [
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
  ],
];

/**
 * What a library without a card begins with, in its own currency. The structure is common practice; every number is invented
 * for the demonstration, and an owner changes them before selling anything.
 */
export function startingCard(currency: string): RateCard {
  return RateCard.parse({
    version: "new",
    currency,
    unit: "cue",
    minimumFee: "25.00",
    classes: ROWS.map(([code, words, base, tier, traits]) => ({
      code,
      words,
      base,
      tier,
      worldIncluded: false,
      perEpisode: false,
      cutdowns: false,
      studentOrCharity: false,
      ...traits,
    })),
    territory: { country: "1.00", region: "1.60", world: "2.40" },
    regions: [
      { code: "UK+IE", words: "the United Kingdom and Ireland", countries: ["GB", "IE"] },
      { code: "BENELUX", words: "Belgium, the Netherlands and Luxembourg", countries: ["BE", "NL", "LU"] },
      { code: "CA+US", words: "Canada and the United States", countries: ["CA", "US"] },
    ],
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
}
