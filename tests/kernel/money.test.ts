import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { CURRENCY_CODES, isCurrency, minorUnits } from "@/lib/kernel/currencies";
import {
  formatFraction,
  fraction,
  multiplyFractions,
  parseFraction,
  roundHalfUp,
} from "@/lib/kernel/fraction";
import {
  addMoney,
  allocate,
  applyBps,
  CurrencyMismatch,
  compareMoney,
  decimalOf,
  formatMoney,
  money,
  multiplyMoney,
  negateMoney,
  parseMoney,
  subtractMoney,
  sumMoney,
} from "@/lib/kernel/money";

const sum = (parts: readonly bigint[]) => parts.reduce((a, b) => a + b, 0n);
const big = (values: readonly number[]) => values.map(BigInt);

describe("currencies (ISO 4217, list of 25 June 2024)", () => {
  it.each([
    ["JPY", 0],
    ["UGX", 0],
    ["EUR", 2],
    ["HUF", 2],
    ["KWD", 3],
    ["IQD", 3],
    ["CLF", 4],
  ])("%s has %i digits behind the point", (code, digits) => expect(minorUnits(code)).toBe(digits));

  it("agrees with this engine's Intl except where CLDR follows habit instead of the standard", () => {
    const disagreeing = CURRENCY_CODES.filter((code) => {
      const intl = new Intl.NumberFormat("en", { style: "currency", currency: code }).resolvedOptions();
      return intl.maximumFractionDigits !== minorUnits(code);
    });
    // CLDR 48 shows none of the decimals that ISO 4217 gives these; the last has 3 in the standard.
    const habit = "AFN ALL COP HUF IDR IRR KPW LAK LBP MGA MMK PKR SOS SYP YER IQD".split(" ");
    expect(disagreeing.filter((code) => !habit.includes(code))).toEqual([]);
  });

  it("knows no fund code, metal or invented code as a currency", () => {
    for (const code of ["XAU", "XTS", "XXX", "ABC", "gbp", ""]) expect(isCurrency(code)).toBe(false);
    expect(() => money(1n, "XAU")).toThrow(RangeError);
  });
});

describe("showing and reading amounts", () => {
  it.each([
    [38400n, "GBP", "£384.00"],
    [124000n, "EUR", "€1,240.00"],
    [36480n, "USD", "$364.80"],
    [500n, "JPY", "¥500"],
    [1234567n, "KWD", "KWD\u00a01,234.567"],
    [1200n, "CAD", "CAD\u00a012.00"],
    [-7720n, "GBP", "\u2212£77.20"],
    [5n, "GBP", "£0.05"],
    [0n, "GBP", "£0.00"],
    [123456789012n, "EUR", "€1,234,567,890.12"],
  ])("%s %s is shown as %s", (minor, currency, text) => expect(formatMoney({ minor, currency })).toBe(text));

  it.each([
    ["240", 24000n],
    ["£240.00", 24000n],
    ["gbp 1,536.5", 153650n],
    ["\u2212£77.20", -7720n],
    ["-5", -500n],
    [" 0.05 ", 5n],
  ])("%s is read as pounds", (text, minor) =>
    expect(parseMoney(text, "GBP")).toEqual({ ok: true, money: { minor, currency: "GBP" } }),
  );

  it.each([
    ["", /in figures, for example 240\.00/],
    ["12,34.00", /in figures/],
    ["1.2.3", /in figures/],
    ["€5", /in figures/],
    ["1e3", /in figures/],
    ["0.001", /at most 2 decimals; this one has 3/],
    ["12345678901234567890", /too large/],
  ])("%s is not read, and the answer says why", (text, why) =>
    expect(parseMoney(text, "GBP")).toMatchObject({ ok: false, message: expect.stringMatching(why) }),
  );

  it("a yen amount has no decimals", () => {
    expect(parseMoney("500.0", "JPY")).toMatchObject({
      ok: false,
      message: expect.stringMatching(/no decimals/),
    });
  });

  it("whatever is shown is read back", () => {
    const currency = fc.constantFrom(...CURRENCY_CODES);
    fc.assert(
      fc.property(fc.bigInt({ min: -(10n ** 15n) + 1n, max: 10n ** 15n - 1n }), currency, (minor, code) => {
        const parsed = parseMoney(formatMoney({ minor, currency: code }), code);
        expect(parsed).toEqual({ ok: true, money: { minor, currency: code } });
        expect(parseMoney(decimalOf({ minor, currency: code }), code)).toEqual(parsed);
      }),
    );
  });
});

