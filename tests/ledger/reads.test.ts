import "@/tests/support/database";
import { beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { people } from "@/db/schema/accounts";
import { withBusinessClock } from "@/lib/kernel/clock";
import { formatMoney } from "@/lib/kernel/money";
import {
  getJournal,
  getPayout,
  getPayouts,
  getSales,
  getStatement,
  getTrialBalance,
  listStatements,
} from "@/lib/ledger";
import { expectLedgerSound } from "@/tests/support/expect-ledger-sound";
import { makeShop, playWorkedSale, type Shop } from "./support";

/*
 * What people read, over the worked sale. Figures as in worked-journal.test.ts, in a currency that no other test of this
 * database uses, because the marketplace's accountant sees the whole journal.
 */
const CURRENCY = "NZD";
let shop: Shop;
let rival: Shop;
const gbp = (minor: bigint) => formatMoney({ minor, currency: "GBP" });
const inMay = <T>(work: () => Promise<T>) => withBusinessClock(new Date("2026-05-18T09:00:00Z"), work);
const END_OF_MARCH = new Date("2026-03-31T23:59:59Z");

beforeAll(async () => {
  shop = await makeShop();
  rival = await makeShop();
  await playWorkedSale(shop, "april", CURRENCY);
});

const trial = async (at: Date | undefined) => {
  const { balances } = await inMay(() => getTrialBalance(shop.marketplace, at ? { at } : {}));
  const balance = balances.find(({ currency }) => currency === CURRENCY);
  if (!balance) throw new Error("no balance");
  expect(balance.debitMinor).toBe(balance.creditMinor);
  const names = new Map<string, string>();
  for (const { kind, holder, debitMinor, creditMinor } of balance.rows) {
    const letter = holder === null ? "" : ` ${await letterOf(holder)}`;
    names.set(`${kind}${letter}`, `${debitMinor > 0n ? "Dr" : "Cr"} ${gbp(debitMinor + creditMinor)}`);
  }
  return Object.fromEntries(names);
};
async function letterOf(holder: string): Promise<string> {
  const rows = await db().select().from(people);
  const id = rows.find(({ name }) => name === holder)?.id;
  return { [shop.A]: "A", [shop.C]: "C", [shop.E]: "E" }[id ?? ""] ?? holder;
}

describe("the trial balance", () => {
  test("at 31 March 23:59:59 UTC: bank 157.30 and who is owed it", async () => {
    expect(await trial(END_OF_MARCH)).toEqual({
      bank: "Dr £157.30",
      "vat payable GB": "Cr £73.00",
      "platform fee income": "Cr £54.75",
      "processor fee cost": "Dr £6.77",
      "processor fee recharged": "Cr £6.77",
      "composer available C": "Cr £12.23",
      "composer available E": "Cr £17.32",
    });
  });

  test("before the first entry it is empty, and at the sale's second it has the sale", async () => {
    const empty = await getTrialBalance(shop.marketplace, { at: new Date("2026-03-14T09:59:59Z") });
    expect(empty.balances.filter(({ currency }) => currency === CURRENCY)).toEqual([]);
    expect(await trial(new Date("2026-03-14T10:00:01Z"))).toMatchObject({
      "processor clearing": "Dr £431.23",
      "library held Saltmarrow": "Cr £151.73",
    });
  });

  test("after refund and chargeback: A −77.20, the library −196.73, C and E nothing, tax and income nothing", async () => {
    expect(await trial(undefined)).toEqual({
      bank: "Dr £157.30",
      "processor clearing": "Cr £453.00",
      "processor fee cost": "Dr £6.77",
      "dispute cost": "Dr £15.00",
      "library available Saltmarrow": "Dr £196.73",
      "composer available A": "Dr £77.20",
    });
  });

  test("a library's accountant sees its payables and no others; another library's sees nothing of them", async () => {
    const own = await getTrialBalance(shop.accountant, { at: END_OF_MARCH });
    expect(own.isWhole).toBe(false);
    expect(own.balances.flatMap(({ rows }) => rows.map(({ kind }) => kind))).toEqual([
      "composer available",
      "composer available",
    ]);
    expect((await getTrialBalance(rival.accountant, {})).balances).toEqual([]);
    expect(await getJournal(rival.accountant, { period: "2026-03" })).toEqual([]);
  });
});

describe("the journal", () => {
  test("March has J1 to J5 and each balances; April has J6 to J9", async () => {
    const ours = async (period: string) =>
      (await getJournal(shop.marketplace, { period })).filter(({ currency }) => currency === CURRENCY);
    const march = await ours("2026-03");
    expect(march.map(({ name }) => name)).toEqual([
      "Sale",
      "Settlement",
      "Hold ended",
      "Advance repaid",
      "Payout",
      "Payout",
    ]);
    const april = await ours("2026-04");
    expect(april.map(({ name }) => name)).toEqual([
      "Refund",
      "Payment dispute",
      "Repayment of an advance put back",
      "Charge for a dispute",
    ]);
    for (const { nets } of [...march, ...april])
      expect(nets.reduce((sum, { debitMinor }) => sum + debitMinor, 0n)).toBe(0n);
  });
});

describe("a composer's statement", () => {
  const writerA = () => shop.composer(shop.A);
  test("March: 59.87 and 17.33 earned, 77.20 paid, nothing left", async () => {
    const [statement] = await inMay(() => getStatement(writerA(), { period: "2026-03" }));
    expect(
      statement?.lines.map((line) => [line.code, gbp(line.amountMinor), line.sale?.cueTitle ?? null]),
    ).toEqual([
      ["capture", "£59.87", "Cue 1"],
      ["capture", "£17.33", "Cue 2"],
      ["payout", "−£77.20", null],
    ]);
    expect([statement?.openingMinor, statement?.closingMinor]).toEqual([0n, 0n]);
    expect(statement?.lines[0]?.sale).toMatchObject({
      orderNumber: "O-1041",
      netMinor: 24_000n,
      platformFeeMinor: 3600n,
      processorFeeMinor: 445n,
      receiptsMinor: 19_955n,
      poolBps: 5000,
      shareBps: 6000,
      buyer: null,
      productionTitle: null,
    });
  });

  test("April: −17.33 and −59.87, each with its reason, and a balance of −77.20", async () => {
    const [statement] = await inMay(() => getStatement(writerA(), { period: "2026-04" }));
    expect(statement?.lines.map((line) => [gbp(line.amountMinor), line.reason])).toEqual([
      ["−£17.33", "Bought twice by mistake: refunded."],
      ["−£59.87", "The buyer's bank took this payment back."],
    ]);
    expect(gbp(statement?.closingMinor ?? 0n)).toBe("−£77.20");
    const [may] = await inMay(() => getStatement(writerA(), { period: "2026-05" }));
    expect([may?.openingMinor, may?.closingMinor, may?.lines]).toEqual([-7720n, -7720n, []]);
  });

  test("shows an advance with what is left of it, and put back after the dispute", async () => {
    const C = shop.composer(shop.C);
    const march = (await inMay(() => getStatement(C, { period: "2026-03" })))[0];
    expect(march?.advance).toEqual({ paidMinor: 4500n, recoupedMinor: 4500n, outstandingMinor: 0n });
    expect(gbp(march?.closingMinor ?? 0n)).toBe("£12.23");
    const april = (await inMay(() => getStatement(C, { period: "2026-04" })))[0];
    expect(april?.advance?.outstandingMinor).toBe(4500n);
    expect(april?.closingMinor).toBe(0n);
  });

  test("the months follow each other: each opens with what the one before closed with", async () => {
    const months = await inMay(() => listStatements(writerA(), {}));
    expect(months.map(({ month, isOpen }) => [month, isOpen])).toEqual([
      ["2026-05", true],
      ["2026-04", false],
      ["2026-03", false],
    ]);
    expect(months.map(({ sums }) => sums[0]?.closingMinor)).toEqual([-7720n, -7720n, 0n]);
  });

  test("nobody reads another's: a composer of another library has none, and a month to come has none", async () => {
    expect(await getStatement(rival.composer(rival.A), { period: "2026-03" })).toEqual([]);
    await expect(inMay(() => getStatement(writerA(), { period: "2026-06" }))).rejects.toMatchObject({
      code: "not_found",
    });
    const elsewhere = { ...writerA(), libraryId: rival.libraryId };
    expect(await getStatement(elsewhere, { period: "2026-03" })).toEqual([]);
  });
});

describe("the owner's money", () => {
  test("at the end of March: nothing held, nothing available, 196.73 paid, and every figure the sum of its lines", async () => {
    const { currencies } = await getSales(shop.owner, { at: END_OF_MARCH });
    const [sales] = currencies;
    expect(sales).toMatchObject({ heldMinor: 0n, availableMinor: 0n, paidMinor: 19_673n, disputedMinor: 0n });
    expect(sales?.totals).toEqual({
      grossMinor: 43_800n,
      taxMinor: 7300n,
      platformFeeMinor: 5475n,
      processorFeeMinor: 677n,
      receiptsMinor: 30_348n,
    });
    expect(sales?.lines.map((line) => [line.state, line.libraryMinor, line.keptMinor])).toEqual([
      ["available", 9977n, 9977n],
      ["available", 5196n, 5196n],
    ]);
    for (const line of sales?.lines ?? []) {
      const writers = line.writers.reduce((sum, { amountMinor }) => sum + amountMinor, 0n);
      const fees = line.taxMinor + line.platformFeeMinor + line.processorFeeMinor;
      expect(fees + line.libraryMinor + writers).toBe(line.grossMinor);
    }
    for (const groups of [sales?.months, sales?.cues, sales?.productions])
      expect(groups?.reduce((sum, { keptMinor }) => sum + keptMinor, 0n)).toBe(15_173n);
  });

  test("on 20 March it is held until the 28th, and on 30 March available with the advance come back", async () => {
    const [held] = (await getSales(shop.owner, { at: new Date("2026-03-20T12:00:00Z") })).currencies;
    expect([held?.heldMinor, held?.availableMinor]).toEqual([15_173n, 0n]);
    expect(held?.lines[0]?.holdEndsAt).toEqual(new Date("2026-03-28T00:00:00Z"));
    const [free] = (await getSales(shop.owner, { at: new Date("2026-03-30T12:00:00Z") })).currencies;
    expect([free?.heldMinor, free?.availableMinor, free?.paidMinor]).toEqual([0n, 19_673n, 0n]);
    expect(
      free?.others.map(({ name, amountMinor, advancesOf }) => [name, amountMinor, advancesOf.length]),
    ).toEqual([["Advance repaid", 4500n, 1]]);
  });

  test("April is −196.73, explained by the refund, the dispute and the advance put back", async () => {
    const [april] = await inMay(() => getStatement(shop.owner, { period: "2026-04" }));
    expect(april?.lines.map(({ amountMinor }) => gbp(amountMinor))).toEqual([
      "−£51.96",
      "−£99.77",
      "−£45.00",
    ]);
    expect(gbp(april?.closingMinor ?? 0n)).toBe("−£196.73");
    const [now] = (await inMay(() => getSales(shop.owner, {}))).currencies;
    expect(now?.lines.map(({ state, keptMinor }) => [state, keptMinor])).toEqual([
      ["disputed", 0n],
      ["refunded", 0n],
    ]);
    expect(now?.disputedMinor).toBe(9977n);
  });

  test("another library's owner sees none of it", async () => {
    expect((await getSales(rival.owner, {})).currencies).toEqual([]);
    expect((await getPayouts(rival.owner, {})).runs).toEqual([]);
  });
});

describe("a payout", () => {
  const run = async () => (await getPayouts(shop.owner, {})).runs[0]!;
  test("196.73 opens into 99.77, 51.96 and the 45.00 of an advance", async () => {
    const own = (await run()).payouts.find(({ kind }) => kind === "library")!;
    const payout = await getPayout(shop.owner, { payoutId: own.payoutId });
    expect(payout).toMatchObject({ state: "paid", amountMinor: 19_673n, openingMinor: 0n, leftMinor: 0n });
    expect(
      payout.lines.map(({ amountMinor, sale }) => [gbp(amountMinor), sale?.licenceNumber ?? null]),
    ).toEqual([
      ["£99.77", "LR-2026-0101-X"],
      ["£51.96", "LR-2026-0102-X"],
      ["£45.00", null],
    ]);
  });

  test("carried ones say why; a composer opens the own one and nobody else's", async () => {
    const { payouts } = await run();
    expect(
      payouts
        .filter(({ state }) => state === "carried")
        .map(({ amountMinor, reason }) => [amountMinor, reason]),
    ).toEqual([
      [1732n, `Carried forward: less than ${CURRENCY}\u00a025.00.`],
      [1223n, `Carried forward: less than ${CURRENCY}\u00a025.00.`],
    ]);
    const ofA = payouts.find(({ amountMinor }) => amountMinor === 7720n)!;
    expect((await getPayout(shop.composer(shop.A), { payoutId: ofA.payoutId })).lines).toHaveLength(2);
    for (const actor of [shop.composer(shop.C), rival.owner, rival.accountant])
      await expect(getPayout(actor, { payoutId: ofA.payoutId })).rejects.toMatchObject({ code: "not_found" });
    await expectLedgerSound();
  });
});
