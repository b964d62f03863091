import type { ShortlistState } from "@/lib/productions/states";

/** One cue of a shortlist as its screens draw it. */
export interface ShortlistLine {
  itemId: string;
  familyId: string;
  number: string;
  title: string;
  libraryName: string;
  libraryCode: string;
  currency: string;
  /** A search for cues like it. */
  nearHref: string;
  state: ShortlistState;
  note: string;
  addedBy: string;
  /** Why it cannot be licensed at present, or null. */
  unavailable: string | null;
  version: { recordingId: string; label: string; durationS: number } | null;
  versions: { recordingId: string; label: string; durationS: number }[];
  contour: string | null;
  price: {
    text: string | null;
    minor: string | null;
    sentence: string;
    pricedAt: string | null;
    until: string | null;
  } | null;
}
