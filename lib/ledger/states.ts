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
] as const;
export type AccountKind = (typeof ACCOUNT_KINDS)[number];
