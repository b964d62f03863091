import { isMod3736, mod3736 } from "./check-characters";

export type LicenceNumberParse = { ok: true; number: string } | { ok: false; message: string };

/** "LR-2026-0103-C": year and serial number, then the check character of ISO 7064 MOD 37,36 over LR20260103. */
export function licenceNumber(year: number, serial: number): string {
  if (!Number.isInteger(year) || year < 1000 || year > 9999) throw new RangeError(`not a year: ${year}`);
  if (!Number.isSafeInteger(serial) || serial < 1) throw new RangeError(`not a serial number: ${serial}`);
  const digits = String(serial).padStart(4, "0");
  return `LR-${year}-${digits}-${mod3736(`LR${year}${digits}`)}`;
}

/** Takes any case, spaces and dashes; an answer of `ok: false` needs no look-up. */
export function parseLicenceNumber(text: string): LicenceNumberParse {
  const code = text.toUpperCase().replace(/[\s.\-\u2010-\u2015\u2212]/g, "");
  const match = /^LR(\d{4})(\d{4,9})([0-9A-Z])$/.exec(code);
  if (!match)
    return {
      ok: false,
      message: "A licence number looks like LR-2026-0103-C: LR, a year, a number and a check character.",
    };
  if (!isMod3736(code))
    return {
      ok: false,
      message: "The check character does not match: a character is mistyped. Nothing was looked up.",
    };
  return { ok: true, number: `LR-${match[1]}-${match[2]}-${match[3]}` };
}
