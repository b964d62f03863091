import { eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader, Tx } from "@/db/client";
import { orderRefunds } from "@/db/schema/licensing";
import { requireRecentSecondFactor } from "@/lib/accounts";
import { familiesByIds, libraryById } from "@/lib/catalogue";
import type { Actor } from "@/lib/kernel/actor";
import { assert, NotFound, Precondition } from "@/lib/kernel/errors";
import { formatMoney, money } from "@/lib/kernel/money";
import { command, query } from "@/lib/kernel/verb";
import { postRefund, postReturnedPayment } from "@/lib/ledger";
import { addLicenceStatus, statusHistory } from "../records/record-log";
import { RefundLines } from "../schemas";
import { askRefund } from "./complete-payment";
import { mailRefund } from "./mail-confirmation";
import { linesOf, lockOrder, type OrderLineRow, type OrderRow, orderById } from "./own-order";
import { invoiceOf, writeCreditNote } from "./write-invoice";

type RefundRow = typeof orderRefunds.$inferSelect;

export async function refundsOf(reader: Reader, orderId: string): Promise<RefundRow[]> {
  return reader.select().from(orderRefunds).where(eq(orderRefunds.orderId, orderId));
}

const grossOf = (lines: readonly OrderLineRow[]) =>
  lines.reduce((sum, line) => sum + line.netMinor + line.taxMinor, 0n);

/** Lines of which nothing has been given back or is being given back. */
async function linesLeft(reader: Reader, orderId: string): Promise<OrderLineRow[]> {
  const given = new Set((await refundsOf(reader, orderId)).flatMap((refund) => refund.lineIds));
  return (await linesOf(reader, orderId)).filter(({ id }) => !given.has(id));
}

async function checkUndisputed(reader: Reader, lines: readonly OrderLineRow[]): Promise<void> {
  for (const { licenceNumber } of lines) {
    if (!licenceNumber) continue;
    const last = (await statusHistory(reader, licenceNumber)).at(-1);
    if (last?.kind === "payment disputed" || last?.kind === "payment reversed")
      throw new Precondition(
        `The payment of ${licenceNumber} is disputed at the buyer's bank, which has the money. Nothing was refunded.`,
      );
  }
}

function mayRefund(actor: Actor, order: OrderRow): boolean {
  if (actor.kind === "system") return true;
  if (actor.kind === "owner") return actor.libraryId === order.libraryId;
  return actor.kind === "accountant" && actor.libraryId === null;
}

/** Gives whole licences back: the owner of the library or the marketplace's accountant decides, and says why. */
export const refundLines = command({
  name: "licensing.refundLines",
  who: ["owner", "accountant", "system"],
  input: RefundLines,
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: async ({ tx, actor, input }) => {
    const order = await orderById(tx, input.orderId);
    if (!order || !mayRefund(actor, order)) throw new NotFound();
    requireRecentSecondFactor(actor);
    return order;
  },
  run: async ({ tx, actor, input, subject: order, now }) => {
    if (order.state !== "licensed" || order.paymentIntent === null)
      throw new Precondition("Only licences that have been issued can be refunded.");
    const left = await linesLeft(tx, order.id);
    const lines = left.filter(({ id }) => input.lineIds.includes(id));
    if (lines.length !== new Set(input.lineIds).size)
      throw new Precondition("One of these licences has been refunded already. Nothing was refunded.");
    await checkUndisputed(tx, lines);
    const refundId = await askRefund(tx, {
      order,
      lineIds: lines.map(({ id }) => id),
      amountMinor: grossOf(lines),
      currency: order.currency,
      paymentId: order.paymentIntent,
      words: input.words,
      askedBy: actor.kind === "system" ? null : actor.personId,
      now,
    });
    return { refundId };
  },
  audit: ({ subject, input, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { lineIds: input.lineIds, words: input.words, refundId: result.refundId },
  }),
});

async function refundById(reader: Reader, refundId: string): Promise<RefundRow> {
  const [row] = await reader.select().from(orderRefunds).where(eq(orderRefunds.id, refundId));
  if (!row) throw new NotFound();
  return row;
}

/** What the processor is to give back, for the job that asks it. */
export const readRefund = query({
  name: "licensing.readRefund",
  who: ["system"],
  input: z.object({ refundId: z.string().max(40) }),
  authorise: ({ reader, input }) => refundById(reader, input.refundId),
  run: async ({ subject: refund }) => ({
    orderId: refund.orderId,
    paymentId: refund.paymentIntent,
    amount: money(refund.amountMinor, refund.currency),
    isDone: refund.state === "done",
  }),
});

