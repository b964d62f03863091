import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  checkIpiBaseNumber,
  checkIpiNameNumber,
  checkIsni,
  checkIsrc,
  checkIswc,
  formatIsni,
  formatIsrc,
  formatIswc,
  type IdentifierCheck,
  isrcPrefix,
} from "@/lib/kernel/identifiers";

const valid = (normalised: string): IdentifierCheck => ({ ok: true, normalised });
const digits = (length: number) => fc.stringMatching(new RegExp(`^[0-9]{${length}}$`));

describe("ISRC (ISO 3901:2019)", () => {
  it("stores capitals without hyphens, shows hyphens", () => {
    // The example of the International ISRC Agency's page on the structure of the code.
    expect(checkIsrc("ISRC AA-6Q7-20-00047")).toEqual(valid("AA6Q72000047"));
    expect(checkIsrc("aa6q72000047")).toEqual(valid("AA6Q72000047"));
    expect(checkIsrc("IS-RC1-20-00047")).toEqual(valid("ISRC12000047"));
    expect(formatIsrc("AA6Q72000047")).toBe("AA-6Q7-20-00047");
    expect(isrcPrefix("AA6Q72000047")).toBe("AA6Q7");
  });

  it.each([
    ["AA6Q7200004", "An ISRC has 12 characters; this one has 11."],
    ["AA6Q720000477", "An ISRC has 12 characters; this one has 13."],
    ["A16Q72000047", "An ISRC begins with two letters, for example GB."],
    ["AA6_72000047", "Characters 3 to 5 of an ISRC, which name the registrant, are letters or digits."],
    ["AA6Q7X000047", "Characters 6 and 7 of an ISRC, the year, are digits."],
    ["AA6Q720000X7", "The last five characters of an ISRC are digits."],
  ])("%s fails, and the answer names the rule", (text, message) =>
    expect(checkIsrc(text)).toEqual({ ok: false, message }),
  );
});

describe("ISWC (ISO 15707)", () => {
  it.each([
    "T-034.524.680-1", // the standard's own example
    "T-000.000.001-0", // the first code issued
    "T-300.560.027-7", // a fixture of an open implementation of CISAC's works registration format
    "T-010.171.314-7",
    "T-123.456.789-4",
    "T-999.000.002-7",
  ])("%s is valid, however it is punctuated", (iswc) => {
    const stored = iswc.replace(/[.-]/g, "");
    expect(checkIswc(iswc)).toEqual(valid(stored));
    expect(checkIswc(stored.toLowerCase())).toEqual(valid(stored));
    expect(checkIswc(`ISWC ${iswc}`)).toEqual(valid(stored));
    expect(formatIswc(stored)).toBe(iswc);
  });

  it.each([
    ["T-034.524.680-2", "The check digit does not match; did you mean T-034.524.680-1?"],
    ["034.524.680-1", "An ISWC begins with the letter T."],
    ["T-034.524.68-1", "An ISWC has 10 digits after the T; this one has 9."],
    ["T-034.52A.680-1", "An ISWC has only digits after the T."],
  ])("%s fails, and the answer names the rule", (text, message) =>
    expect(checkIswc(text)).toMatchObject({ ok: false, message }),
  );

  it("catches every exchange of neighbours, and exactly the substitutions its weights can catch", () => {
    const base = "0345246801";
    for (let i = 0; i < 9; i++) {
      const swapped = [...base];
      [swapped[i], swapped[i + 1]] = [swapped[i + 1]!, swapped[i]!];
      if (swapped.join("") !== base) expect(checkIswc(`T${swapped.join("")}`).ok).toBe(false);
      for (let digit = 0; digit <= 9; digit++) {
        const changed = `T${base.slice(0, i)}${digit}${base.slice(i + 1)}`;
        const caught = ((i + 1) * (digit - Number(base[i]))) % 10 !== 0;
        expect(checkIswc(changed).ok).toBe(!caught);
      }
    }
    expect(checkIswc("T-034.544.680-1").ok).toBe(true);
  });
});

