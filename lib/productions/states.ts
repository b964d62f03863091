/** Where a cue of a shortlist stands. */
export const SHORTLIST_STATES = ["picked", "considering", "out"] as const;
export type ShortlistState = (typeof SHORTLIST_STATES)[number];

/** Offered as words for what a production is; any other may be written. The licence record repeats them. */
export const PRODUCTION_KINDS = [
  "TV programme",
  "radio programme",
  "advert",
  "film",
  "online film or series",
  "podcast",
  "game or app",
  "training or internal film",
  "event or exhibition",
  "other",
] as const;
