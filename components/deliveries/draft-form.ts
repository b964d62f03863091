import type { z } from "zod";
import { Declaration, DeliveryForm, SharePercent } from "@/lib/deliveries/schemas";

/** The form of the page: the verb's own schemas, side by side. The deal is part of what is signed. */
export const DraftForm = DeliveryForm.omit({ deal: true }).extend({ declaration: Declaration });
export type DraftInput = z.input<typeof DraftForm>;
export type DraftOutput = z.output<typeof DraftForm>;

const EMPTY = {
  title: "",
  otherTitles: [],
  iswc: "",
  bpm: null,
  musicalKey: null,
  genre: "",
  moreGenres: [],
  moods: [],
  instruments: [],
  uses: [],
  voice: "none",
  voiceLanguage: null,
  ending: "",
  shape: "",
  density: "",
  description: "",
  keywords: [],
  sections: [],
  explicitContent: "none",
  yearRecorded: null,
  restrictedTerritories: [],
  refusedUses: [],
  writers: [],
  publishers: [],
  linkedFamilyId: null,
};

const EMPTY_DECLARATION = {
  authorship: false,
  recordingOwner: "",
  performers: "",
  samples: [],
  preExisting: "none",
  preExistingWords: "",
  deal: "exclusive",
  truth: false,
  signedName: "",
};

/** What was kept, with everything that is not filled in yet standing empty. */
export function fromDraft(draft: Record<string, unknown>): DraftInput {
  const declaration = (draft.declaration ?? {}) as Record<string, unknown>;
  return {
    ...EMPTY,
    ...draft,
    declaration: { ...EMPTY_DECLARATION, ...declaration },
  } as unknown as DraftInput;
}

export const STEPS = [
  { id: "files", words: "Files" },
  { id: "music", words: "The music" },
  { id: "writers", words: "Writers" },
  { id: "declarations", words: "Declarations" },
  { id: "sign", words: "Sign" },
] as const;
export type StepId = (typeof STEPS)[number]["id"];

/** The step on which a field stands. */
export function stepOfField(path: readonly PropertyKey[]): StepId {
  const [first, second] = path;
  if (first === "writers" || first === "publishers") return "writers";
  if (first !== "declaration") return "music";
  return second === "signedName" || second === "truth" ? "sign" : "declarations";
}

export const WORDS_OF_FIELDS: Record<string, string> = {
  title: "the title",
  bpm: "the tempo",
  genre: "the genre",
  moods: "at least one mood",
  instruments: "at least one leading instrument",
  ending: "how it ends",
  shape: "its shape",
  density: "how full it is",
  description: "a description of 40 to 300 characters",
  voice: "the voice",
  writers: "the writers and their shares",
  publishers: "the publishers and their shares",
  authorship: "the statement of authorship",
  recordingOwner: "who owns the recording",
  performers: "who performed",
  samples: "the samples",
  truth: "the closing statement",
  signedName: "your name",
};

export interface Sum {
  bps: number;
  isWhole: boolean;
  /** "99.99, missing 0.01" */
  words: string;
}

/** What the shares written so far add to; a row that is not a share yet counts as nothing. */
export function sumOf(rows: readonly { share?: string }[]): Sum {
  const bps = rows.reduce((total, row) => {
    const share = SharePercent.safeParse(row.share ?? "");
    return total + (share.success ? share.data : 0);
  }, 0);
  const text = (value: number) => (value / 100).toFixed(2);
  const rest =
    bps === 10_000
      ? ""
      : bps < 10_000
        ? `, missing ${text(10_000 - bps)}`
        : `, ${text(bps - 10_000)} too many`;
  return { bps, isWhole: bps === 10_000, words: `${text(bps)}${rest}` };
}
