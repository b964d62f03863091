import "@/tests/support/database";
import { and, eq, inArray } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { mailOutbox } from "@/db/schema/infrastructure";
import { ledgerEntries, paymentEvents, payouts } from "@/db/schema/ledger";
import { startPayments } from "@/fixtures/services/payments/payments";
import type { StandIn } from "@/fixtures/services/server";
import { withBusinessClock } from "@/lib/kernel/clock";
import { money } from "@/lib/kernel/money";
import {
  confirmPayoutRun,
  getOwnPayee,
  getOwnProcessorAccount,
  preparePayoutRun,
  recordAdvance,
  recordPaymentEvent,
  refreshPayee,
  releasePayoutRun,
  startPayee,
} from "@/lib/ledger";
import { ledgerHandlers } from "@/lib/ledger/jobs";
import { createCheckout, paymentKeys, readBalance, readCheckout, readDispute, refund } from "@/lib/payments";
import { control, temporaryDir } from "@/tests/contract/support";
import { expectLedgerSound } from "@/tests/support/expect-ledger-sound";
import { minor } from "./invented-sale";
import { balances, job, journal, lineOf, makeShop, type Shop, steps, WORKED_AT, workedSale } from "./support";

/*
 * The worked sale of the trade's own example, through the same verbs and jobs that real events take, on the real database
 * and against the stand-in of the payment service at the end of the real SDK. The figures are worked by hand in the design of
 * this product from rules that are common practice (platform fee of the net sale, processor fee pro rata, half of receipts to
 * the writers by largest remainder); no outside source prints them.
 */
const dir = temporaryDir();
let service: StandIn;
let shop: Shop;
let sale: ReturnType<typeof workedSale>;
let paymentId = "";

const at =
  (instant: string) =>
  <T>(work: () => Promise<T>) =>
    withBusinessClock(new Date(instant), work);
const run = {
  settle: () => ledgerHandlers["ledger.settle"].handle(),
  release: () => ledgerHandlers["ledger.releaseHolds"].handle(),
  open: (payeeId: string) => ledgerHandlers["ledger.openPayee"].handle({ payeeId }),
  send: (payoutId: string) => ledgerHandlers["ledger.sendPayout"].handle({ payoutId }),
};
const codes = async () => (await journal(shop)).map(({ code }) => code);
const last = async () => (await journal(shop)).at(-1);

beforeAll(async () => {
  service = await startPayments({
    port: 0,
    dataDir: dir.path,
    secretKey: process.env.STRIPE_SECRET_KEY ?? "",
    webhookSecret: process.env.STRIPE_WEBHOOK_SECRET ?? "",
    webhookUrl: null,
  });
  process.env.STRIPE_API_BASE = service.url;
  shop = await makeShop();
  await recordAdvance(shop.owner, {
    libraryId: shop.libraryId,
    personId: shop.C,
    amountMinor: minor("45.00"),
    currency: "GBP",
    paidAt: new Date("2025-11-03T00:00:00Z"),
  });
});

afterAll(async () => {
  await service.close();
  dir.remove();
});

/** Bank and identity given at the processor by the library and by A. */
async function onboard() {
  for (const actor of [shop.owner, shop.composer(shop.A)]) {
    const { payeeId } = await startPayee(actor, { legalName: "A Payee", countryCode: "GB" });
    await run.open(payeeId);
    await run.open(payeeId);
    const account = await getOwnProcessorAccount(actor, {});
    await control(service.url, { completeOnboarding: { account, last4: "4417" } });
    await refreshPayee(account);
    expect(await getOwnPayee(actor, {})).toMatchObject({
      state: "ready",
      bankLast4: "4417",
      heldUntil: null,
    });
  }
}

