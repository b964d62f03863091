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
