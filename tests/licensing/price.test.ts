import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { formatMoney, money } from "@/lib/kernel/money";
import { fromPrice, price, topUp } from "@/lib/licensing/price";
import { MEDIA_CLASS_CODES, RateCard, type UseInput } from "@/lib/licensing/rate-card";
import { INVENTED_CARD as card } from "./invented-card";

const UK: UseInput["territory"] = { kind: "country", country: "GB" };
const UK_IE: UseInput["territory"] = { kind: "region", region: "UK+IE" };
const WORLD: UseInput["territory"] = { kind: "world" };
const euros: RateCard = { ...card, currency: "EUR" };
const dollars: RateCard = { ...card, currency: "USD" };

describe("worked prices of the invented card", () => {
  const cases: Array<[string, RateCard, UseInput, string, string]> = [
    [
      "programme, region, 1 year",
      card,
      { mediaClass: "MC06", territory: UK_IE, termMonths: 12 },
      "150 × 1.6",
      "£240.00",
    ],
    [
      "online, perpetual",
      card,
      { mediaClass: "MC02", territory: WORLD, termMonths: null },
      "50 × 2.5",
      "£125.00",
    ],
    [
      "TV advert, 3 months, second spend band",
      card,
      { mediaClass: "MC08", territory: UK, termMonths: 3, tier: { band: 1 } },
      "420 × 0.6 × 1.75",
      "£441.00",
    ],
    [
      "the same with two cutdowns",
      card,
      { mediaClass: "MC08", territory: UK, termMonths: 3, tier: { band: 1 }, cutdowns: 2 },
      "420 × 0.6 × 1.75 × 1.5",
      "£661.50",
    ],
    [
      "series of six, region, 3 years",
      card,
      { mediaClass: "MC06", territory: UK_IE, termMonths: 36, episodes: 6 },
      "150 × 1.6 × 1.6 × 4",
      "£1,536.00",
    ],
    [
      "film, World, perpetual, small budget",
      card,
      { mediaClass: "MC11", territory: WORLD, termMonths: null, tier: { amount: 640_000 } },
      "520 × 2.4 × 2.5 × 0.5",
      "£1,560.00",
    ],
    [
      "podcast, 3 years, middle band",
      card,
      { mediaClass: "MC01", territory: WORLD, termMonths: 36, tier: { amount: 99_999 } },
      "40 × 1.6 × 1.3",
      "£83.20",
    ],
    ["programme, one country", card, { mediaClass: "MC06", territory: UK, termMonths: 12 }, "150", "£150.00"],
    [
      "programme, region, 3 years",
      card,
      { mediaClass: "MC06", territory: UK_IE, termMonths: 36 },
      "150 × 1.6 × 1.6",
      "£384.00",
    ],
    [
      "training film",
      dollars,
      {
        mediaClass: "MC04",
        territory: { kind: "country", country: "CA" },
        termMonths: 36,
        tier: { amount: 1_900 },
      },
      "60 × 1.6 × 1.5",
      "$144.00",
    ],
    [
      "game, perpetual",
      dollars,
      { mediaClass: "MC13", territory: WORLD, termMonths: null, tier: { amount: 49_999 } },
      "220 × 2.5",
      "$550.00",
    ],
    [
      "promo, region, 3 months",
      dollars,
      { mediaClass: "MC14", territory: UK_IE, termMonths: 3, tier: { amount: 100_000 } },
      "380 × 1.6 × 0.6",
      "$364.80",
    ],
    [
      "student film",
      euros,
      {
        mediaClass: "MC10",
        territory: { kind: "country", country: "BE" },
        termMonths: 12,
        studentOrCharity: true,
      },
      "95 × 0.4",
      "€38.00",
    ],
    [
      "tag change only",
      card,
      { mediaClass: "MC08", territory: UK, termMonths: 12, tier: { band: 0 }, tagChanges: 1 },
      "420 × 1.1",
      "£462.00",
    ],
  ];
  it.each(cases)("%s", (_, onCard, use, sentence, total) => {
    const result = price(onCard, use);
    expect(result).toMatchObject({ ok: true, sentence, cardVersion: "invented-1", minimumApplied: false });
    expect(result.ok && formatMoney(result.total)).toBe(total);
  });

  it("every factor is shown with its reason, those of 1 too", () => {
    const result = price(card, { mediaClass: "MC06", territory: UK_IE, termMonths: 36 });
    expect(result.ok && result.factors).toEqual([
      { kind: "base", label: "TV or radio programme incl. catch-up", value: "150" },
      { kind: "territory", label: "the United Kingdom and Ireland", value: "1.6" },
      { kind: "term", label: "3 years", value: "1.6" },
      { kind: "tier", label: "No size scale for this class", value: "1" },
      { kind: "episodes", label: "1 episode", value: "1" },
      { kind: "versions", label: "One version", value: "1" },
      { kind: "units", label: "Per cue", value: "1" },
      { kind: "student or charity", label: "No reduction", value: "1" },
    ]);
  });
});

