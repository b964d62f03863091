import "@/tests/support/database";
import { beforeAll, describe, expect, test } from "vitest";
import { ANONYMOUS, system } from "@/lib/kernel/actor";
import { getRateCard, priceUse, setRateCard } from "@/lib/licensing";
import type { UseInput } from "@/lib/licensing/rate-card";
import { INVENTED_CARD } from "./invented-card";
import { makeCue, makeShop, PROGRAMME, type Shop } from "./shop";

/*
 * The worked prices of the demonstration's card. The structure of the card is common practice; every number on it is
 * invented, so these amounts are worked by hand and hold for nothing else.
 */
const region = { kind: "region", region: "UK+IE" } as const;
const WORKED: ReadonlyArray<readonly [name: string, use: UseInput, text: string, sentence: string]> = [
  ["programme, UK and Ireland, a year", PROGRAMME, "£240.00", "150 × 1.6"],
  [
    "online without spend, perpetual",
    { mediaClass: "MC02", territory: { kind: "world" }, termMonths: null },
    "£125.00",
    "50 × 2.5",
  ],
  [
    "TV advert, UK, three months, second spend tier, two cutdowns",
    {
      mediaClass: "MC08",
      territory: { kind: "country", country: "GB" },
      termMonths: 3,
      tier: { band: 1 },
      cutdowns: 2,
    },
    "£661.50",
    "420 × 0.6 × 1.75 × 1.5",
  ],
  [
    "programme, UK and Ireland, three years, six episodes",
    { mediaClass: "MC06", territory: region, termMonths: 36, episodes: 6 },
    "£1,536.00",
    "150 × 1.6 × 1.6 × 4",
  ],
  [
    "feature film, World, perpetual, budget under a million",
    { mediaClass: "MC11", territory: { kind: "world" }, termMonths: null, tier: { amount: 640_000 } },
    "£1,560.00",
    "520 × 2.4 × 2.5 × 0.5",
  ],
  [
    "podcast, three years, under 100,000 downloads",
    { mediaClass: "MC01", territory: { kind: "world" }, termMonths: 36, tier: { band: 1 } },
    "£83.20",
    "40 × 1.6 × 1.3",
  ],
];

describe("prices", () => {
  let shop: Shop;
  beforeAll(async () => {
    shop = await makeShop();
  });

  test.each(WORKED)(
    "a stranger is told the price of %s with every factor",
    async (_name, use, text, sentence) => {
      const { familyId } = await makeCue(shop.libraryId);
      const answer = await priceUse(ANONYMOUS, { familyId, use });
      expect(answer).toMatchObject({ ok: true, text, sentence });
      expect(answer.factors.map(({ kind }) => kind)).toContain("territory");
    },
  );

  test("LICENSING-2: a share that is not the library's, and a restricted territory, are a question to the library", async () => {
    const foreign = await makeCue(shop.libraryId, { publisher: "Another House" });
    expect(await priceUse(ANONYMOUS, { familyId: foreign.familyId, use: PROGRAMME })).toMatchObject({
      ok: false,
      reason: "quote",
    });
    const restricted = await makeCue(shop.libraryId, { restricted: ["IE"] });
    expect(await priceUse(ANONYMOUS, { familyId: restricted.familyId, use: PROGRAMME })).toMatchObject({
      ok: false,
      reason: "quote",
      sentence: expect.stringContaining("IE"),
    });
    const inUk: UseInput = { ...PROGRAMME, territory: { kind: "country", country: "GB" } };
    expect(await priceUse(ANONYMOUS, { familyId: restricted.familyId, use: inUk })).toMatchObject({
      ok: true,
    });
    const online: UseInput = {
      mediaClass: "MC02",
      territory: { kind: "country", country: "GB" },
      termMonths: 12,
    };
    expect(await priceUse(ANONYMOUS, { familyId: restricted.familyId, use: online })).toMatchObject({
      ok: false,
    });
  });

  test("LICENSING-1: a changed card is a new version, and the old one is still there", async () => {
    const own = await makeShop();
    const { familyId } = await makeCue(own.libraryId);
    const dearer = {
      ...INVENTED_CARD,
      classes: INVENTED_CARD.classes.map((row) => (row.code === "MC06" ? { ...row, base: "200" } : row)),
    };
    expect(await setRateCard(own.owner, { card: dearer })).toEqual({ version: 2 });
    expect(await priceUse(ANONYMOUS, { familyId, use: PROGRAMME })).toMatchObject({ text: "£320.00" });
    const { versions } = await getRateCard(own.owner, {});
    expect(versions.map(({ version }) => version)).toEqual([2, 1]);
    expect(versions[1]?.card.classes.find(({ code }) => code === "MC06")?.base).toBe("150");
  });

  test("a card in another currency than the library's is refused", async () => {
    await expect(
      setRateCard(system("tests"), {
        libraryId: shop.libraryId,
        card: { ...INVENTED_CARD, currency: "EUR" },
      }),
    ).rejects.toMatchObject({ code: "invalid" });
  });

  test("a cue that is not listed has no price, and answers like one that does not exist", async () => {
    await expect(priceUse(ANONYMOUS, { familyId: "fam_none", use: PROGRAMME })).rejects.toMatchObject({
      code: "not_found",
    });
  });
});
