import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { isMod3736, mod112, mod3736 } from "@/lib/kernel/check-characters";
import { licenceNumber, parseLicenceNumber } from "@/lib/kernel/licence-number";
import { formatProofCode, newProofCode, parseProofCode, proofCodeOf } from "@/lib/kernel/proof-code";

const ALPHANUMERIC = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ";

describe("ISO 7064 MOD 37,36", () => {
  // The GRid standard's example A1-2425G-ABC1234002-M, and audiovisual numbers that open implementations test with.
  it.each([
    ["A12425GABC1234002", "M"],
    ["B159D8FA01240000", "K"],
    ["188166C734200000", "3"],
    ["LR20260103", "C"],
  ])("%s has check character %s", (text, check) => {
    expect(mod3736(text)).toBe(check);
    expect(isMod3736(text + check)).toBe(true);
  });

  it("catches every wrong character and every exchange of neighbours", () => {
    const text = "LR20260103C";
    for (let i = 0; i < text.length; i++) {
      for (const c of ALPHANUMERIC)
        if (c !== text[i]) expect(isMod3736(text.slice(0, i) + c + text.slice(i + 1))).toBe(false);
      const swapped = text.slice(0, i) + text.charAt(i + 1) + text.charAt(i) + text.slice(i + 2);
      if (swapped !== text && swapped.length === text.length) expect(isMod3736(swapped)).toBe(false);
    }
  });

  it("refuses what it has no value for", () => {
    expect(() => mod3736("lr")).toThrow(RangeError);
    expect(() => mod112("1X")).toThrow(RangeError);
    expect(isMod3736("lr2")).toBe(false);
    expect(isMod3736("C")).toBe(false);
  });
});

describe("licence number", () => {
  it("carries its check character", () => {
    expect(licenceNumber(2026, 103)).toBe("LR-2026-0103-C");
    expect(licenceNumber(2026, 12345)).toMatch(/^LR-2026-12345-[0-9A-Z]$/);
    expect(() => licenceNumber(2026, 0)).toThrow(RangeError);
    expect(() => licenceNumber(26, 1)).toThrow(RangeError);
  });

  it("is read in any case, with spaces or none", () => {
    for (const text of ["LR-2026-0103-C", "lr 2026 0103 c", "LR20260103C", "lr\u20132026\u20130103\u2013c"])
      expect(parseLicenceNumber(text)).toEqual({ ok: true, number: "LR-2026-0103-C" });
  });

  it("a wrong character is told before any look-up", () => {
    expect(parseLicenceNumber("LR-2026-0108-C")).toEqual({
      ok: false,
      message: "The check character does not match: a character is mistyped. Nothing was looked up.",
    });
    expect(parseLicenceNumber("LR-2026-0103")).toMatchObject({ ok: false });
    expect(parseLicenceNumber("XX-2026-0103-C")).toMatchObject({
      message: expect.stringContaining("looks like LR-2026-0103-C"),
    });
  });

  it("every number made is read back", () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 2000, max: 2999 }),
        fc.integer({ min: 1, max: 999_999_999 }),
        (year, n) => {
          expect(parseLicenceNumber(licenceNumber(year, n))).toEqual({
            ok: true,
            number: licenceNumber(year, n),
          });
        },
      ),
    );
  });
});

describe("proof code", () => {
  const tenBytes = fc.uint8Array({ minLength: 10, maxLength: 10 });
  const alphabet = "23456789ABCDEFGHJKLMNPQRSTUVWXYZ";

  it("holds all of its 80 bits: other bytes give another code, and the code gives the bytes back", () => {
    fc.assert(
      fc.property(tenBytes, (bytes) => {
        const code = proofCodeOf(bytes);
        let bits = 0n;
        for (const c of code.slice(0, 16)) bits = bits * 32n + BigInt(alphabet.indexOf(c));
        const back = Uint8Array.from({ length: 10 }, (_, i) => Number((bits >> BigInt(72 - 8 * i)) & 255n));
        expect(back).toEqual(bytes);
      }),
    );
    expect(() => proofCodeOf(new Uint8Array(9))).toThrow(RangeError);
  });

  it("is read in any case and grouping", () => {
    fc.assert(
      fc.property(tenBytes, (bytes) => {
        const code = proofCodeOf(bytes);
        expect(formatProofCode(code)).toMatch(/^(.{4}-){4}.$/);
        for (const text of [code, formatProofCode(code), ` ${formatProofCode(code).toLowerCase()} `])
          expect(parseProofCode(text)).toEqual({ ok: true, code });
      }),
    );
  });

  it("every single wrong character and every exchange of two characters is told before any look-up", () => {
    const code = proofCodeOf(Uint8Array.from([7, 41, 200, 3, 99, 180, 255, 0, 18, 77]));
    const told = { ok: false, message: expect.stringContaining("Nothing was looked up") };
    for (let i = 0; i < 17; i++) {
      for (const c of alphabet)
        if (c !== code[i])
          expect(parseProofCode(code.slice(0, i) + c + code.slice(i + 1))).toMatchObject(told);
      for (let j = i + 1; j < 17; j++) {
        const swapped = [...code];
        [swapped[i], swapped[j]] = [swapped[j]!, swapped[i]!];
        if (code[i] !== code[j]) expect(parseProofCode(swapped.join(""))).toMatchObject(told);
      }
    }
  });

  it("says which character cannot be, and how many are missing", () => {
    const code = proofCodeOf(new Uint8Array(10));
    expect(parseProofCode(`0${code.slice(1)}`)).toEqual({
      ok: false,
      message: "Proof codes use neither 0 and O nor 1 and I: look at character 1, “0”.",
    });
    expect(parseProofCode(`${code.slice(0, 5)}!${code.slice(6)}`)).toMatchObject({
      message: expect.stringContaining("character 6, “!”"),
    });
    expect(parseProofCode(code.slice(1))).toEqual({
      ok: false,
      message: "A proof code has 17 characters; this one has 16.",
    });
  });

  it("new ones differ and are valid", () => {
    const codes = Array.from({ length: 200 }, newProofCode);
    expect(new Set(codes).size).toBe(200);
    for (const code of codes) expect(parseProofCode(code)).toEqual({ ok: true, code });
  });
});
