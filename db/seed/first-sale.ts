import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { payouts } from "@/db/schema/ledger";
import { orderLines } from "@/db/schema/licensing";
import { system } from "@/lib/kernel/actor";
import { withBusinessClock } from "@/lib/kernel/clock";
import { env } from "@/lib/kernel/env";
import { assert } from "@/lib/kernel/errors";
import {
  confirmPayoutRun,
  preparePayoutRun,
  readPayeeToOpen,
  recordPaymentEvent,
  releasePayoutRun,
  startPayee,
} from "@/lib/ledger";
import { ledgerHandlers } from "@/lib/ledger/jobs";
import {
  approveOrder,
  openCheckout,
  openSeries,
  placeOrder,
  refundLines,
  TERMS_VERSION,
} from "@/lib/licensing";
import { licensingHandlers } from "@/lib/licensing/jobs";
import { listEventsSince, readCheckout } from "@/lib/payments";
import { licences } from "./data/licences";
import { buyerActor, productionOf } from "./productions";
import { familyOfCue, later } from "./turns";
import { useOf } from "./uses";
import { composerActor, type DemoWorld, libraryOf, ownerActor, personOf, seeding } from "./world";

/*
 * Order O-1041 from basket to chargeback, as real events take it, with the business clock set to the day of each: the
 * processor's stand-in is told what the buyer and the bank did, and its events are read from it as they are in life.
 */
const on = <T>(day: string, work: () => Promise<T>) => withBusinessClock(new Date(`${day}T12:00:00Z`), work);
const once = (key: string) => ({ operationId: `demo:sale:${key}` });

const CONTROL = `${env.STRIPE_API_BASE}/__control`;

async function tellProcessor(message: Record<string, unknown>): Promise<Record<string, unknown>> {
  const answer = await fetch(CONTROL, {
    method: "POST",
    headers: { "content-type": "application/json" },
    body: JSON.stringify(message),
  });
  assert(answer.ok, `the stand-in answered ${answer.status} to ${JSON.stringify(message)}`);
  return (await answer.json()) as Record<string, unknown>;
}

/** Takes in whatever the processor has to say, at the day of the business clock. */
async function takeEvents(): Promise<void> {
  for (const { eventId, type, subject } of await listEventsSince(new Date(0))) {
    await recordPaymentEvent(system("demonstration"), { eventId, type, subject: { ...subject } });
    await licensingHandlers["licensing.paymentEvent"].handle({ eventId });
  }
}

export async function firstSale(world: DemoWorld): Promise<void> {
  const rows = licences.filter((row) => row.origin !== "brought in");
  const families = await Promise.all(rows.map((row) => familyOfCue(world, row.cueNumber)));
  if (families.some((family) => family === null)) return later("sale:O-1041");
  await openSeries(seeding, { name: "order", last: 1040 }, once("series:order"));
  await openSeries(seeding, { name: "licence:2026", last: 100 }, once("series:licence"));
  // The site must not take the events at its own time before they are taken here at theirs.
  await tellProcessor({ rules: [{ match: "outgoing ", act: "hold", times: 200 }] });
  try {
    const orderId = await buy(
      world,
      rows.map((row, index) => ({ familyId: families[index] ?? "", use: useOf(row) })),
    );
    await settleAndPay(world);
    await refundAndDispute(orderId);
  } finally {
    // The rule outlives what it held back: left standing it would hold back the first two hundred real events too.
    const cleared = await fetch(CONTROL, { method: "DELETE" });
    assert(cleared.ok, `the stand-in answered ${cleared.status} to being told to clear its rules`);
    await tellProcessor({ release: "in order" });
  }
}

