/** Factors are exact: 1.60 is 8/5. Money is in minor units of the library's own currency. */
export interface Factor {
  readonly numerator: number;
  readonly denominator: number;
}

function factor(numerator: number, denominator: number): Factor {
  return { numerator, denominator };
}

const one = factor(1, 1);

export interface TierRow {
  readonly id: string;
  readonly label: string;
  /** The tier ends below this number; null for no upper limit. */
  readonly below: number | null;
  /** null: ask for a quote. */
  readonly factor: Factor | null;
}

export interface MediaClassRow {
  readonly id: string;
  readonly label: string;
  readonly baseMinor: number;
  /** What the tier is measured in; null where the class has no tiers. */
  readonly tierMeasure: string | null;
  readonly tiers: readonly TierRow[];
  /** Online is World: one territory factor of 1. */
  readonly worldOnly: boolean;
  readonly episodes: boolean;
  readonly studentOrCharity: boolean;
  /** Sold by quote unless the library states a band. */
  readonly quoteUnlessBand?: true;
}

function tiers(
  unit: string,
  ...rows: readonly (readonly [below: number | null, factor: Factor | null])[]
): TierRow[] {
  let from = 0;
  return rows.map(([below, value], index) => {
    const label =
      below === null
        ? `${from.toLocaleString("en-GB")} ${unit} or more`
        : `under ${below.toLocaleString("en-GB")} ${unit}`;
    from = below ?? from;
    return { id: `tier-${index + 1}`, label, below, factor: value };
  });
}

const advertSpend = tiers(
  "spent",
  [250_000, one],
  [1_000_000, factor(7, 4)],
  [5_000_000, factor(3, 1)],
  [null, null],
);

