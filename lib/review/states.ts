export const CASE_STATES = ["open", "waiting on composer", "waiting on second person", "closed"] as const;
export type CaseState = (typeof CASE_STATES)[number];

/** What a moderator can find, in our own words, with what will happen. */
export const FINDING_OUTCOMES = {
  "nothing in common": {
    effect: "clear",
    consequence: "It goes on to listing. The deliverer hears in one line.",
  },
  explained: { effect: "clear", consequence: "It goes on, with the reason kept." },
  "send back": {
    effect: "returned",
    consequence: "It waits for a correction. Everything already right is kept.",
  },
  "hold for rights": {
    effect: "held",
    consequence: "It is not listed while a rights question is open. Both sides are told the same facts.",
  },
  "cannot be listed": {
    effect: "refused",
    consequence:
      "It takes effect when a second person confirms. The deliverer then gets these reasons and may contest them, free, before somebody else. The recording stays here as a reference.",
  },
  "refer out": { effect: "held", consequence: "It waits for an outside opinion; money on it is held." },
} as const;
export type FindingOutcome = keyof typeof FINDING_OUTCOMES;

export const EXPLAINED_BY = [
  "own version",
  "shared material",
  "licensed sample",
  "old tune",
  "other title",
] as const;
export type ExplainedBy = (typeof EXPLAINED_BY)[number];

/** Rights reasons, as codes kept beside the words. */
export const RIGHTS_CODES = {
  R01: "same recording already listed by another party",
  R02: "contains another recording without shown permission",
  R03: "same composition as another work, no permission or credit",
  R04: "matches a reported work",
  R05: "sample or loop declaration missing, or its licence excludes this use",
  R06: "exclusivity conflict: already signed elsewhere",
  R07: "public-domain claim not supported",
  R08: "performer, voice or AI consent missing",
  R09: "identity of the submitter not established",
  T07: "wrong file: the version does not belong to its family",
  M02: "identifier already used by another recording",
} as const;
export type RightsCode = keyof typeof RIGHTS_CODES;

/** Innocent explanations come first; each is ticked off in writing. */
export const INNOCENT_EXPLANATIONS = [
  "own version",
  "shared material",
  "licensed sample",
  "old tune",
  "other title",
] as const;

/** Common practice: first look within two working days, answer within seven days. */
export const FIRST_LOOK_WORKING_DAYS = 2;
export const ANSWER_DAYS = 7;
export const DECISION_WORKING_DAYS = 5;
/** How long an upheld finding counts. */
export const UPHELD_MONTHS = 24;
