import type { CompanyKey } from "./people";

export interface CompanyRow {
  readonly key: CompanyKey;
  readonly name: string;
  readonly country: string;
  readonly email: string;
}

export const companies: readonly CompanyRow[] = [
  { key: "thistlemoth", name: "Thistlemoth Pictures", country: "GB", email: "accounts@thistlemoth.example" },
  { key: "skerrymore", name: "Skerrymore TV", country: "GB", email: "promos@skerrymore.example" },
  { key: "plumb-ferrule", name: "Plumb & Ferrule", country: "GB", email: "accounts@plumbferrule.example" },
  { key: "lorne", name: "Lorne Abernathy-Diaz", country: "GB", email: "lorne@longfootbridge.example" },
  {
    key: "ives-okafor-wren",
    name: "Ives & Okafor-Wren Films",
    country: "GB",
    email: "accounts@ivesokaforwren.example",
  },
  { key: "cloudbarrow", name: "Cloudbarrow Play", country: "GB", email: "accounts@cloudbarrow.example" },
  {
    key: "hargrove-lindqvist",
    name: "Hargrove-Lindqvist Valves",
    country: "CA",
    email: "training@hargrovelindqvist.example",
  },
  { key: "quillbeck", name: "Quillbeck Media", country: "GB", email: "accounts@quillbeck.example" },
  {
    key: "ferries-student",
    name: "Ferries of Nowhere (student production)",
    country: "BE",
    email: "film@ferriesofnowhere.example",
  },
];

export interface ProductionRow {
  readonly key: string;
  readonly title: string;
  readonly kind: string;
  readonly company: CompanyKey;
  readonly client: string | null;
  readonly facts: string;
}

export const productions: readonly ProductionRow[] = [
  {
    key: "tide-tables",
    title: "Tide Tables",
    kind: "documentary series, 6 × 50 min",
    company: "thistlemoth",
    client: "Skerrymore TV",
    facts: "First airing 20 March 2026, UK and Ireland; repeat 12 June 2026.",
  },
  {
    key: "breakfast-actually",
    title: "Breakfast, Actually",
    kind: "advert",
    company: "plumb-ferrule",
    client: "Oatmere Breakfast Co.",
    facts: "Television advert with two cutdowns.",
  },
  {
    key: "long-footbridge",
    title: "The Long Footbridge",
    kind: "podcast",
    company: "lorne",
    client: null,
    facts: "Fewer than 100,000 downloads an episode.",
  },
  {
    key: "lowland-lights",
    title: "Lowland Lights",
    kind: "feature film",
    company: "ives-okafor-wren",
    client: null,
    facts: "Budget £640,000.",
  },
  {
    key: "kit-cloud-engine",
    title: "Kit and the Cloud Engine",
    kind: "game",
    company: "cloudbarrow",
    client: null,
    facts: "Fewer than 50,000 copies.",
  },
  {
    key: "meet-the-gasket",
    title: "Meet the Gasket",
    kind: "training film",
    company: "hargrove-lindqvist",
    client: null,
    facts: "1,900 staff.",
  },
  {
    key: "harbour-mornings",
    title: "Harbour Mornings",
    kind: "web film",
    company: "quillbeck",
    client: null,
    facts: "",
  },
  {
    key: "skerrymore-promo",
    title: "Skerrymore TV promo",
    kind: "promo, out of context",
    company: "skerrymore",
    client: null,
    facts: "UK and Ireland, spend under 250,000.",
  },
  {
    key: "ferries-of-nowhere",
    title: "Ferries of Nowhere",
    kind: "student film",
    company: "ferries-student",
    client: null,
    facts: "Festivals only.",
  },
];

/** Territories sold as one; the list is frozen with each licence. */
export const namedRegions = { "UK+IE": ["GB", "IE"] } as const;