/** The refund of lines in journal, papers and licences. */
async function takeBack(
  tx: Tx,
  args: { order: OrderRow; refund: RefundRow; processorRefund: string | null; now: Date; actor: Actor },
) {
  const { order, refund, processorRefund, now, actor } = args;
  const lines = (await linesOf(tx, order.id)).filter(({ id }) => refund.lineIds.includes(id));
  const library = await libraryById(tx, order.libraryId);
  const invoice = await invoiceOf(tx, order.id);
  assert(library && invoice, `the sale of ${order.id} is complete`);
  await postRefund(tx, {
    orderId: order.id,
    orderLineIds: lines.map(({ id }) => id),
    words: refund.words.slice(0, 300),
    processorFeeAbsorbed: true,
    refundId: processorRefund,
    eventAt: now,
    now,
    actor,
  });
  const note = await writeCreditNote(tx, { order, lines, library, now, invoice, words: refund.words });
  for (const line of lines)
    if (line.licenceNumber)
      await addLicenceStatus(tx, {
        number: line.licenceNumber,
        kind: "refunded",
        words: "Refunded in full; the licence ends here.",
        at: now,
        now,
      });
  const families = new Map(
    (
      await familiesByIds(
        tx,
        lines.map(({ familyId }) => familyId),
      )
    ).map((family) => [family.id, family]),
  );
  return {
    creditNoteNumber: note.number,
    licences: lines.map((line) => ({
      title: families.get(line.familyId)?.title ?? "a cue",
      recordNumber: line.licenceNumber ?? "",
      effect: "it ends now; the record stays readable and says so.",
    })),
  };
}

/** The refund of a payment that got no licence. */
async function giveBack(
  tx: Tx,
  args: { order: OrderRow; refund: RefundRow; processorRefund: string | null; now: Date; actor: Actor },
) {
  const { order, refund, processorRefund, now, actor } = args;
  await postReturnedPayment(tx, {
    orderId: order.id,
    paymentId: refund.paymentIntent,
    currency: refund.currency,
    grossMinor: refund.amountMinor,
    refundId: processorRefund,
    eventAt: now,
    now,
    actor,
  });
  return { creditNoteNumber: null, licences: [] };
}

/** The processor has given the money back. */
export const completeRefund = command({
  name: "licensing.completeRefund",
  who: ["system"],
  input: z.object({ refundId: z.string().max(40), processorRefund: z.string().max(80).nullable() }),
  guard: async ({ tx, input }) => lockOrder(tx, (await refundById(tx, input.refundId)).orderId),
  authorise: async ({ tx, input }) => {
    const refund = await refundById(tx, input.refundId);
    const order = await orderById(tx, refund.orderId);
    assert(order, `the order of refund ${refund.id} is there`);
    return { refund, order };
  },
  run: async ({ tx, actor, input, subject: { refund, order }, now }) => {
    if (refund.state === "done") return null;
    await tx
      .update(orderRefunds)
      .set({ state: "done", processorRefund: input.processorRefund, doneAt: now })
      .where(eq(orderRefunds.id, refund.id));
    const done =
      refund.lineIds.length > 0
        ? await takeBack(tx, { order, refund, processorRefund: input.processorRefund, now, actor })
        : await giveBack(tx, { order, refund, processorRefund: input.processorRefund, now, actor });
    await mailRefund(tx, {
      order,
      amountMinor: refund.amountMinor,
      currency: refund.currency,
      refundedAt: now,
      reason: refund.words,
      ...done,
    });
    return null;
  },
  audit: ({ subject: { refund, order } }) => ({
    subject: order.id,
    libraryId: order.libraryId,
    detail: { refundId: refund.id },
  }),
});

/**
 * A refund that was made at the processor itself: what it gave back beyond our own refunds is one licence or all that is left,
 * or a person has to look.
 */
export const recordOutsideRefund = command({
  name: "licensing.recordOutsideRefund",
  who: ["system"],
  input: z.object({
    orderId: z.string().max(40),
    paymentId: z.string().max(80),
    refundedMinor: z.bigint(),
  }),
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: async ({ tx, input }) => {
    const order = await orderById(tx, input.orderId);
    if (!order) throw new NotFound();
    return order;
  },
  run: async ({ tx, input, subject: order, now }) => {
    const ours = (await refundsOf(tx, order.id)).filter((row) => row.paymentIntent === input.paymentId);
    const extra = input.refundedMinor - ours.reduce((sum, row) => sum + row.amountMinor, 0n);
    if (extra <= 0n || order.paymentIntent !== input.paymentId) return { refundId: null };
    const left = await linesLeft(tx, order.id);
    const one = left.find((line) => grossOf([line]) === extra);
    const lines = grossOf(left) === extra ? left : one ? [one] : null;
    if (!lines)
      throw new Precondition(
        `${formatMoney(money(extra, order.currency))} of order O-${order.number} was refunded at the processor and is no whole licence: a person has to look.`,
      );
    const refundId = await askRefund(tx, {
      order,
      lineIds: lines.map(({ id }) => id),
      amountMinor: extra,
      currency: order.currency,
      paymentId: input.paymentId,
      words: "Refunded at the payment processor.",
      askedBy: null,
      now,
    });
    return { refundId };
  },
  audit: ({ subject, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { refundId: result.refundId },
  }),
});
