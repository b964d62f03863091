import { mod112 } from "./check-characters";

/**
 * `normalised` is the form to store: capitals, no punctuation. `suggestion` is given only where the shape is
 * complete and nothing but the check digits differs. A valid check digit never proves that the number belongs to
 * this person or work: show the name beside it and let the payee confirm.
 */
export type IdentifierCheck =
  | { ok: true; normalised: string }
  | { ok: false; message: string; suggestion?: string };

function compact(text: string): string {
  return text.toUpperCase().replace(/[\s.\-\u2010-\u2015\u2212]/g, "");
}

function checkMismatch(suggestion: string, plural = false): IdentifierCheck {
  const what = plural ? "The check digits do not match" : "The check digit does not match";
  return { ok: false, message: `${what}; did you mean ${suggestion}?`, suggestion };
}

/** ISRC (ISO 3901): two letters, three letters or digits, two digits of the year, five digits; no check digit. */
export function checkIsrc(text: string): IdentifierCheck {
  // Only where it is too long: IS-RC… is a prefix that Iceland could have given out.
  const code = compact(text).replace(/^ISRC:?(?=.{12})/, "");
  const fail = (message: string): IdentifierCheck => ({ ok: false, message });
  if (code.length !== 12) return fail(`An ISRC has 12 characters; this one has ${code.length}.`);
  if (!/^[A-Z]{2}/.test(code)) return fail("An ISRC begins with two letters, for example GB.");
  if (!/^.{2}[A-Z0-9]{3}/.test(code))
    return fail("Characters 3 to 5 of an ISRC, which name the registrant, are letters or digits.");
  if (!/^.{5}\d{2}/.test(code)) return fail("Characters 6 and 7 of an ISRC, the year, are digits.");
  if (!/^.{7}\d{5}$/.test(code)) return fail("The last five characters of an ISRC are digits.");
  return { ok: true, normalised: code };
}

/** "GB-ABC-24-00001", from the stored form. */
export function formatIsrc(isrc: string): string {
  return `${isrc.slice(0, 2)}-${isrc.slice(2, 5)}-${isrc.slice(5, 7)}-${isrc.slice(7)}`;
}

/** The prefix code (first five characters) that says which registrant assigned the ISRC. */
export function isrcPrefix(isrc: string): string {
  return isrc.slice(0, 5);
}

function weightedCheck(start: number, nineDigits: string): string {
  const sum = [...nineDigits].reduce((total, digit, index) => total + (index + 1) * Number(digit), start);
  return String((10 - (sum % 10)) % 10);
}

/**
 * ISWC (ISO 15707): T, nine digits, one check digit with weights 1 to 9 from a start value of 1. The rule catches
 * every exchange of neighbours but about one in ten wrong digits passes it.
 */
export function checkIswc(text: string): IdentifierCheck {
  const code = compact(text).replace(/^ISWC:?/, "");
  if (!code.startsWith("T")) return { ok: false, message: "An ISWC begins with the letter T." };
  if (!/^T\d*$/.test(code)) return { ok: false, message: "An ISWC has only digits after the T." };
  if (code.length !== 11)
    return { ok: false, message: `An ISWC has 10 digits after the T; this one has ${code.length - 1}.` };
  const check = weightedCheck(1, code.slice(1, 10));
  return check === code[10]
    ? { ok: true, normalised: code }
    : checkMismatch(formatIswc(code.slice(0, 10) + check));
}

/** "T-034.524.680-1", from the stored form. */
export function formatIswc(iswc: string): string {
  return `T-${iswc.slice(1, 4)}.${iswc.slice(4, 7)}.${iswc.slice(7, 10)}-${iswc.slice(10)}`;
}

/**
 * IPI name number (CISAC): nine digits weighted 10 to 2, sum modulo 101, two check digits. A remainder of 1 gives
 * 00 like a remainder of 0. Leading zeros that were left off are put back; then no suggestion is made, because a
 * digit may be missing elsewhere.
 */
export function checkIpiNameNumber(text: string): IdentifierCheck {
  const code = compact(text).replace(/^IPI:?/, "");
  if (/^[A-Z]\d{10}$/.test(code))
    return {
      ok: false,
      message: "This is an IPI base number; the name number has 11 digits and no letter.",
    };
  if (!/^\d+$/.test(code)) return { ok: false, message: "An IPI name number has only digits." };
  if (code.length < 9 || code.length > 11)
    return { ok: false, message: `An IPI name number has 11 digits; this one has ${code.length}.` };
  const padded = code.padStart(11, "0");
  const remainder =
    [...padded.slice(0, 9)].reduce((sum, digit, i) => sum + (10 - i) * Number(digit), 0) % 101;
  const check = String(remainder === 0 ? 0 : (101 - remainder) % 100).padStart(2, "0");
  if (check === padded.slice(9)) return { ok: true, normalised: padded };
  if (code.length < 11)
    return {
      ok: false,
      message: `The check digits do not match. An IPI name number has 11 digits; this one has ${code.length}: is one missing?`,
    };
  return checkMismatch(padded.slice(0, 9) + check, true);
}

/** IPI base number (CISAC): I, nine digits, one check digit; the ISWC's rule from a start value of 2. */
export function checkIpiBaseNumber(text: string): IdentifierCheck {
  const code = compact(text).replace(/^IPI:?(?=I)/, "");
  if (/^\d{9,11}$/.test(code))
    return {
      ok: false,
      message: "This looks like an IPI name number; a base number begins with the letter I.",
    };
  if (!code.startsWith("I")) return { ok: false, message: "An IPI base number begins with the letter I." };
  if (!/^I\d*$/.test(code)) return { ok: false, message: "An IPI base number has only digits after the I." };
  if (code.length !== 11)
    return {
      ok: false,
      message: `An IPI base number has 10 digits after the I; this one has ${code.length - 1}.`,
    };
  const check = weightedCheck(2, code.slice(1, 10));
  return check === code[10]
    ? { ok: true, normalised: code }
    : checkMismatch(`I-${code.slice(1, 10)}-${check}`);
}

/** ISNI (ISO 27729): 15 digits and a check character, 0 to 9 or X, by ISO 7064 MOD 11-2. */
export function checkIsni(text: string): IdentifierCheck {
  const code = compact(text).replace(/^ISNI:?/, "");
  if (code.length !== 16)
    return { ok: false, message: `An ISNI has 16 characters; this one has ${code.length}.` };
  if (!/^\d{15}/.test(code)) return { ok: false, message: "The first 15 characters of an ISNI are digits." };
  if (!/[\dX]$/.test(code)) return { ok: false, message: "The last character of an ISNI is a digit or X." };
  const check = mod112(code.slice(0, 15));
  return check === code[15]
    ? { ok: true, normalised: code }
    : checkMismatch(formatIsni(code.slice(0, 15) + check));
}

/** "0000 0001 2146 438X", from the stored form. */
export function formatIsni(isni: string): string {
  return isni.replace(/(.{4})(?=.)/g, "$1 ");
}
