export const NOTICE_STATES = ["received", "incomplete", "under review", "decided"] as const;
export type NoticeState = (typeof NOTICE_STATES)[number];

/** How sure a reported work is. Only supported and adjudicated ones hold a delivery by their sound. */
export const EVIDENCE_LEVELS = {
  claimed: "Somebody says so. Deliveries are not held by it; a person looks.",
  supported: "Papers or recordings support it. A delivery that contains it is held for a person.",
  adjudicated: "A court or both parties have settled it. A delivery that contains it is held for a person.",
} as const;
export type EvidenceLevel = keyof typeof EVIDENCE_LEVELS;

export const CONCERNS = ["work", "recording", "both"] as const;
export const CAPACITIES = ["owner", "agent", "licensee", "heir"] as const;
export const GROUNDS = {
  "not licensed": "It is used without a licence.",
  "no credit": "The writers are not credited.",
  sample: "A part of the recording is used in another.",
  composition: "The composition is used.",
  "performer or voice": "A performance or a voice is used without consent.",
} as const;
export type Ground = keyof typeof GROUNDS;

export const GOOD_FAITH_TEXT =
  "I believe in good faith that the use I describe is not authorised by the owner, an agent of the owner, or the law.";
export const ACCURACY_TEXT =
  "What I say here is accurate and complete as far as I know, and I may act for the owner.";

/** Limits in number and size, a day, for one address. */
export const NOTICES_PER_DAY = 5;
export const CONFIDENTIAL_LIMIT_BYTES = 300 * 2 ** 20;
export const CONFIRM_HOURS = 48;
/** Common practice: a report gets its first reading within one working day. */
export const TRIAGE_WORKING_DAYS = 1;
/** A reported work is looked at again after this. */
export const REVIEW_MONTHS = 12;