describe("IPI name number (CISAC, modulo 101)", () => {
  it.each([
    "00000000199", // fixtures of an open implementation of CISAC's works registration format
    "00000000297",
    "00000000395",
    "00000000493",
    "00014107338",
    "00052210040",
    "99999999919",
    "00000499900", // remainder 0
    "00000589900", // remainder 1, also 00
    "99900000158",
    "99900002152",
  ])("%s is valid", (ipi) => expect(checkIpiNameNumber(ipi)).toEqual(valid(ipi)));

  it("puts left-off leading zeros back", () => {
    expect(checkIpiNameNumber("000000199")).toEqual(valid("00000000199"));
    expect(checkIpiNameNumber("IPI 52 21 00 40")).toMatchObject({ ok: false });
    expect(checkIpiNameNumber("052210040")).toEqual(valid("00052210040"));
  });

  it.each([
    ["99900000159", "The check digits do not match; did you mean 99900000158?", "99900000158"],
    [
      "9990000015",
      "The check digits do not match. An IPI name number has 11 digits; this one has 10: is one missing?",
      undefined,
    ],
    ["999000001580", "An IPI name number has 11 digits; this one has 12.", undefined],
    ["9990000015X", "An IPI name number has only digits.", undefined],
    ["I-000000001-9", "This is an IPI base number; the name number has 11 digits and no letter.", undefined],
  ])("%s fails, and the answer names the rule", (text, message, suggestion) =>
    expect(checkIpiNameNumber(text)).toEqual({ ok: false, message, ...(suggestion && { suggestion }) }),
  );

  it("catches every single wrong digit", () => {
    for (const ipi of ["99900000158", "00014107338", "00000589900"])
      for (let i = 0; i < 11; i++)
        for (const digit of "0123456789")
          if (digit !== ipi[i])
            expect(checkIpiNameNumber(ipi.slice(0, i) + digit + ipi.slice(i + 1)).ok).toBe(false);
  });
});

describe("IPI base number (CISAC)", () => {
  it.each(["I-000000001-9", "I-123456789-3", "I-000000229-7"])("%s is valid", (ipi) =>
    expect(checkIpiBaseNumber(ipi)).toEqual(valid(ipi.replaceAll("-", ""))),
  );

  it.each([
    ["I-000000001-8", "The check digit does not match; did you mean I-000000001-9?"],
    ["99900000158", "This looks like an IPI name number; a base number begins with the letter I."],
    ["J-000000001-9", "An IPI base number begins with the letter I."],
    ["I-00000001-9", "An IPI base number has 10 digits after the I; this one has 9."],
    ["I-00000000A-9", "An IPI base number has only digits after the I."],
  ])("%s fails, and the answer names the rule", (text, message) =>
    expect(checkIpiBaseNumber(text)).toMatchObject({ ok: false, message }),
  );
});

describe("ISNI (ISO 27729, check character of ISO 7064 MOD 11-2)", () => {
  // The first two are the examples of ORCID's page on the structure of its identifier, which shares the rule;
  // the third is an example number of the ISNI agency.
  it.each(["0000 0002 1825 0097", "0000 0002 1694 233X", "0000 0001 2146 438X"])("%s is valid", (isni) => {
    expect(checkIsni(isni)).toEqual(valid(isni.replaceAll(" ", "")));
    expect(checkIsni(isni.replaceAll(" ", "-").toLowerCase())).toEqual(valid(isni.replaceAll(" ", "")));
    expect(formatIsni(isni.replaceAll(" ", ""))).toBe(isni);
  });

  it.each([
    ["0000 0002 1825 0098", "The check digit does not match; did you mean 0000 0002 1825 0097?"],
    ["0000 0002 1825 009", "An ISNI has 16 characters; this one has 15."],
    ["0000 000X 1825 0097", "The first 15 characters of an ISNI are digits."],
    ["0000 0002 1825 009A", "The last character of an ISNI is a digit or X."],
  ])("%s fails, and the answer names the rule", (text, message) =>
    expect(checkIsni(text)).toMatchObject({ ok: false, message }),
  );
});

describe("a suggestion", () => {
  it.each([
    ["ISWC", checkIswc, digits(10).map((d) => `T${d}`), 10],
    ["IPI name number", checkIpiNameNumber, digits(11), 9],
    ["IPI base number", checkIpiBaseNumber, digits(10).map((d) => `I${d}`), 10],
    ["ISNI", checkIsni, digits(16), 15],
  ] as const)("for an %s is itself valid and differs in the check digits only", (_, check, text, kept) => {
    fc.assert(
      fc.property(text, (code) => {
        const answer = check(code);
        fc.pre(!answer.ok);
        const repaired = check((!answer.ok && answer.suggestion) || "");
        expect(repaired.ok && repaired.normalised.slice(0, kept)).toBe(code.slice(0, kept));
      }),
    );
  });

  it("is never made where the shape is wrong, and no text throws", () => {
    fc.assert(
      fc.property(fc.string(), (text) => {
        for (const check of [checkIsrc, checkIswc, checkIpiNameNumber, checkIpiBaseNumber, checkIsni]) {
          const answer = check(text);
          if (!answer.ok) expect(answer.message).toMatch(/[.?]$/);
        }
      }),
    );
  });
});
