/** What kind of overlap a hit looks like. */
export const RELATIONS = [
  "same recording",
  "altered copy",
  "excerpt",
  "shared material",
  "own version",
  "same tune",
] as const;
export type Relation = (typeof RELATIONS)[number];

/** How a screening of one recording ended. A match is a question: software holds or lets through, and never refuses. */
export const OUTCOMES = ["clear", "explained", "held", "not comparable"] as const;
export type Outcome = (typeof OUTCOMES)[number];

/** What can explain a hit without a person. */
export const EXPLANATIONS = ["family", "registered loop", "other title"] as const;
export type Explanation = (typeof EXPLANATIONS)[number];

export const SUBJECT_KINDS = ["recording", "reported", "loop"] as const;
export type SubjectKind = (typeof SUBJECT_KINDS)[number];

export const CHANNELS = ["mid", "left", "right"] as const;
export type Channel = (typeof CHANNELS)[number];

export const STANDING_LIMITS =
  "This record says which sound recordings were compared and what shared audio was found. It does not compare melodies, harmonies or lyrics unless stated, does not cover music outside the index, and is not a legal opinion.";