export const mediaClasses: readonly MediaClassRow[] = [
  {
    id: "MC01",
    label: "Podcast or audio-only online",
    baseMinor: 4000,
    tierMeasure: "downloads an episode",
    tiers: tiers(
      "downloads an episode",
      [10_000, one],
      [100_000, factor(13, 10)],
      [1_000_000, factor(5, 2)],
      [null, null],
    ),
    worldOnly: true,
    episodes: false,
    studentOrCharity: true,
  },
  {
    id: "MC02",
    label: "Online, no ad spend (own site, social)",
    baseMinor: 5000,
    tierMeasure: null,
    tiers: [],
    worldOnly: true,
    episodes: false,
    studentOrCharity: true,
  },
  {
    id: "MC03",
    label: "Online paid advertising",
    baseMinor: 18_000,
    tierMeasure: "spend",
    tiers: tiers("spent", [10_000, one], [100_000, factor(9, 5)], [500_000, factor(3, 1)], [null, null]),
    worldOnly: false,
    episodes: false,
    studentOrCharity: false,
  },
  {
    id: "MC04",
    label: "Inside an organisation (training, meetings)",
    baseMinor: 6000,
    tierMeasure: "staff",
    tiers: tiers("staff", [250, one], [5000, factor(3, 2)], [null, factor(11, 5)]),
    worldOnly: false,
    episodes: false,
    studentOrCharity: true,
  },
  {
    id: "MC05",
    label: "Live event, exhibition, installation",
    baseMinor: 8000,
    tierMeasure: "days",
    tiers: tiers("days", [8, one], [91, factor(9, 5)], [null, null]),
    worldOnly: false,
    episodes: false,
    studentOrCharity: true,
  },
  {
    id: "MC06",
    label: "TV or radio programme incl. catch-up",
    baseMinor: 15_000,
    tierMeasure: null,
    tiers: [],
    worldOnly: false,
    episodes: true,
    studentOrCharity: true,
  },
  {
    id: "MC07",
    label: "Radio advert",
    baseMinor: 16_000,
    tierMeasure: "spend",
    tiers: tiers("spent", [50_000, one], [250_000, factor(7, 4)], [null, null]),
    worldOnly: false,
    episodes: false,
    studentOrCharity: false,
  },
  {
    id: "MC08",
    label: "TV advert",
    baseMinor: 42_000,
    tierMeasure: "spend",
    tiers: advertSpend,
    worldOnly: false,
    episodes: false,
    studentOrCharity: false,
  },
  {
    id: "MC09",
    label: "Cinema advert",
    baseMinor: 30_000,
    tierMeasure: "screens",
    tiers: tiers("screens", [100, one], [500, factor(8, 5)], [null, null]),
    worldOnly: false,
    episodes: false,
    studentOrCharity: false,
  },
  {
    id: "MC10",
    label: "Film, festivals only",
    baseMinor: 9500,
    tierMeasure: null,
    tiers: [],
    worldOnly: false,
    episodes: false,
    studentOrCharity: true,
  },
  {
    id: "MC11",
    label: "Film, all media",
    baseMinor: 52_000,
    tierMeasure: "budget",
    tiers: tiers(
      "budget",
      [1_000_000, factor(1, 2)],
      [5_000_000, one],
      [20_000_000, factor(5, 2)],
      [null, null],
    ),
    worldOnly: false,
    episodes: false,
    studentOrCharity: false,
  },
  {
    id: "MC12",
    label: "Subscription or on-demand series",
    baseMinor: 26_000,
    tierMeasure: "subscribers",
    tiers: [],
    worldOnly: false,
    episodes: true,
    studentOrCharity: false,
    quoteUnlessBand: true,
  },
  {
    id: "MC13",
    label: "Game or app",
    baseMinor: 22_000,
    tierMeasure: "copies",
    tiers: tiers("copies", [50_000, one], [500_000, factor(2, 1)], [null, null]),
    worldOnly: true,
    episodes: false,
    studentOrCharity: false,
  },
  {
    id: "MC14",
    label: "Trailer or promo, out of context",
    baseMinor: 38_000,
    tierMeasure: "spend",
    tiers: advertSpend,
    worldOnly: false,
    episodes: false,
    studentOrCharity: false,
  },
  {
    id: "MC15",
    label: "Telephone hold, shop or venue background (reproduction only)",
    baseMinor: 7000,
    tierMeasure: "lines or sites",
    tiers: tiers("lines or sites", [11, one], [101, factor(2, 1)], [null, null]),
    worldOnly: false,
    episodes: false,
    studentOrCharity: false,
  },
];

export const territoryFactors = {
  country: one,
  region: factor(8, 5),
  world: factor(12, 5),
} as const;

/** A term between two rows takes the next longer row. */
export const termFactors: readonly {
  readonly id: string;
  readonly label: string;
  readonly months: number | null;
  readonly factor: Factor;
}[] = [
  { id: "3-months", label: "up to 3 months", months: 3, factor: factor(3, 5) },
  { id: "1-year", label: "1 year", months: 12, factor: one },
  { id: "3-years", label: "3 years", months: 36, factor: factor(8, 5) },
  { id: "5-years", label: "5 years", months: 60, factor: factor(2, 1) },
  { id: "perpetual", label: "perpetual", months: null, factor: factor(5, 2) },
];

export const episodeFactors: readonly { readonly upTo: number; readonly factor: Factor }[] = [
  { upTo: 1, factor: one },
  { upTo: 6, factor: factor(4, 1) },
  { upTo: 13, factor: factor(15, 2) },
];

export const extras = {
  /** MC16: a flag on some classes, with proof. */
  studentOrCharity: factor(2, 5),
  extraCutdown: factor(1, 4),
  tagOnlyChange: factor(1, 10),
  minimumFeeMinor: 2500,
} as const;

/** Never on the card. */
export const alwaysQuoted = ["exclusivity", "theme tune", "more than 13 episodes"] as const;

export const rateCardVersion = {
  number: 1,
  from: "2026-01-01",
  units: ["cue", "30 s", "production"],
  usedUnit: "cue",
} as const;
