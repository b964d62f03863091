/** States of one delivered file. A delivery shows the worst of its versions. */
export const VERSION_STATES = [
  "arrived",
  "measuring",
  "measured",
  "unreadable",
  "screening",
  "clear",
  "held",
  "returned",
  "refused",
  "listed",
] as const;
export type VersionState = (typeof VERSION_STATES)[number];

export const DELIVERY_STATES = ["draft", "delivered", "listed", "returned", "refused", "withdrawn"] as const;
export type DeliveryState = (typeof DELIVERY_STATES)[number];

/** What a delivery shows, worst first. */
export const STANDINGS = [
  "refused",
  "rights hold",
  "needs you",
  "held for a person",
  "working",
  "waiting for others",
  "clear",
] as const;
export type Standing = (typeof STANDINGS)[number];

export const DECLARATION_TEXT_VERSION = "2026-05";

/** Common practice: co-writers have fourteen days, with a reminder a day. */
export const ANSWER_DAYS = 14;

/** Reasons for return that an owner may give at editorial acceptance. */
export const EDITORIAL_CODES = {
  Q01: "performance, mix or programming below the library's standard",
  Q02: "too close to the existing catalogue",
  Q03: "imitates a brief too literally",
  M03: "title uses a brand, a person or another work's name",
  M04: "tags mislead",
  M05: "lyrics missing or content flag wrong",
} as const;
export type EditorialCode = keyof typeof EDITORIAL_CODES;

/** Cutdowns are expected to match their own full mix. */
export const CUTDOWN_ROLES = ["60", "30", "20", "15", "10", "6"] as const;