describe("arithmetic", () => {
  it("adds, subtracts, negates and compares within one currency only", () => {
    const [a, b] = [money(250n, "GBP"), money(75n, "GBP")];
    expect(addMoney(a, b).minor).toBe(325n);
    expect(subtractMoney(b, a).minor).toBe(-175n);
    expect(negateMoney(a).minor).toBe(-250n);
    expect([compareMoney(a, b), compareMoney(b, a), compareMoney(a, a)]).toEqual([1, -1, 0]);
    expect(sumMoney("GBP", [a, b, b])).toEqual(money(400n, "GBP"));
    expect(() => addMoney(a, money(1n, "EUR"))).toThrow(CurrencyMismatch);
    expect(() => compareMoney(a, money(1n, "EUR"))).toThrow(CurrencyMismatch);
  });

  it("rounds half-up once at the end, not at each factor", () => {
    const third = fraction(1n, 3n);
    expect(multiplyMoney(money(100n, "GBP"), multiplyFractions(third, fraction(3n))).minor).toBe(100n);
    expect(multiplyMoney(money(5n, "GBP"), parseFraction("0.5")).minor).toBe(3n);
    expect(multiplyMoney(money(-5n, "GBP"), parseFraction("0.5")).minor).toBe(-3n);
    expect(applyBps(12500n, 1500)).toBe(1875n);
    expect(applyBps(19955n, 5000)).toBe(9978n);
    expect(() => applyBps(1n, 0.5)).toThrow(RangeError);
  });

  it("reads and writes fractions exactly", () => {
    expect(
      ["1.60", "0.5", "7/3", "-2.50", "10", "0"].map((text) => formatFraction(parseFraction(text))),
    ).toEqual(["1.6", "0.5", "7/3", "-2.5", "10", "0"]);
    for (const text of ["", "1.", ".5", "1,6", "1e2", "1/0"])
      expect(() => parseFraction(text)).toThrow(RangeError);
  });

  it("rounding differs from the exact value by at most one half, and is odd", () => {
    fc.assert(
      fc.property(fc.bigInt(-(10n ** 12n), 10n ** 12n), fc.bigInt(1n, 10n ** 6n), (n, d) => {
        const rounded = roundHalfUp(fraction(n, d));
        const twice = 2n * (rounded * d - n);
        expect(twice <= d && twice >= -d).toBe(true);
        expect(roundHalfUp(fraction(-n, d))).toBe(-rounded);
      }),
    );
  });
});

describe("dividing an amount by largest remainder", () => {
  // First case: the textbook example with Hare quota 10,000, which rounding each part would overfill to 11.
  it.each([
    [10, [47000, 16000, 15900, 12000, 6000, 3100], [5, 2, 1, 1, 1, 0]],
    [10, [6, 6, 2], [4, 4, 2]],
    [11, [6, 6, 2], [5, 5, 1]],
    [5, [70, 30], [4, 1]], // M. Fowler, Patterns of Enterprise Application Architecture, 2002, "Money"
    [100, [1, 1, 1], [34, 33, 33]],
    [9999, [50, 25, 25], [4999, 2500, 2500]],
    [1, [3334, 3333, 3333], [1, 0, 0]],
    [1, [1, 1, 1], [1, 0, 0]],
    [0, [0, 0], [0, 0]],
    [7, [0, 1, 0], [0, 7, 0]],
  ])("%i by %j gives %j", (total, weights, parts) =>
    expect(allocate(BigInt(total), big(weights))).toEqual(big(parts)),
  );

  it("reproduces the apportionment of 120 seats to 15 states in the bill of 1792 (census of 1790)", () => {
    const populations = [
      236841, 55540, 70835, 68705, 278514, 475327, 141822, 179570, 331589, 353523, 432879, 68446, 206236,
      85533, 630560,
    ];
    expect(allocate(120n, big(populations))).toEqual(big([8, 2, 2, 2, 9, 16, 5, 6, 11, 12, 14, 2, 7, 3, 21]));
  });

  const weights = fc
    .array(fc.bigInt(0n, 10n ** 9n), { minLength: 1, maxLength: 12 })
    .filter((w) => sum(w) > 0n);
  const total = fc.bigInt(-(10n ** 12n), 10n ** 12n);

  it("keeps the sum, stays within one unit of the exact quota and never pays a weight of nothing", () => {
    fc.assert(
      fc.property(total, weights, (amount, w) => {
        const parts = allocate(amount, w);
        expect(sum(parts)).toBe(amount);
        for (const [index, part] of parts.entries()) {
          const error = part * sum(w) - amount * (w[index] ?? 0n);
          expect(error < sum(w) && error > -sum(w)).toBe(true);
          if (w[index] === 0n) expect(part).toBe(0n);
        }
      }),
    );
  });

  it("a negative total is the exact negation", () => {
    fc.assert(
      fc.property(total, weights, (amount, w) => {
        expect(allocate(-amount, w)).toEqual(allocate(amount, w).map((part) => -part));
      }),
    );
  });

  it("the order of the list matters only between equal remainders", () => {
    fc.assert(
      fc.property(
        fc.bigInt(0n, 10n ** 6n),
        fc.uniqueArray(fc.bigInt(1n, 10n ** 6n), { minLength: 2 }),
        (amount, w) => {
          const remainders = w.map((weight) => (amount * weight) % sum(w));
          fc.pre(new Set(remainders).size === remainders.length);
          expect(allocate(amount, [...w].reverse()).reverse()).toEqual(allocate(amount, w));
        },
      ),
    );
  });

  it("refuses negative weights, and an amount with nobody to give it to", () => {
    expect(() => allocate(1n, [2n, -1n])).toThrow(RangeError);
    expect(() => allocate(1n, [0n, 0n])).toThrow(/nobody/);
    expect(() => allocate(1n, [])).toThrow(/nobody/);
  });
});
