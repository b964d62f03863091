import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { addDays } from "@/lib/kernel/calendar";
import { invoiceTotals, REVERSE_CHARGE_WORDS, TAX_RATES, taxTreatment } from "@/lib/licensing/invoice-tax";

describe("tax on an invoice (common practice, for the accountant)", () => {
  it("a UK buyer pays 20 %, company or not", () => {
    for (const business of [true, false])
      expect(taxTreatment({ country: "GB", business }, "2026-03-14")).toEqual({
        ok: true,
        rateBps: 2000,
        words: "VAT 20 %",
        reverseCharge: false,
      });
  });

  it("a company elsewhere pays 0 % with the line that says who accounts for it", () => {
    for (const country of ["IE", "BE", "CA", "US"])
      expect(taxTreatment({ country, business: true }, "2026-03-14")).toEqual({
        ok: true,
        rateBps: 0,
        words: REVERSE_CHARGE_WORDS,
        reverseCharge: true,
      });
  });

  it("a private customer elsewhere, and a date without a rate, are refused", () => {
    expect(taxTreatment({ country: "IE", business: false }, "2026-03-14").ok).toBe(false);
    expect(taxTreatment({ country: "GB", business: true }, "2009-12-31")).toMatchObject({
      ok: false,
      sentence: "No tax rate is on file for GB on 2009-12-31.",
    });
  });

  it("the rate is that of the tax point: the UK's changed on 4 January 2011", () => {
    const rate = (date: string) => {
      const found = taxTreatment({ country: "GB", business: true }, date);
      return found.ok ? found.rateBps : null;
    };
    expect([rate("2011-01-03"), rate("2011-01-04")]).toEqual([1750, 2000]);
  });

  it("the rows of a country follow each other without gap or overlap", () => {
    for (const [index, row] of TAX_RATES.entries()) {
      const next = TAX_RATES.slice(index + 1).find(({ country }) => country === row.country);
      expect(next ? addDays(row.through ?? "", 1) : row.through).toBe(next ? next.from : null);
    }
  });

  it("two lines of 240.00 and 125.00 carry 48.00 and 25.00 of 73.00", () => {
    expect(invoiceTotals([24000n, 12500n], 2000)).toEqual({
      netMinor: 36500n,
      taxMinor: 7300n,
      grossMinor: 43800n,
      lineTaxMinor: [4800n, 2500n],
      rounded: "per invoice",
    });
  });

  it("the lines' tax sums to the invoice's, each within one unit of its own exact tax", () => {
    const nets = fc.array(fc.bigInt(0n, 10n ** 9n), { minLength: 1, maxLength: 20 });
    fc.assert(
      fc.property(nets, fc.integer({ min: 0, max: 3000 }), (lines, rate) => {
        fc.pre(lines.some((net) => net > 0n));
        const totals = invoiceTotals(lines, rate);
        expect(totals.lineTaxMinor.reduce((a, b) => a + b, 0n)).toBe(totals.taxMinor);
        expect(totals.grossMinor).toBe(totals.netMinor + totals.taxMinor);
        for (const [i, tax] of totals.lineTaxMinor.entries()) {
          const error = tax * 10_000n - lines[i]! * BigInt(rate);
          expect(error < 15_000n && error > -15_000n).toBe(true);
        }
      }),
    );
  });
});