describe.sequential("the worked sale, through the verbs", () => {
  test("J1 the capture: the fee is what the processor took, and every part is held", async () => {
    sale = workedSale(shop);
    const { checkoutId } = await createCheckout({
      orderId: sale.orderId,
      lines: [{ name: "O-1041", amount: money(minor("438.00"), "GBP") }],
      customerEmail: "buyer@test.example",
      successUrl: "http://127.0.0.1/ok",
      cancelUrl: "http://127.0.0.1/no",
      idempotencyKey: paymentKeys.checkout(sale.orderId, 1),
    });
    await control(service.url, { pay: checkoutId });
    const { payment } = await readCheckout(checkoutId);
    if (!payment) throw new Error("the payment is missing");
    paymentId = payment.paymentId;
    sale = { ...sale, chargeId: payment.chargeId, processorFeeMinor: payment.fee.minor };
    await at("2026-03-14T10:00:05Z")(() => steps.capture(job, sale));
    expect(await journal(shop)).toEqual([
      {
        code: "capture",
        on: "2026-03-14",
        nets: {
          "processor clearing": "Dr 431.23",
          "processor fee cost": "Dr 6.77",
          "vat payable GB": "Cr 73.00",
          "platform fee income": "Cr 54.75",
          "processor fee recharged": "Cr 6.77",
          "library held SM": "Cr 151.73",
          "composer held A": "Cr 77.20",
          "composer held C": "Cr 57.23",
          "composer held E": "Cr 17.32",
        },
      },
    ]);
  });

  test("the same event again is the first entry; with other content it is a conflict (LEDGER-4)", async () => {
    const [entry] = await db().select().from(ledgerEntries).where(eq(ledgerEntries.orderId, sale.orderId));
    for (let time = 0; time < 20; time++)
      expect(await steps.capture(job, sale)).toEqual({ entryId: entry?.id, isNew: false });
    await expect(
      steps.capture(job, { ...sale, processorFeeMinor: sale.processorFeeMinor + 1n }),
    ).rejects.toMatchObject({ code: "conflict" });
    expect(await codes()).toEqual(["capture"]);
    const event = {
      eventId: `evt_${sale.orderId}`,
      type: "checkout.session.completed",
      subject: { kind: "x" },
    };
    for (let time = 0; time < 20; time++)
      await recordPaymentEvent(job, event, { operationId: `event:${event.eventId}` });
    expect(await db().select().from(paymentEvents).where(eq(paymentEvents.id, event.eventId))).toHaveLength(
      1,
    );
  });

  test("J2 settlement: nothing before the processor makes it available, then once", async () => {
    await at("2026-03-15T09:00:00Z")(run.settle);
    expect(await codes()).toEqual(["capture"]);
    await control(service.url, { settle: true });
    await at("2026-03-17T09:00:00Z")(run.settle);
    await at("2026-03-17T10:00:00Z")(run.settle);
    expect(await codes()).toEqual(["capture", "settlement"]);
    expect(await last()).toEqual({
      code: "settlement",
      on: "2026-03-17",
      nets: { bank: "Dr 431.23", "processor clearing": "Cr 431.23" },
    });
  });

  test("J3 and J4 the hold ends on the 14th day and not a second before; C's advance is repaid with it", async () => {
    await at("2026-03-27T23:59:50Z")(run.release);
    expect(await codes()).toEqual(["capture", "settlement"]);
    await at("2026-03-28T00:00:00Z")(run.release);
    await at("2026-03-28T01:00:00Z")(run.release);
    const [release, recoupment, ...more] = (await journal(shop)).slice(2);
    expect(more).toEqual([]);
    expect(release).toEqual({
      code: "hold ends",
      on: "2026-03-28",
      nets: {
        "library held SM": "Dr 151.73",
        "composer held A": "Dr 77.20",
        "composer held C": "Dr 57.23",
        "composer held E": "Dr 17.32",
        "library available SM": "Cr 151.73",
        "composer available A": "Cr 77.20",
        "composer available C": "Cr 57.23",
        "composer available E": "Cr 17.32",
      },
    });
    expect(recoupment).toEqual({
      code: "recoupment",
      on: "2026-03-28",
      nets: { "composer available C": "Dr 45.00", "library available SM": "Cr 45.00" },
    });
    await expectLedgerSound();
  });

  test("J5 the payout (LEDGER-11, LEDGER-12): two persons release it, those under 25.00 are carried, and sending twice moves money once", async () => {
    await onboard();
    await at("2026-03-31T09:00:00Z")(async () => {
      const { runId } = await preparePayoutRun(shop.accountant, {
        libraryId: shop.libraryId,
        currency: "GBP",
      });
      await expect(confirmPayoutRun(shop.marketplace, { runId })).rejects.toMatchObject({
        code: "precondition",
      });
      await releasePayoutRun(shop.accountant, { runId });
      const same = { ...shop.marketplace, personId: shop.accountant.personId };
      await expect(confirmPayoutRun(same, { runId })).rejects.toMatchObject({ code: "forbidden" });
      const stale = { ...shop.marketplace, secondFactorAt: new Date(Date.now() - 11 * 60_000).toISOString() };
      await expect(confirmPayoutRun(stale, { runId })).rejects.toMatchObject({
        fields: { secondFactor: "again" },
      });
      await confirmPayoutRun(shop.marketplace, { runId });
      const rows = await db().select().from(payouts).where(eq(payouts.runId, runId));
      expect(rows.map(({ state, amountMinor }) => [state, amountMinor]).sort()).toEqual([
        ["carried", minor("12.23")],
        ["carried", minor("17.32")],
        ["prepared", minor("196.73")],
        ["prepared", minor("77.20")],
      ]);
      // The answer to the first transfer is lost: the money has moved, and the job comes again.
      await control(service.url, { rules: [{ match: "POST /v1/transfers", act: "lose", times: 3 }] });
      const library = rows.find(({ kind }) => kind === "library")!;
      await expect(run.send(library.id)).rejects.toMatchObject({ reason: "unreachable" });
      for (const { id } of rows) await run.send(id);
      for (const { id } of rows) await run.send(id);
    });
    const paid = (await journal(shop)).slice(4);
    expect(paid.map(({ code, on }) => [code, on])).toEqual([
      ["payout", "2026-03-31"],
      ["payout", "2026-03-31"],
    ]);
    expect(paid.map(({ nets }) => nets)).toEqual(
      expect.arrayContaining([
        { "library available SM": "Dr 196.73", bank: "Cr 196.73" },
        { "composer available A": "Dr 77.20", bank: "Cr 77.20" },
      ]),
    );
    const { available } = await readBalance();
    expect(available).toEqual([money(minor("157.30"), "GBP")]);
    expect(await balances(shop)).toMatchObject({ bank: "157.30" });
    const people = [shop.owner.personId, shop.accountant.personId, shop.A, shop.C, shop.E];
    const letters = await db()
      .select()
      .from(mailOutbox)
      .where(and(eq(mailOutbox.template, "payout-sent"), inArray(mailOutbox.personId, people)));
    expect(letters.map(({ personId }) => personId).sort()).toEqual(
      [shop.owner.personId, shop.accountant.personId, shop.A].sort(),
    );
    await expectLedgerSound();
  });

  test("J6 the refund of line 2 takes back the stored parts (LEDGER-7, LEDGER-8)", async () => {
    const made = await refund({
      paymentId,
      orderId: sale.orderId,
      amount: money(minor("150.00"), "GBP"),
      reason: "duplicate",
      idempotencyKey: paymentKeys.refund(sale.orderId, "line 2"),
    });
    const given = {
      orderId: sale.orderId,
      orderLineIds: [lineOf(sale, 2)],
      words: "Refund of the second line: bought twice by mistake.",
      processorFeeAbsorbed: true as const,
      refundId: made.refundId,
      eventAt: new Date("2026-04-02T11:00:00Z"),
    };
    await at("2026-04-02T11:00:00Z")(() => steps.refund(job, given));
    expect(await last()).toEqual({
      code: "refund",
      on: "2026-04-02",
      nets: {
        "vat payable GB": "Dr 25.00",
        "platform fee income": "Dr 18.75",
        "processor fee recharged": "Dr 2.32",
        "library available SM": "Dr 51.96",
        "composer available A": "Dr 17.33",
        "composer available C": "Dr 17.32",
        "composer available E": "Dr 17.32",
        "processor clearing": "Cr 150.00",
      },
    });
    expect(await steps.refund(job, given)).toMatchObject({ isNew: false });
    await expect(
      steps.refund(job, { ...given, orderLineIds: [lineOf(sale, 1), lineOf(sale, 2)] }),
    ).rejects.toMatchObject({ code: "precondition" });
    await expectLedgerSound();
  });

  test("J7, J8 and J9 the chargeback of line 1, the recoupment put back, the processor's charge", async () => {
    const { id } = (await control(service.url, {
      openDispute: { charge: sale.chargeId, reason: "fraudulent" },
    })) as { id: string };
    const dispute = await readDispute(id);
    const given = {
      orderId: sale.orderId,
      disputeId: id,
      amountMinor: dispute.amount.minor,
      chargeMinor: dispute.fee.minor,
      words: "The buyer's bank took the payment of the first line back.",
      eventAt: new Date("2026-04-20T08:00:00Z"),
    };
    const posted = await at("2026-04-20T08:00:00Z")(() => steps.dispute(job, given));
    expect((await journal(shop)).slice(-3)).toEqual([
      {
        code: "dispute",
        on: "2026-04-20",
        nets: {
          "vat payable GB": "Dr 48.00",
          "platform fee income": "Dr 36.00",
          "processor fee recharged": "Dr 4.45",
          "library available SM": "Dr 99.77",
          "composer available A": "Dr 59.87",
          "composer available C": "Dr 39.91",
          "processor clearing": "Cr 288.00",
        },
      },
      {
        code: "recoupment reversed",
        on: "2026-04-20",
        nets: { "library available SM": "Dr 45.00", "composer available C": "Cr 45.00" },
      },
      {
        code: "dispute charge",
        on: "2026-04-20",
        nets: { "dispute cost": "Dr 15.00", "processor clearing": "Cr 15.00" },
      },
    ]);
    expect(await steps.dispute(job, given)).toEqual({ ...posted, isNew: false });
    await control(service.url, { settle: true });
    await at("2026-04-23T08:00:00Z")(run.settle);
    // Negatives are exactly what was paid out, plus the platform's own losses on fees: 273.93 + 6.77 + 15.00 = 295.70.
    expect(await balances(shop)).toEqual({
      bank: "-295.70",
      "processor fee cost": "6.77",
      "dispute cost": "15.00",
      "library available SM": "196.73",
      "composer available A": "77.20",
    });
    await expectLedgerSound();
  });

  test("LEDGER-13 a payout run in April debits nobody, and says why each is carried", async () => {
    await at("2026-04-30T09:00:00Z")(async () => {
      const { runId, toPay } = await preparePayoutRun(shop.accountant, {
        libraryId: shop.libraryId,
        currency: "GBP",
      });
      expect(toPay).toBe(0);
      const rows = await db().select().from(payouts).where(eq(payouts.runId, runId));
      expect(rows.map(({ state, amountMinor }) => [state, amountMinor])).toEqual(
        expect.arrayContaining([
          ["carried", minor("-196.73")],
          ["carried", minor("-77.20")],
        ]),
      );
      expect(rows).toHaveLength(2);
      for (const { reason } of rows) expect(reason).toContain("never taken from anybody's bank");
      await expect(releasePayoutRun(shop.accountant, { runId })).rejects.toMatchObject({
        code: "precondition",
      });
    });
  });

  test("a later sale of 100.00 comes off what is below nothing: A −34.70, the library −154.23", async () => {
    const later = workedSale(shop, {
      eventAt: new Date("2026-04-24T08:00:00Z"),
      processorFeeMinor: 0n,
      taxCountry: "-",
    });
    const [first] = later.lines;
    const lines = [
      {
        ...first!,
        netMinor: minor("100.00"),
        taxMinor: 0n,
        writers: [{ personId: shop.A, shareBps: 10_000, position: 0 }],
      },
    ];
    await at("2026-04-24T08:00:00Z")(() => steps.capture(job, { ...later, lines }));
    await at("2026-05-08T00:00:00Z")(run.release);
    expect(await balances(shop)).toMatchObject({
      "library available SM": "154.23",
      "composer available A": "34.70",
    });
    await expectLedgerSound();
  });

  test("were the dispute won, J7 and J8 are turned round by entries that point to them (LEDGER-3)", async () => {
    const rows = await db().select().from(ledgerEntries).where(eq(ledgerEntries.code, "dispute"));
    const dispute = rows.find(({ orderId }) => orderId === sale.orderId)!;
    const disputeId = dispute.processorSource ?? "";
    const given = { disputeId, words: "The dispute was decided for the seller.", eventAt: WORKED_AT };
    const { entryIds } = await steps.disputeWon(job, given);
    expect(entryIds).toHaveLength(2);
    expect((await steps.disputeWon(job, given)).entryIds).toEqual(entryIds);
    expect(await balances(shop)).toMatchObject({ "composer available C": "5.09" });
    await expectLedgerSound();
  });
});
