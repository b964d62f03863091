/** What an order goes through. A refund or a dispute changes its licences, not the order. */
export const ORDER_STATES = [
  "proposed",
  "awaiting payment",
  "paid",
  "licensed",
  "refused",
  "withdrawn",
] as const;
export type OrderState = (typeof ORDER_STATES)[number];

export const RECORD_ORIGINS = ["issued here", "brought in"] as const;
export type RecordOrigin = (typeof RECORD_ORIGINS)[number];

/** Days for which a proposed price stands. */
export const OFFER_DAYS = 30;
/** Look-ups of proof codes from one address in a minute. */
export const CHECKS_PER_MINUTE = 30;
/** How long a link to a master works. */
export const MASTER_LINK_MINUTES = 10;
/** Terms offered on screen, in months; null is perpetual. */
export const TERM_CHOICES = [3, 12, 36, 60, null] as const;

/** The licensee says so with every approval; its words stand in the record. */
export const AUTHORITY_STATEMENT =
  "I may accept these terms for the licensee, and what I have said about the production, its client and the size of the use is true.";

/** What a licensee may keep from the public page until a release, as its words on screen. */
export const WITHHOLDABLE = {
  "licensee.name": "the licensee's name",
  "licensee.endClient": "the client's name",
  "production.title": "the production's title",
  "production.parts": "which episodes or parts",
} as const;
export type Withholdable = keyof typeof WITHHOLDABLE;

/** Never on the public page: fee, address, references and the person who accepted. */
export const PUBLIC_FIELDS = Object.keys(WITHHOLDABLE) as Withholdable[];