describe("rules of the card", () => {
  const term = (termMonths: number | null) => {
    const result = price(card, { mediaClass: "MC06", territory: UK, termMonths });
    return result.ok ? result.total.minor : null;
  };

  it("a term between two rows takes the next longer row", () => {
    expect([1, 3, 4, 12, 13, 36, 37, 60, 61, null].map(term)).toEqual(
      [9000, 9000, 15000, 15000, 24000, 24000, 30000, 30000, 37500, 37500].map(BigInt),
    );
  });

  it("a band ends below its limit, or at it where the card says so", () => {
    const at = (mediaClass: "MC01" | "MC05", amount: number) => {
      const result = price(card, { mediaClass, territory: UK, termMonths: 12, tier: { amount } });
      return result.ok ? Number(result.total.minor) : result.reason;
    };
    expect([9_999, 10_000, 999_999, 1_000_000].map((n) => at("MC01", n))).toEqual([
      4000,
      5200,
      10000,
      "quote",
    ]);
    expect([7, 8, 90, 91].map((n) => at("MC05", n))).toEqual([8000, 14400, 14400, "quote"]);
  });

  it("online classes are World whatever territory is asked", () => {
    for (const territory of [UK, UK_IE, WORLD])
      expect(price(card, { mediaClass: "MC02", territory, termMonths: 12 })).toMatchObject({
        total: money(5000n, "GBP"),
      });
  });

  it("a price is never below the minimum fee, and says when it was raised", () => {
    expect(
      price(card, { mediaClass: "MC02", territory: WORLD, termMonths: 3, studentOrCharity: true }),
    ).toMatchObject({
      ok: true,
      total: money(2500n, "GBP"),
      minimumApplied: true,
      sentence: "50 × 0.6 × 0.4 = 12.00, raised to the minimum fee of 25.00",
    });
  });

  it.each<[string, UseInput, string, RegExp]>([
    [
      "exclusive",
      { mediaClass: "MC06", territory: UK, termMonths: 12, exclusive: true },
      "quote",
      /signed by the owner/,
    ],
    ["theme", { mediaClass: "MC06", territory: UK, termMonths: 12, themeOrTitle: true }, "quote", /Theme/],
    [
      "14 episodes",
      { mediaClass: "MC06", territory: UK, termMonths: 12, episodes: 14 },
      "quote",
      /14 episodes/,
    ],
    [
      "on-demand series",
      { mediaClass: "MC12", territory: UK, termMonths: 12 },
      "quote",
      /priced by the library/,
    ],
    [
      "unknown region",
      { mediaClass: "MC06", territory: { kind: "region", region: "NORD" }, termMonths: 12 },
      "quote",
      /no region “NORD”/,
    ],
    [
      "episodes of a film",
      { mediaClass: "MC10", territory: UK, termMonths: 12, episodes: 2 },
      "quote",
      /no scale of episodes/,
    ],
    [
      "cutdowns of a programme",
      { mediaClass: "MC06", territory: UK, termMonths: 12, cutdowns: 1 },
      "quote",
      /adverts only/,
    ],
    [
      "a band that is not there",
      { mediaClass: "MC09", territory: UK, termMonths: 12, tier: { band: 2 } },
      "quote",
      /largest size is under 500 \(screens\)/,
    ],
    [
      "charity advert",
      { mediaClass: "MC08", territory: UK, termMonths: 12, tier: { band: 0 }, studentOrCharity: true },
      "not offered",
      /not offered/,
    ],
    [
      "no spend stated",
      { mediaClass: "MC08", territory: UK, termMonths: 12 },
      "incomplete",
      /advertising spend/,
    ],
  ])("%s has no price, and the answer says why", (_, use, reason, sentence) =>
    expect(price(card, use)).toMatchObject({ ok: false, reason, sentence: expect.stringMatching(sentence) }),
  );

  it("a class or a perpetual term that the card leaves out is a quote", () => {
    const short = RateCard.parse({
      ...card,
      classes: card.classes.slice(0, 2),
      terms: card.terms.slice(0, 4),
    });
    expect(price(short, { mediaClass: "MC06", territory: UK, termMonths: 12 })).toMatchObject({
      reason: "quote",
    });
    expect(price(short, { mediaClass: "MC02", territory: UK, termMonths: null })).toMatchObject({
      reason: "quote",
    });
    expect(price(short, { mediaClass: "MC02", territory: UK, termMonths: 61 })).toMatchObject({
      reason: "quote",
    });
  });

  it("a card per 30 seconds counts every half minute begun", () => {
    const parts: RateCard = { ...card, unit: "30 seconds" };
    const use = { mediaClass: "MC06", territory: UK, termMonths: 12 } as const;
    expect(price(parts, use)).toMatchObject({ reason: "incomplete" });
    expect(price(parts, { ...use, musicS: 30 })).toMatchObject({ total: money(15000n, "GBP") });
    expect(price(parts, { ...use, musicS: 30.5 })).toMatchObject({
      total: money(30000n, "GBP"),
      sentence: "150 × 2",
    });
  });

  it("the price beside a cue is the lowest base for one year in one country", () => {
    expect(fromPrice(card)).toEqual(money(4000n, "GBP"));
    expect(fromPrice({ ...card, classes: card.classes.filter(({ code }) => code === "MC12") })).toBeNull();
    expect(fromPrice({ ...card, minimumFee: "45" })).toEqual(money(4500n, "GBP"));
  });

  it("a top-up costs today's wider price less the fee paid, and never less than nothing", () => {
    const wider = { mediaClass: "MC06", territory: UK_IE, termMonths: 12 } as const;
    expect(topUp(card, wider, money(15000n, "GBP"))).toMatchObject({ ok: true, due: money(9000n, "GBP") });
    expect(topUp(card, wider, money(30000n, "GBP"))).toMatchObject({ due: money(0n, "GBP") });
    expect(topUp(card, { ...wider, exclusive: true }, money(0n, "GBP"))).toMatchObject({ reason: "quote" });
  });

  it("a card whose rows are out of order, or that lists a class twice, is refused", () => {
    for (const broken of [
      { ...card, terms: [...card.terms].reverse() },
      { ...card, episodes: [...card.episodes].reverse() },
      { ...card, classes: [...card.classes, card.classes[0]!] },
      { ...card, classes: [{ ...card.classes[3]!, tier: { ...card.classes[3]!.tier, bands: [] } }] },
      { ...card, currency: "XTS" },
      { ...card, cutdown: "1e3" },
    ])
      expect(RateCard.safeParse(broken).success).toBe(false);
  });
});

