import type { ContainerFacts } from "./container-facts";
import type { Measures } from "./meter";
import type { CheckCode, CheckVerdict, Ending } from "./states";

export interface Check {
  code: CheckCode;
  /** Stable name of the row, for storage and tests. */
  check: string;
  verdict: CheckVerdict;
  /** One plain sentence. */
  what: string;
  /** Value as read, with its unit. */
  measured: string;
  limit: string;
  /** Where it is, seconds from the start; absent where the whole file is meant. */
  atS?: number;
  /** All places, where there are several (at most 64). */
  placesS?: number[];
  /** What to do; absent on a pass. */
  remedy?: string;
}

export interface CheckContext {
  /** "full", "bed", "30", "sting", "loop", "stem: drums" and so on. */
  versionRole: string;
  endingDeclared: Ending | null;
  genre?: string;
  /** The deliverer says that this recording is mono on purpose. */
  monoDeclared?: boolean;
  /** The delivery holds a stereo version of the same recording. */
  hasStereoCompanion?: boolean;
}

export type Row = Omit<Check, "code" | "check">;
/** One row of the table; null where it does not apply. */
export type Rule = (facts: ContainerFacts, measures: Measures, context: CheckContext) => Row | null;
export type NamedRule = readonly [code: CheckCode, check: string, rule: Rule];

export const pass = (what: string, measured: string, limit: string): Row => ({
  verdict: "pass",
  what,
  measured,
  limit,
});

/** A value with its unit; the minus is a minus. spaced() makes the blank a no-break one. */
export function withUnit(value: number, digits: number, unit: string): string {
  const text = value.toFixed(digits);
  return `${text.startsWith("-") ? `−${text.slice(1)}` : text} ${unit}`;
}

export function places(count: number): string {
  return count === 1 ? "1 place" : `${count} places`;
}

const UNITS = "kHz|Hz|kbit/s|dBTP|dBFS|dB|LUFS|LU|bit|ms|s|%|channels?|samples|runs?|places?|gaps?|clicks?";
const BEFORE_UNIT = new RegExp(`(\\d) (?=(?:${UNITS})(?![a-z]))`, "g");

/** Puts a no-break space between each number and its unit. */
export function spaced(text: string): string {
  return text.replace(BEFORE_UNIT, "$1\u00a0");
}
