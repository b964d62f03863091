/** States of a family and of each of its recordings. */
export const FAMILY_STATES = ["pending", "listed", "withdrawn", "refused", "returned"] as const;
export type FamilyState = (typeof FAMILY_STATES)[number];

export const RECORDING_STATES = [
  "pending",
  "clear",
  "held",
  "listed",
  "withdrawn",
  "refused",
  "returned",
] as const;
export type RecordingState = (typeof RECORDING_STATES)[number];

export const DEALS = ["exclusive", "non-exclusive"] as const;
export type Deal = (typeof DEALS)[number];

export const WRITER_ROLES = {
  C: "composer",
  A: "author of words",
  CA: "composer and author",
  AR: "arranger",
  AD: "adaptor",
  TR: "translator",
} as const;
export type WriterRole = keyof typeof WRITER_ROLES;

/** Versions that a brief may ask for; each may be met by more than one role. */
export const WANTED_VERSIONS = {
  bed: "a bed",
  "no-lead": "no lead",
  instrumental: "an instrumental",
  "no-drums": "no drums",
  "60": "a 60",
  "30": "a 30",
  "15": "a 15",
  sting: "a sting",
  loop: "a loop",
  stems: "stems",
} as const;
export type WantedVersion = keyof typeof WANTED_VERSIONS;

/** Kinds of thing a brief may exclude; "word" is a word of the description. */
export const EXCLUDED_KINDS = ["mood", "use", "instrument", "genre", "voice", "word"] as const;
export type ExcludedKind = (typeof EXCLUDED_KINDS)[number];
