import "@/tests/support/database";
import { eq, sql } from "drizzle-orm";
import { beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import {
  advances,
  ledgerAccounts,
  ledgerEntries,
  ledgerTransfers,
  payoutRuns,
  payouts,
} from "@/db/schema/ledger";
import { withBusinessClock } from "@/lib/kernel/clock";
import { newId } from "@/lib/kernel/ids";
import {
  beginPayout,
  postEntry,
  preparePayoutRun,
  recordPayoutSent,
  releaseHolds,
  settlePayments,
  verifyLedger,
} from "@/lib/ledger";
import { composerAccount, libraryAccount } from "@/lib/ledger/legs";
import { expectLedgerSound } from "@/tests/support/expect-ledger-sound";
import { job, lineOf, makePayee, makeShop, type Shop, steps, workedSale } from "./support";

const ROUNDS = 60;
const onRelease = <T>(work: () => Promise<T>) => withBusinessClock(new Date("2026-03-28T00:00:00Z"), work);

let shop: Shop;
beforeAll(async () => {
  shop = await makeShop();
  await makePayee("library", shop.libraryId);
});

async function released(): Promise<ReturnType<typeof workedSale>> {
  const sale = workedSale(shop);
  await steps.capture(job, sale);
  await onRelease(() => releaseHolds(job, { orderId: sale.orderId }));
  return sale;
}

async function owed(kind: string, holderId: string): Promise<bigint> {
  const [account] = await db()
    .select()
    .from(ledgerAccounts)
    .where(sql`kind = ${kind} and holder_id = ${holderId}`);
  const [row] = await db()
    .select({
      total: sql<string>`coalesce(sum(case when credit_account_id = ${account?.id} then amount_minor else -amount_minor end), 0)`,
    })
    .from(ledgerTransfers)
    .where(sql`${account?.id} in (credit_account_id, debit_account_id)`);
  return BigInt(row?.total ?? 0);
}

/** A confirmed run of one payout, as if two had been prepared from the same balance. */
async function confirmedPayout(amountMinor: bigint, payeeId: string): Promise<string> {
  const [runId, id] = [newId("run"), newId("po")];
  const at = new Date();
  const { libraryId } = shop;
  await db().insert(payoutRuns).values({
    id: runId,
    libraryId,
    currency: "GBP",
    state: "confirmed",
    preparedBy: shop.accountant.personId,
    preparedAt: at,
    releasedBy: shop.accountant.personId,
    releasedAt: at,
    confirmedBy: shop.marketplace.personId,
    confirmedAt: at,
  });
  await db().insert(payouts).values({
    id,
    runId,
    libraryId,
    kind: "person",
    holderId: shop.A,
    payeeId,
    amountMinor,
    currency: "GBP",
    state: "prepared",
    reason: "a race",
  });
  return id;
}

describe("races", () => {
  test(`LEDGER-5 two payouts of one balance, ${ROUNDS} rounds: one leaves, the other fails, nothing is overdrawn`, async () => {
    const payeeId = await makePayee("person", shop.A);
    for (let round = 0; round < ROUNDS; round++) {
      await released();
      const balance = await owed("composer available", shop.A);
      const ids = [await confirmedPayout(balance, payeeId), await confirmedPayout(balance, payeeId)];
      const begun = await Promise.all(ids.map((payoutId) => beginPayout(job, { payoutId })));
      const winners = begun.filter((one) => one !== null);
      expect(winners, `round ${round}`).toHaveLength(1);
      for (const { payoutId } of winners)
        await recordPayoutSent(job, { payoutId, transferId: `tr_${payoutId}` });
      expect(await owed("composer available", shop.A), `round ${round}`).toBe(0n);
    }
    await expectLedgerSound();
  });

  test("LEDGER-5 every posting to a payable raises its version", async () => {
    const version = async () =>
      (
        await db()
          .select({ version: ledgerAccounts.version })
          .from(ledgerAccounts)
          .where(sql`kind = 'library held' and holder_id = ${shop.libraryId}`)
      )[0]?.version ?? 0;
    const sale = workedSale(shop);
    const before = await version();
    await steps.capture(job, sale);
    const after = await version();
    expect(after).toBeGreaterThan(before);
    await onRelease(() => releaseHolds(job, { orderId: sale.orderId }));
    expect(await version()).toBeGreaterThan(after);
  });

  test("LEDGER-4 the same sale twenty times at once is one entry", async () => {
    const sale = workedSale(shop);
    const posted = await Promise.all(Array.from({ length: 20 }, () => steps.capture(job, sale)));
    expect(new Set(posted.map(({ entryId }) => entryId)).size).toBe(1);
    expect(posted.filter(({ isNew }) => isNew)).toHaveLength(1);
    await expectLedgerSound();
  });

  test("LEDGER-9 a release racing a refund, 20 rounds: the line is released or taken back from where it stands", async () => {
    for (let round = 0; round < 20; round++) {
      const sale = workedSale(shop);
      await steps.capture(job, sale);
      const refund = {
        orderId: sale.orderId,
        orderLineIds: [lineOf(sale, 1)],
        words: "A refund in a race.",
        processorFeeAbsorbed: true as const,
        eventAt: new Date("2026-03-28T00:00:00Z"),
      };
      await onRelease(() =>
        Promise.all([releaseHolds(job, { orderId: sale.orderId }), steps.refund(job, refund)]),
      );
    }
    await expectLedgerSound();
    expect(await owed("library held", shop.libraryId)).toBeGreaterThanOrEqual(0n);
  });

  test("LEDGER-11 the same payout sent by five workers at once is one entry", async () => {
    const payeeId = (await db().select().from(payouts).where(eq(payouts.holderId, shop.A)))[0]?.payeeId ?? "";
    await released();
    const payoutId = await confirmedPayout(await owed("composer available", shop.A), payeeId);
    await beginPayout(job, { payoutId });
    const sent = await Promise.all(
      Array.from({ length: 5 }, () => recordPayoutSent(job, { payoutId, transferId: "tr_once" })),
    );
    expect(new Set(sent.map(({ entryId }) => entryId)).size).toBe(1);
    await expectLedgerSound();
  });
});

describe("rules of posting", () => {
  const legOf = (amountMinor: bigint) => ({
    debit: { kind: "bank" as const, holderId: "-" },
    credit: composerAccount(shop.E, "available"),
    amountMinor,
    orderLineId: null,
    shareBps: null,
  });
  const entry = (amountMinor: bigint) => ({
    idempotencyKey: newId("key"),
    code: "settlement" as const,
    words: "An entry of the tests.",
    currency: "GBP",
    legs: [legOf(amountMinor)],
    facts: {},
    eventAt: new Date(),
  });

  test("LEDGER-1 nothing is posted of an amount that is not above 0, of no legs, or in what is no currency", async () => {
    await expect(steps.entry(job, entry(0n))).rejects.toThrow("LEDGER-1");
    await expect(steps.entry(job, entry(-5n))).rejects.toThrow("LEDGER-1");
    await expect(steps.entry(job, { ...entry(5n), legs: [] })).rejects.toThrow("LEDGER-1");
    await expect(steps.entry(job, { ...entry(5n), currency: "XXX" })).rejects.toThrow(RangeError);
  });

  test("LEDGER-2 the database refuses a leg whose currency is not its entry's and its accounts'", async () => {
    const { entryId } = await steps.entry(job, entry(5n));
    const [transfer] = await db().select().from(ledgerTransfers).where(eq(ledgerTransfers.entryId, entryId));
    const other = { ...transfer!, id: newId("tra"), number: 2, currency: "EUR" };
    await expect(db().insert(ledgerTransfers).values(other)).rejects.toThrow();
  });

  test("LEDGER-3 the application's user can neither change nor delete entries and legs", async () => {
    for (const table of [ledgerEntries, ledgerTransfers]) {
      await expect(db().delete(table)).rejects.toThrow();
      await expect(db().update(table).set({ currency: "EUR" })).rejects.toThrow();
    }
  });

  test("a movement whose sale is not in the journal yet waits, and is settled when it is", async () => {
    const sale = workedSale(shop);
    const movements = [
      { movementId: newId("txn"), sourceId: sale.chargeId ?? "", netMinor: 43_123n, currency: "GBP" },
    ];
    expect((await settlePayments(job, { movements })).waiting).toHaveLength(1);
    await steps.capture(job, sale);
    expect((await settlePayments(job, { movements })).settled).toHaveLength(1);
    expect(await settlePayments(job, { movements })).toEqual({ settled: [], waiting: [] });
  });

  test("a payee that is not ready, or whose bank was changed within 7 days, is carried forward with the reason", async () => {
    const changed = await makeShop();
    await steps.capture(job, workedSale(changed, { eventAt: new Date("2026-03-14T10:00:00Z") }));
    const [order] = await db()
      .select()
      .from(ledgerEntries)
      .where(eq(ledgerEntries.libraryId, changed.libraryId));
    await onRelease(() => releaseHolds(job, { orderId: order?.orderId ?? "" }));
    await makePayee("library", changed.libraryId, { bankChangedAt: new Date("2026-03-25T09:00:00Z") });
    const reasonsOn = async (day: string) => {
      const at = new Date(`${day}T10:00:00Z`);
      const { runId } = await withBusinessClock(at, () =>
        preparePayoutRun(changed.accountant, { libraryId: changed.libraryId, currency: "GBP" }),
      );
      const rows = await db().select().from(payouts).where(eq(payouts.runId, runId));
      return Object.fromEntries(rows.map(({ holderId, state, reason }) => [holderId, `${state}: ${reason}`]));
    };
    const early = await reasonsOn("2026-03-31");
    expect(early[changed.libraryId]).toBe(
      "carried: Carried forward: the bank account was changed, so payments wait until 1 April 2026.",
    );
    expect(early[changed.A]).toContain("bank and identity have not been given");
    expect(early[changed.E]).toContain("less than £25.00");
    expect((await reasonsOn("2026-04-01"))[changed.libraryId]).toBe("prepared: The whole available balance.");
  });

  test("LEDGER-10 an advance is repaid from its own library's sales only", async () => {
    const [mine, theirs] = [await makeShop(), await makeShop()];
    await db()
      .insert(advances)
      .values({
        id: newId("adv"),
        libraryId: mine.libraryId,
        personId: mine.A,
        amountMinor: 100_000n,
        currency: "GBP",
        paidAt: new Date("2025-11-03T00:00:00Z"),
      });
    const elsewhere = workedSale({ ...theirs, A: mine.A });
    await steps.capture(job, elsewhere);
    const sold = await onRelease(() => releaseHolds(job, { orderId: elsewhere.orderId }));
    expect(sold.recoupmentEntryId).toBeNull();
    const here = workedSale(mine);
    await steps.capture(job, here);
    expect(
      (await onRelease(() => releaseHolds(job, { orderId: here.orderId }))).recoupmentEntryId,
    ).not.toBeNull();
    expect(await owed("composer available", mine.A)).toBe(7720n);
    await expectLedgerSound();
  });

  test("LEDGER-6 the check finds what should not be there: an entry without legs, more come back than was paid", async () => {
    const id = newId("ent");
    const undone = new Error("undone");
    let found: string[] = [];
    const breaking = db().transaction(async (tx) => {
      await tx.insert(ledgerEntries).values({
        id,
        idempotencyKey: id,
        contentSha256: "0".repeat(64),
        code: "reversal",
        words: "An entry that nobody should have written.",
        currency: "GBP",
        facts: {},
        actorKind: "system",
        eventAt: new Date(),
        postedAt: new Date(),
      });
      const tooMuch = {
        ...legOf(700n),
        debit: composerAccount(shop.E, "available"),
        credit: libraryAccount(shop.libraryId, "available"),
      };
      await postEntry(tx, { ...entry(700n), legs: [tooMuch], now: new Date(), actor: job });
      found = (await verifyLedger(tx)).map(({ invariant }) => invariant.slice(0, 9));
      throw undone;
    });
    await expect(breaking).rejects.toBe(undone);
    expect(found).toEqual(["LEDGER-1 ", "LEDGER-3 ", "LEDGER-10"]);
    await expectLedgerSound();
  });
});
