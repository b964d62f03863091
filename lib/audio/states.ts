/** Version roles of a family that the technical checks treat specially. The full list belongs to the catalogue. */
export const EXACT_CUTDOWN_S = [60, 30, 20, 15, 10, 6] as const;
export const STING_S_MAX = 7;

export const CHECK_VERDICTS = ["pass", "warn", "return"] as const;
export type CheckVerdict = (typeof CHECK_VERDICTS)[number];

/** Return codes of a technical check. */
export const CHECK_CODES = ["T01", "T02", "T03", "T04", "T05", "T06"] as const;
export type CheckCode = (typeof CHECK_CODES)[number];

export const ENDINGS = ["button", "ring-out", "fade", "loop-safe", "cut"] as const;
export type Ending = (typeof ENDINGS)[number];
