import type { CompanyKey } from "./people";

export interface LicenceRow {
  readonly number: string;
  readonly date: string;
  readonly company: CompanyKey;
  readonly production: string;
  /** Part of the production, where the licence is for a part. */
  readonly part: string | null;
  readonly endClient: string | null;
  readonly cueNumber: number;
  readonly mediaClass: string;
  readonly territory: "GB" | "CA" | "BE" | "UK+IE" | "World";
  readonly term: "3-months" | "1-year" | "3-years" | "perpetual";
  readonly lastUse: string | null;
  readonly episodes: number;
  readonly tier: string | null;
  readonly extraCutdowns: number;
  readonly studentOrCharity: boolean;
  readonly currency: "GBP" | "USD" | "EUR";
  readonly priceMinor: number;
  readonly status: "in force" | "payment disputed" | "refunded" | "rights question open";
  readonly statusSince: string | null;
  /** Sold here, or issued by the library outside this service and brought in. */
  readonly origin: "order O-1041" | "brought in";
}

type Given = Pick<
  LicenceRow,
  | "number"
  | "date"
  | "company"
  | "production"
  | "cueNumber"
  | "mediaClass"
  | "territory"
  | "term"
  | "currency"
  | "priceMinor"
> &
  Partial<LicenceRow>;

function licence(given: Given): LicenceRow {
  return {
    part: null,
    endClient: null,
    lastUse: null,
    episodes: 1,
    tier: null,
    extraCutdowns: 0,
    studentOrCharity: false,
    status: "in force",
    statusSince: null,
    origin: "brought in",
    ...given,
  };
}

export const licences: readonly LicenceRow[] = [
  licence({
    number: "LR-2026-0101",
    date: "2026-03-14",
    company: "quillbeck",
    production: "harbour-mornings",
    cueNumber: 1,
    mediaClass: "MC06",
    territory: "UK+IE",
    term: "1-year",
    currency: "GBP",
    priceMinor: 24_000,
    status: "payment disputed",
    statusSince: "2026-04-20",
    origin: "order O-1041",
  }),
  licence({
    number: "LR-2026-0102",
    date: "2026-03-14",
    company: "quillbeck",
    production: "harbour-mornings",
    cueNumber: 8,
    mediaClass: "MC02",
    territory: "World",
    term: "perpetual",
    currency: "GBP",
    priceMinor: 12_500,
    status: "refunded",
    statusSince: "2026-04-02",
    origin: "order O-1041",
  }),
  licence({
    number: "LR-2026-0103",
    date: "2026-02-20",
    company: "thistlemoth",
    production: "tide-tables",
    endClient: "Skerrymore TV",
    cueNumber: 2,
    mediaClass: "MC06",
    territory: "UK+IE",
    term: "3-years",
    episodes: 6,
    currency: "GBP",
    priceMinor: 153_600,
  }),
  licence({
    number: "LR-2026-0104",
    date: "2026-02-20",
    company: "thistlemoth",
    production: "tide-tables",
    part: "episode 3",
    endClient: "Skerrymore TV",
    cueNumber: 3,
    mediaClass: "MC06",
    territory: "GB",
    term: "1-year",
    currency: "GBP",
    priceMinor: 15_000,
  }),
  licence({
    number: "LR-2025-0877",
    date: "2025-06-01",
    company: "thistlemoth",
    production: "tide-tables",
    endClient: "Skerrymore TV",
    cueNumber: 12,
    mediaClass: "MC06",
    territory: "UK+IE",
    term: "1-year",
    lastUse: "2026-05-31",
    currency: "GBP",
    priceMinor: 24_000,
  }),
  licence({
    number: "LR-2026-0106",
    date: "2026-03-03",
    company: "thistlemoth",
    production: "tide-tables",
    part: "episode 3",
    endClient: "Skerrymore TV",
    cueNumber: 9,
    mediaClass: "MC06",
    territory: "UK+IE",
    term: "3-years",
    currency: "GBP",
    priceMinor: 38_400,
    status: "rights question open",
    statusSince: "2026-05-11",
  }),
  licence({
    number: "LR-2026-0107",
    date: "2026-04-08",
    company: "plumb-ferrule",
    production: "breakfast-actually",
    endClient: "Oatmere Breakfast Co.",
    cueNumber: 10,
    mediaClass: "MC08",
    territory: "GB",
    term: "3-months",
    lastUse: "2026-07-07",
    tier: "tier-2",
    extraCutdowns: 2,
    currency: "GBP",
    priceMinor: 66_150,
  }),
  licence({
    number: "LR-2026-0108",
    date: "2026-05-02",
    company: "lorne",
    production: "long-footbridge",
    cueNumber: 2,
    mediaClass: "MC01",
    territory: "World",
    term: "3-years",
    tier: "tier-2",
    currency: "GBP",
    priceMinor: 8320,
  }),
  licence({
    number: "LR-2026-0109",
    date: "2026-01-10",
    company: "ives-okafor-wren",
    production: "lowland-lights",
    cueNumber: 9,
    mediaClass: "MC11",
    territory: "World",
    term: "perpetual",
    tier: "tier-1",
    currency: "GBP",
    priceMinor: 156_000,
    status: "rights question open",
    statusSince: "2026-05-11",
  }),
  licence({
    number: "LR-2026-0110",
    date: "2026-04-15",
    company: "hargrove-lindqvist",
    production: "meet-the-gasket",
    cueNumber: 15,
    mediaClass: "MC04",
    territory: "CA",
    term: "3-years",
    tier: "tier-2",
    currency: "USD",
    priceMinor: 14_400,
  }),
  licence({
    number: "LR-2026-0111",
    date: "2026-04-22",
    company: "cloudbarrow",
    production: "kit-cloud-engine",
    cueNumber: 25,
    mediaClass: "MC13",
    territory: "World",
    term: "perpetual",
    tier: "tier-1",
    currency: "USD",
    priceMinor: 55_000,
  }),
  licence({
    number: "LR-2026-0112",
    date: "2026-05-05",
    company: "skerrymore",
    production: "skerrymore-promo",
    cueNumber: 18,
    mediaClass: "MC14",
    territory: "UK+IE",
    term: "3-months",
    tier: "tier-1",
    currency: "USD",
    priceMinor: 36_480,
  }),
  licence({
    number: "LR-2026-0113",
    date: "2026-05-06",
    company: "ferries-student",
    production: "ferries-of-nowhere",
    cueNumber: 30,
    mediaClass: "MC10",
    territory: "BE",
    term: "1-year",
    studentOrCharity: true,
    currency: "EUR",
    priceMinor: 3800,
  }),
];

/** Numbers go on from here. */
export const nextLicenceNumber = "LR-2026-0114";
