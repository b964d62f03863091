import { eq } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { orderLines, orderRefunds, orders } from "@/db/schema/licensing";
import { familyById, libraryById, lockFamily, splitAt } from "@/lib/catalogue";
import { enqueue } from "@/lib/jobs";
import type { Actor } from "@/lib/kernel/actor";
import { civilDateIn } from "@/lib/kernel/calendar";
import { assert, NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { licenceNumber } from "@/lib/kernel/licence-number";
import { formatMoney, money } from "@/lib/kernel/money";
import { command } from "@/lib/kernel/verb";
import { postCapture, postRefusedPayment } from "@/lib/ledger";
import { productionById } from "@/lib/productions";
import { orderObstacle } from "./approve-order";
import { issueWhenReady } from "./issue-licences";
import { wordsOfUse } from "./mail-confirmation";
import { nextInSeries, SERIES } from "./number-series";
import {
  linesOf,
  lockOrder,
  type OrderLineRow,
  type OrderRow,
  orderById,
  orderNumber,
  storedLicensee,
} from "./own-order";
import { writeInvoice } from "./write-invoice";

/** A payment as the processor has it now, read again for the purpose; never what an event says. */
const CompletePayment = z.object({
  orderId: z.string().max(40),
  checkoutId: z.string().max(120),
  paymentId: z.string().max(80),
  chargeId: z.string().max(80),
  grossMinor: z.bigint(),
  currency: z.string().length(3),
  feeMinor: z.bigint(),
});
type Paid = z.output<typeof CompletePayment>;

export type Completion = { outcome: "licensed" | "paid" | "refused" | "already" };

export async function askRefund(
  tx: Tx,
  refund: {
    order: OrderRow;
    lineIds: string[];
    amountMinor: bigint;
    currency: string;
    paymentId: string;
    words: string;
    askedBy: string | null;
    now: Date;
  },
): Promise<string> {
  const refundId = newId("ref");
  await tx.insert(orderRefunds).values({
    id: refundId,
    orderId: refund.order.id,
    lineIds: refund.lineIds,
    amountMinor: refund.amountMinor,
    currency: refund.currency,
    words: refund.words.slice(0, 500),
    state: "asked",
    paymentIntent: refund.paymentId,
    askedBy: refund.askedBy,
    askedAt: refund.now,
  });
  await enqueue(tx, "licensing.sendRefund", { refundId }, { key: refundId, priority: 20 });
  return refundId;
}

/** LICENSING-2: nothing is issued, everything goes back, and the order says why. */
async function refuse(
  tx: Tx,
  order: OrderRow,
  paid: Paid,
  why: string,
  { now, actor }: { now: Date; actor: Actor },
): Promise<Completion> {
  const words = `${why} Your payment goes back in full and nothing was licensed.`;
  const isSecond = order.state === "paid" || order.state === "licensed" || order.state === "refused";
  if (!isSecond)
    await tx
      .update(orders)
      .set({ state: "refused", stateWords: words.slice(0, 500), paymentIntent: paid.paymentId, paidAt: now })
      .where(eq(orders.id, order.id));
  await askRefund(tx, {
    order,
    lineIds: [],
    amountMinor: paid.grossMinor,
    currency: paid.currency,
    paymentId: paid.paymentId,
    words,
    askedBy: null,
    now,
  });
  await postRefusedPayment(tx, {
    orderId: order.id,
    paymentId: paid.paymentId,
    currency: paid.currency,
    grossMinor: paid.grossMinor,
    feeMinor: paid.feeMinor,
    chargeId: paid.chargeId,
    words: `Order ${orderNumber(order)} was paid and not licensed. ${why}`,
    eventAt: now,
    now,
    actor,
  });
  return { outcome: "refused" };
}

function mismatch(order: OrderRow, paid: Paid): string | null {
  if (order.state === "withdrawn") return "The order was withdrawn before it was paid.";
  if (order.state === "proposed") return "The order was paid before anybody approved it.";
  if (paid.currency === order.currency && paid.grossMinor === order.grossMinor) return null;
  const [got, due] = [money(paid.grossMinor, paid.currency), money(order.grossMinor, order.currency)].map(
    formatMoney,
  );
  return `${got} was paid where ${due} was due.`;
}

/** Takes the licences' numbers and the split that is valid now. */
async function numberLines(tx: Tx, lines: readonly OrderLineRow[], year: number, now: Date) {
  const numbered: OrderLineRow[] = [];
  for (const line of lines) {
    const split = await splitAt(tx, line.familyId, now);
    assert(split, `the family of line ${line.id} has a split`);
    const number = licenceNumber(year, await nextInSeries(tx, SERIES.licence(year)));
    await tx
      .update(orderLines)
      .set({ licenceNumber: number, splitVersionId: split.splitVersionId })
      .where(eq(orderLines.id, line.id));
    numbered.push({ ...line, licenceNumber: number, splitVersionId: split.splitVersionId });
  }
  return numbered;
}

async function postSale(
  tx: Tx,
  sale: { order: OrderRow; lines: readonly OrderLineRow[]; paid: Paid; now: Date; actor: Actor },
): Promise<void> {
  const { order, lines, paid, now, actor } = sale;
  const library = await libraryById(tx, order.libraryId);
  const production = await productionById(tx, order.productionId);
  assert(library && production, `the library and production of ${order.id} are there`);
  const captured = [];
  for (const line of lines) {
    const split = await splitAt(tx, line.familyId, now);
    const family = await familyById(tx, line.familyId);
    assert(split && family, `the family of line ${line.id} is there`);
    captured.push({
      orderLineId: line.id,
      licenceNumber: line.licenceNumber,
      familyId: line.familyId,
      productionId: order.productionId,
      netMinor: line.netMinor,
      taxMinor: line.taxMinor,
      writers: split.writers.map(({ personId, shareBps, position }) => {
        assert(personId, `every writer of ${line.familyId} has an account`);
        return { personId, shareBps, position };
      }),
      cueTitle: family.title,
      scopeWords: wordsOfUse(line),
    });
  }
  await postCapture(tx, {
    orderId: order.id,
    libraryId: order.libraryId,
    currency: order.currency,
    eventAt: now,
    taxCountry: order.taxMinor > 0n ? storedLicensee(order).countryCode : "-",
    lines: captured,
    composerPoolBps: library.composerPoolBps,
    processorFeeMinor: paid.feeMinor,
    chargeId: paid.chargeId,
    facts: {
      orderNumber: orderNumber(order),
      buyer: storedLicensee(order).name,
      productionTitle: production.title,
      libraryName: library.name,
    },
    now,
    actor,
  });
}

/**
 * A checkout has been paid. The order is locked; amount and currency are compared; the families are locked, so that a hold is
 * placed either before this and seen, or after it; the sale guard runs again. Then numbers, invoice, journal and records in
 * this one transaction, or a refund of everything.
 */
export const completePayment = command({
  name: "licensing.completePayment",
  who: ["system"],
  input: CompletePayment,
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: async ({ tx, input }) => {
    const order = await orderById(tx, input.orderId);
    if (!order) throw new NotFound();
    return order;
  },
  run: async ({ tx, actor, input: paid, subject: order, now }): Promise<Completion> => {
    const when = { now, actor };
    if (order.paymentIntent === paid.paymentId) return { outcome: "already" };
    if (order.paymentIntent !== null)
      return refuse(tx, order, paid, "The order had been paid already.", when);
    const wrong = mismatch(order, paid);
    if (wrong) return refuse(tx, order, paid, wrong, when);

    const lines = await linesOf(tx, order.id);
    for (const familyId of [...new Set(lines.map((line) => line.familyId))].sort())
      await lockFamily(tx, familyId);
    const obstacle = await orderObstacle(tx, order, lines, now);
    if (obstacle) return refuse(tx, order, paid, obstacle, when);

    const library = await libraryById(tx, order.libraryId);
    assert(library, `the library of ${order.id} is there`);
    const year = Number(civilDateIn(now, library.timeZone).slice(0, 4));
    const numbered = await numberLines(tx, lines, year, now);
    const done: OrderRow = { ...order, state: "paid", paidAt: now, paymentIntent: paid.paymentId };
    await writeInvoice(tx, { order: done, lines: numbered, library, now });
    await tx
      .update(orders)
      .set({
        state: "paid",
        stateWords: "Paid. The masters are being prepared; the records are signed when they are there.",
        paidAt: now,
        paymentIntent: paid.paymentId,
        checkoutSession: paid.checkoutId,
      })
      .where(eq(orders.id, order.id));
    await postSale(tx, { order: done, lines: numbered, paid, now, actor });
    const issued = await issueWhenReady(tx, done, now, { round: 0, evenWithout: false });
    return { outcome: issued ? "licensed" : "paid" };
  },
  audit: ({ subject, input, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { outcome: result.outcome, checkoutId: input.checkoutId, paymentId: input.paymentId },
  }),
});
