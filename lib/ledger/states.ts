/** Kinds of account. Held and available payables have one account a payee; VAT one a country; the others one each. */
export const ACCOUNT_KINDS = [
  "bank",
  "processor clearing",
  "vat payable",
  "platform fee income",
  "processor fee cost",
  "processor fee recharged",
  "library held",
  "library available",
  "composer held",
  "composer available",
  "dispute cost",
  "refunds to send",
] as const;
export type AccountKind = (typeof ACCOUNT_KINDS)[number];

/** Where a payable stands: its postings are serialised by its row, whose version each of them raises. */
export const PAYABLE_KINDS = [
  "library held",
  "library available",
  "composer held",
  "composer available",
] as const satisfies readonly AccountKind[];

export const ENTRY_CODES = [
  "capture",
  "settlement",
  "hold ends",
  "recoupment",
  "payout",
  "refund",
  "dispute",
  "recoupment reversed",
  "dispute charge",
  "reversal",
  "payment refused",
  "payment returned",
] as const;
export type EntryCode = (typeof ENTRY_CODES)[number];

/** What an entry is called in front of people. */
export const ENTRY_WORDS: Readonly<Record<EntryCode, string>> = {
  capture: "Sale",
  settlement: "Settlement",
  "hold ends": "Hold ended",
  recoupment: "Advance repaid",
  payout: "Payout",
  refund: "Refund",
  dispute: "Payment dispute",
  "recoupment reversed": "Repayment of an advance put back",
  "dispute charge": "Charge for a dispute",
  reversal: "Dispute won",
  "payment refused": "Payment without a licence",
  "payment returned": "Payment given back",
};

/** Days from a capture until its earnings become available, if the setting `ledger.holdDays` does not say otherwise. */
export const HOLD_DAYS = 14;
export const PLATFORM_FEE_BPS = 1500;
/** What is less than this is carried to the next payout, in major units of each currency. */
export const PAYOUT_THRESHOLD = 25;
/** Days in which nothing is paid after a payee's bank account was changed. */
export const BANK_HOLD_DAYS = 7;
/** The zone in which the journal's days and months begin. */
export const JOURNAL_ZONE = "Etc/UTC";

export const PAYEE_STATES = ["not started", "under way", "ready"] as const;
export type PayeeState = (typeof PAYEE_STATES)[number];

export const RUN_STATES = ["prepared", "released", "confirmed", "withdrawn"] as const;
export type RunState = (typeof RUN_STATES)[number];

export const PAYOUT_STATES = ["prepared", "sending", "paid", "carried", "failed", "withdrawn"] as const;
export type PayoutState = (typeof PAYOUT_STATES)[number];
