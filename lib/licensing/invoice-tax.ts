import type { CivilDate } from "@/lib/kernel/calendar";
import { allocate, applyBps } from "@/lib/kernel/money";

/**
 * For the accountant. The seller is one UK company, so the table holds the UK's standard rate and nothing else; it
 * is common practice, not advice, and a market is opened by adding a dated row that an accountant has settled.
 */
export interface TaxRate {
  readonly country: string;
  readonly rateBps: number;
  readonly from: CivilDate;
  /** The last date, or null while it holds. */
  readonly through: CivilDate | null;
  readonly words: string;
}

export const TAX_TABLE_NOTE = "For the accountant";

export const TAX_RATES: readonly TaxRate[] = [
  { country: "GB", rateBps: 1750, from: "2010-01-01", through: "2011-01-03", words: "VAT 17.5 %" },
  { country: "GB", rateBps: 2000, from: "2011-01-04", through: null, words: "VAT 20 %" },
];

const HOME = "GB";
export const REVERSE_CHARGE_WORDS = "Reverse charge: the customer accounts for VAT in its own country.";

export interface TaxBuyer {
  /** ISO 3166 two-letter code. */
  readonly country: string;
  readonly business: boolean;
}

export type TaxTreatment =
  | { ok: true; rateBps: number; words: string; reverseCharge: boolean }
  | { ok: false; sentence: string };

/** `rates` in any order; a tax point that no row covers is refused, not guessed. */
export function taxTreatment(
  buyer: TaxBuyer,
  taxPoint: CivilDate,
  rates: readonly TaxRate[] = TAX_RATES,
): TaxTreatment {
  if (buyer.country !== HOME) {
    if (buyer.business) return { ok: true, rateBps: 0, words: REVERSE_CHARGE_WORDS, reverseCharge: true };
    return {
      ok: false,
      sentence: "We cannot sell to private customers outside the United Kingdom. Please buy as a company.",
    };
  }
  const rate = rates.find(
    ({ country, from, through }) =>
      country === buyer.country && from <= taxPoint && (through === null || taxPoint <= through),
  );
  if (!rate) return { ok: false, sentence: `No tax rate is on file for ${buyer.country} on ${taxPoint}.` };
  return { ok: true, rateBps: rate.rateBps, words: rate.words, reverseCharge: false };
}

export interface InvoiceTotals {
  readonly netMinor: bigint;
  readonly taxMinor: bigint;
  readonly grossMinor: bigint;
  /** Tax of each line, in the order of the lines; they sum to the invoice's tax. */
  readonly lineTaxMinor: readonly bigint[];
  /** Which of the two customary ways of rounding was used, for the invoice to record. */
  readonly rounded: "per invoice";
}

/** Tax is computed once on the invoice's net and shared over its lines by largest remainder. */
export function invoiceTotals(lineNetMinor: readonly bigint[], rateBps: number): InvoiceTotals {
  const netMinor = lineNetMinor.reduce((sum, net) => sum + net, 0n);
  const taxMinor = applyBps(netMinor, rateBps);
  const lineTaxMinor = allocate(taxMinor, lineNetMinor);
  return { netMinor, taxMinor, grossMinor: netMinor + taxMinor, lineTaxMinor, rounded: "per invoice" };
}