async function buy(
  world: DemoWorld,
  lines: { familyId: string; use: ReturnType<typeof useOf> }[],
): Promise<string> {
  const buyer = buyerActor(world, "quillbeck");
  const productionId = await productionOf(world, "harbour-mornings");
  assert(buyer && productionId, "Quillbeck has a seat and a production");
  return on("2026-03-14", async () => {
    const { orderId } = await placeOrder(buyer, { productionId, lines }, once("place"));
    await approveOrder(buyer, { orderId, termsVersion: TERMS_VERSION, mayAccept: true }, once("approve"));
    const opened = await openCheckout(buyer, { orderId });
    if (opened.state === "open") await tellProcessor({ pay: opened.url.split("/").at(-1) });
    await takeEvents();
    return orderId;
  });
}

async function settleAndPay(world: DemoWorld): Promise<void> {
  await tellProcessor({ settle: true });
  await on("2026-03-17", () => ledgerHandlers["ledger.settle"].handle());
  await on("2026-03-28", () => ledgerHandlers["ledger.releaseHolds"].handle());
  await onboard(world);
  const desmond = personOf(world, "desmond");
  const mirela = personOf(world, "mirela");
  const now = new Date().toISOString();
  const libraryId = libraryOf(world, "SM");
  await on("2026-03-31", async () => {
    const accountant = {
      kind: "accountant" as const,
      personId: desmond.id,
      name: desmond.name,
      libraryId,
      secondFactorAt: now,
    };
    const { runId } = await preparePayoutRun(
      accountant,
      { libraryId, currency: "GBP" },
      once("payouts:prepare"),
    );
    await releasePayoutRun(accountant, { runId }, once("payouts:release"));
    await confirmPayoutRun(
      { kind: "accountant", personId: mirela.id, name: mirela.name, libraryId: null, secondFactorAt: now },
      { runId },
      once("payouts:confirm"),
    );
    const sent = await db().select({ id: payouts.id }).from(payouts).where(eq(payouts.runId, runId));
    for (const payout of sent) await ledgerHandlers["ledger.sendPayout"].handle({ payoutId: payout.id });
  });
}

/** The library and Ailsa open their accounts with the payment service. */
async function onboard(world: DemoWorld): Promise<void> {
  await on("2026-03-20", async () => {
    const holders = [
      { actor: ownerActor(world, "SM"), legalName: "Saltmarrow Music Library", key: "library" },
      { actor: composerActor(world, "A", "SM"), legalName: personOf(world, "A").name, key: "A" },
    ] as const;
    for (const { actor, legalName, key } of holders) {
      const { payeeId } = await startPayee(actor, { legalName, countryCode: "GB" }, once(`payee:${key}`));
      await ledgerHandlers["ledger.openPayee"].handle({ payeeId });
      const { processorAccount } = await readPayeeToOpen(seeding, { payeeId });
      await tellProcessor({
        completeOnboarding: { account: processorAccount, last4: key === "A" ? "4242" : "7001" },
      });
    }
    await takeEvents();
  });
}

async function refundAndDispute(orderId: string): Promise<void> {
  const lines = await db()
    .select({ id: orderLines.id, number: orderLines.number })
    .from(orderLines)
    .where(eq(orderLines.orderId, orderId));
  const second = lines.find((line) => line.number === 2);
  assert(second, "the order has two lines");
  await on("2026-04-02", async () => {
    const { refundId } = await refundLines(
      seeding,
      { orderId, lineIds: [second.id], words: "Goodwill: the same cue had been bought twice." },
      once("refund"),
    );
    await licensingHandlers["licensing.sendRefund"].handle({ refundId });
    await takeEvents();
  });
  await on("2026-04-20", async () => {
    const charge = await chargeOf(orderId);
    await tellProcessor({ openDispute: { charge, reason: "fraudulent" } });
    await takeEvents();
  });
}

async function chargeOf(orderId: string): Promise<string> {
  const event = (await listEventsSince(new Date(0))).find(
    (candidate) =>
      candidate.type === "checkout.session.completed" &&
      JSON.stringify(candidate.subject).includes("checkoutId"),
  );
  assert(event && "checkoutId" in event.subject, `no checkout of ${orderId}`);
  const checkout = await readCheckout(String(event.subject.checkoutId));
  assert(checkout.payment, "the checkout was paid");
  return checkout.payment.chargeId;
}
