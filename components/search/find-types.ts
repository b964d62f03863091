import type { Ending } from "@/components/ui/format";

export interface FoundVersion {
  recordingId: string;
  role: string;
  label: string;
  durationS: number;
  ending: Ending | null;
  canBeHeard: boolean;
}

export interface FoundPrice {
  /** "from" is the card's lowest; "exact" is of the production's use; "none" says why in `sentence`. */
  kind: "from" | "exact" | "none";
  text: string | null;
  sentence: string | null;
}

/** One result, ready to be drawn: it travels as JSON. */
export interface FoundCue {
  familyId: string;
  number: string;
  title: string;
  libraryName: string;
  libraryCode: string;
  writers: string[];
  durationS: number;
  bpm: number | null;
  musicalKey: string | null;
  /** The head first. */
  versions: FoundVersion[];
  contour: string | null;
  /** Where it opens, if a section says so. */
  opensS: number | null;
  price: FoundPrice;
  missed: number;
  verdict: string;
  why: string;
}

export interface FoundPage {
  total: number;
  fitting: number;
  onSale: number;
  asked: number;
  page: number;
  pageSize: number;
  cues: FoundCue[];
}

/** What the open strip of a cue shows beyond its row. */
export interface FoundDetail {
  number: string;
  writers: string[];
  sections: { letter: string; fromS: number; toS: number; words: string; lufs: number | null }[];
  versions: (FoundVersion & {
    contour: string | null;
    pieces: { fromS: number; toS: number; atS: number }[] | null;
    cutFrom: string | null;
  })[];
}
