import type { LibraryCode } from "./cue-row";

export interface LibraryRow {
  readonly code: LibraryCode;
  readonly name: string;
  readonly city: string;
  /** ISO 3166-1 alpha-2. */
  readonly country: string;
  readonly currency: "GBP" | "USD" | "EUR";
  readonly ipi: string;
  readonly character: string;
  /** The writers' part of what the library receives. */
  readonly writersShareBps: number;
  readonly terms: string;
  readonly timeZone: string;
}

export const libraries: readonly LibraryRow[] = [
  {
    code: "SM",
    name: "Saltmarrow Music Library",
    city: "Leith",
    country: "GB",
    currency: "GBP",
    ipi: "99900002152",
    character: "acoustic, drama, documentary",
    writersShareBps: 5000,
    terms: "exclusive per cue; 50 % of library receipts; advances to some",
    timeZone: "Europe/London",
  },
  {
    code: "BC",
    name: "Brindlecote Cues",
    city: "Hamilton (Ontario)",
    country: "CA",
    currency: "USD",
    ipi: "99900002250",
    character: "corporate, electronic, trailer",
    writersShareBps: 4000,
    terms: "mixed exclusive and non-exclusive; 40 %; uses many loops",
    timeZone: "America/Toronto",
  },
  {
    code: "OA",
    name: "Ostravelle Audiothèque",
    city: "Namur",
    country: "BE",
    currency: "EUR",
    ipi: "99900002348",
    character: "jazz, percussion, archive",
    writersShareBps: 6000,
    terms: "non-exclusive; 60 %; the owner reads every statement",
    timeZone: "Europe/Brussels",
  },
];
