import { currencySign, minorUnits } from "./currencies";
import { type Fraction, fraction, roundHalfUp } from "./fraction";

/** An amount in whole minor units: pence, cents, or yen. */
export interface Money {
  readonly minor: bigint;
  readonly currency: string;
}

export class CurrencyMismatch extends Error {
  override name = "CurrencyMismatch";
  constructor(a: string, b: string) {
    super(`amounts of ${a} and ${b} cannot be combined`);
  }
}

export type ParsedMoney = { ok: true; money: Money } | { ok: false; message: string };

const MINUS = "\u2212";
const NO_BREAK_SPACE = "\u00a0";
/** Keeps every parsed amount far inside a signed 64-bit column. */
const MAX_DIGITS = 15;

/** Throws RangeError for a code that is not a currency. */
export function money(minor: bigint, currency: string): Money {
  minorUnits(currency);
  return { minor, currency };
}

function together(a: Money, b: Money): string {
  if (a.currency !== b.currency) throw new CurrencyMismatch(a.currency, b.currency);
  return a.currency;
}

export function addMoney(a: Money, b: Money): Money {
  return { minor: a.minor + b.minor, currency: together(a, b) };
}

export function subtractMoney(a: Money, b: Money): Money {
  return { minor: a.minor - b.minor, currency: together(a, b) };
}

export function negateMoney(a: Money): Money {
  return { minor: -a.minor, currency: a.currency };
}

/** Negative, zero or positive, as for Array.sort. */
export function compareMoney(a: Money, b: Money): -1 | 0 | 1 {
  together(a, b);
  return a.minor < b.minor ? -1 : a.minor > b.minor ? 1 : 0;
}

export function sumMoney(currency: string, amounts: readonly Money[]): Money {
  return amounts.reduce(addMoney, money(0n, currency));
}

/** Multiplies exactly and rounds half-up once, away from zero below it. */
export function multiplyMoney(amount: Money, factor: Fraction): Money {
  const minor = roundHalfUp(fraction(amount.minor * factor.numerator, factor.denominator));
  return { minor, currency: amount.currency };
}

/** A share in basis points, rounded half-up once: 15 % is 1500. */
export function applyBps(minor: bigint, bps: number): bigint {
  if (!Number.isSafeInteger(bps)) throw new RangeError(`basis points must be whole, got ${bps}`);
  return roundHalfUp(fraction(minor * BigInt(bps), 10_000n));
}

/** "384.00", "500", "-77.20": the form for data, with a plain hyphen and no grouping. */
export function decimalOf({ minor, currency }: Money): string {
  const places = minorUnits(currency);
  const digits = (minor < 0n ? -minor : minor).toString().padStart(places + 1, "0");
  const text = places === 0 ? digits : `${digits.slice(0, -places)}.${digits.slice(-places)}`;
  return minor < 0n ? `-${text}` : text;
}

/** "£1,536.00", "−£77.20", "¥500", "CAD 12.00": the form for people. */
export function formatMoney(amount: Money): string {
  const [whole = "0", decimals] = decimalOf(amount).replace("-", "").split(".");
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, ",");
  const figure = decimals === undefined ? grouped : `${grouped}.${decimals}`;
  const sign = currencySign(amount.currency) ?? amount.currency + NO_BREAK_SPACE;
  return (amount.minor < 0n ? MINUS : "") + sign + figure;
}

/** Reads what a person types: "240", "1,536.00", "£240.00", "GBP 240", "−5". Commas only group thousands. */
export function parseMoney(text: string, currency: string): ParsedMoney {
  const places = minorUnits(currency);
  const sign = currencySign(currency);
  let rest = text.trim().replace(/[\u2212\u2013]/g, "-");
  const negative = rest.startsWith("-");
  if (negative) rest = rest.slice(1).trim();
  for (const mark of [currency, ...(sign ? [sign] : [])]) {
    if (rest.toUpperCase().startsWith(mark)) {
      rest = rest.slice(mark.length).trim();
      break;
    }
  }
  const match = /^(\d+|\d{1,3}(?:,\d{3})+)(?:\.(\d+))?$/.exec(rest);
  if (!match)
    return { ok: false, message: `Write the amount in figures, for example ${exampleOf(currency)}.` };
  const [, grouped = "0", decimals = ""] = match;
  if (decimals.length > places) {
    const limit = places === 0 ? "no decimals" : `at most ${places} decimals`;
    return { ok: false, message: `An amount in ${currency} has ${limit}; this one has ${decimals.length}.` };
  }
  const digits = grouped.replaceAll(",", "") + decimals.padEnd(places, "0");
  if (digits.replace(/^0+/, "").length > MAX_DIGITS) {
    return { ok: false, message: "This amount is too large." };
  }
  const minor = BigInt(digits);
  return { ok: true, money: { minor: negative ? -minor : minor, currency } };
}

function exampleOf(currency: string): string {
  return decimalOf({ minor: 240n * 10n ** BigInt(minorUnits(currency)), currency });
}

/**
 * Divides a whole amount by weights so that the parts sum exactly (largest remainder, also called Hamilton's
 * method: Balinski & Young, Fair Representation, 2nd ed. 2001). Everyone gets the floor of the exact quota; the
 * units left over go to the largest fractions, equal fractions in list order. A negative total gives the exact
 * negation of the positive one. Refunds must use the stored parts of the original, never this function with the
 * original weights: with other totals a smaller part may grow (the Alabama paradox).
 *
 * Throws RangeError if a weight is negative, or if there is something to divide and no weight above 0.
 */
export function allocate(total: bigint, weights: readonly bigint[]): bigint[] {
  if (total < 0n) return allocate(-total, weights).map((part) => -part);
  if (weights.some((weight) => weight < 0n)) throw new RangeError("a weight may not be negative");
  const sum = weights.reduce((a, b) => a + b, 0n);
  if (sum === 0n) {
    if (total === 0n) return weights.map(() => 0n);
    throw new RangeError(`nobody to give ${total} to: every weight is 0`);
  }
  const parts = weights.map((weight) => (total * weight) / sum);
  const left = Number(total - parts.reduce((a, b) => a + b, 0n));
  const byRemainder = weights
    .map((weight, index) => ({ index, remainder: (total * weight) % sum }))
    .sort((a, b) => (a.remainder === b.remainder ? a.index - b.index : a.remainder > b.remainder ? -1 : 1));
  for (const { index } of byRemainder.slice(0, left)) parts[index] = (parts[index] ?? 0n) + 1n;
  return parts;
}