describe("exactness", () => {
  const use = fc.record({
    mediaClass: fc.constantFrom(...MEDIA_CLASS_CODES),
    territory: fc.constantFrom(UK, UK_IE, WORLD),
    termMonths: fc.option(fc.integer({ min: 1, max: 100 })),
    tier: fc.record({ band: fc.nat(2) }),
    episodes: fc.integer({ min: 1, max: 15 }),
    cutdowns: fc.nat(4),
    tagChanges: fc.nat(2),
    studentOrCharity: fc.boolean(),
  });

  it("the total is the product of the shown factors, rounded once, or the minimum", () => {
    // Oracle: integers in millionths; every factor of the card has at most two decimals.
    fc.assert(
      fc.property(use, (wanted) => {
        const result = price(card, wanted);
        fc.pre(result.ok);
        if (!result.ok) return;
        let scaled = 100n;
        let divisor = 1n;
        for (const { value } of result.factors) {
          expect(value).toMatch(/^\d+(\.\d{1,2})?$/);
          scaled *= BigInt(Math.round(Number(value) * 100));
          divisor *= 100n;
        }
        const rounded = (2n * scaled + divisor) / (2n * divisor);
        expect(result.total.minor).toBe(rounded < 2500n ? 2500n : rounded);
        expect(price(card, result.inputs)).toEqual(result);
      }),
      { numRuns: 500 },
    );
  });
});
