import { eq } from "drizzle-orm";
import { z } from "zod";
import { orders } from "@/db/schema/licensing";
import { system } from "@/lib/kernel/actor";
import { NotFound, Precondition } from "@/lib/kernel/errors";
import { command, query } from "@/lib/kernel/verb";
import { PaymentError, paymentKeys, readCheckout, readDispute, readPayment, refund } from "@/lib/payments";
import { completePayment } from "./complete-payment";
import { lockOrder, orderById } from "./own-order";
import { closeDispute, recordDispute } from "./record-dispute";
import { completeRefund, readRefund, recordOutsideRefund } from "./refund-lines";

/** What an event is about. Only ids are believed of it; what counts is read from the processor as it is now. */
const Subject = z.discriminatedUnion("kind", [
  z.object({ kind: z.enum(["checkout_completed", "checkout_expired"]), checkoutId: z.string() }),
  z.object({ kind: z.literal("payment_failed"), orderId: z.string().nullable() }),
  z.object({ kind: z.literal("refunded"), paymentId: z.string().nullable() }),
  z.object({
    kind: z.enum(["dispute_opened", "dispute_closed"]),
    disputeId: z.string(),
    paymentId: z.string().nullable(),
  }),
]);
export type OrderEventSubject = z.infer<typeof Subject>;

const actor = system("licensing.paymentEvent");

const readOrderPayment = query({
  name: "licensing.readOrderPayment",
  who: ["system"],
  input: z.object({ orderId: z.string().max(40) }),
  authorise: async ({ reader, input }) => {
    const order = await orderById(reader, input.orderId);
    if (!order) throw new NotFound();
    return order;
  },
  run: async ({ subject }) => ({
    paymentId: subject.paymentIntent,
    checkoutId: subject.checkoutSession,
  }),
});

/** A checkout lapsed or a card was declined: the order says so and can be paid again. */
const noteUnpaid = command({
  name: "licensing.noteUnpaid",
  who: ["system"],
  input: z.object({ orderId: z.string().max(40), words: z.string().max(300) }),
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: async ({ tx, input }) => {
    const order = await orderById(tx, input.orderId);
    if (!order) throw new NotFound();
    return order;
  },
  run: async ({ tx, input, subject: order }) => {
    if (order.state === "awaiting payment")
      await tx.update(orders).set({ stateWords: input.words }).where(eq(orders.id, order.id));
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.libraryId }),
});

/** LICENSING-8: whatever was announced, once: the operation is named by the checkout, not by the event. */
async function settleCheckout(checkoutId: string): Promise<void> {
  const checkout = await readCheckout(checkoutId);
  if (!checkout.orderId) return;
  if (checkout.state === "expired")
    return void (await noteUnpaid(actor, {
      orderId: checkout.orderId,
      words: "The payment page lapsed; nothing was paid. You can open it again.",
    }));
  if (checkout.state !== "paid") return;
  const { payment } = checkout;
  if (!payment) throw new Precondition("The processor has not written the payment yet; it is read again.");
  await completePayment(
    actor,
    {
      orderId: checkout.orderId,
      checkoutId,
      paymentId: payment.paymentId,
      chargeId: payment.chargeId,
      grossMinor: payment.gross.minor,
      currency: payment.gross.currency,
      feeMinor: payment.fee.minor,
    },
    { operationId: `payment:${checkoutId}` },
  );
}

/** The order of a payment, whose sale is completed first if its own event has not come yet. */
async function settledOrderOf(paymentId: string) {
  const payment = await readPayment(paymentId);
  if (!payment?.orderId) return null;
  const { orderId } = payment;
  const known = await readOrderPayment(actor, { orderId });
  if (known.paymentId === null && known.checkoutId) await settleCheckout(known.checkoutId);
  const settled = await readOrderPayment(actor, { orderId });
  if (settled.paymentId === null)
    throw new Precondition(`The sale of ${orderId} is not complete yet; its event is still to come.`);
  return { orderId, payment, isItsOwn: settled.paymentId === paymentId };
}

async function settleRefund(paymentId: string): Promise<void> {
  const found = await settledOrderOf(paymentId);
  if (!found?.isItsOwn) return;
  const { orderId, payment } = found;
  const { refundId } = await recordOutsideRefund(
    actor,
    { orderId, paymentId, refundedMinor: payment.refunded.minor },
    { operationId: `refunded:${paymentId}:${payment.refunded.minor}` },
  );
  if (refundId) await completeRefund(actor, { refundId, processorRefund: null }, { operationId: refundId });
}

async function settleDispute(disputeId: string): Promise<void> {
  const dispute = await readDispute(disputeId);
  const found = dispute.paymentId ? await settledOrderOf(dispute.paymentId) : null;
  if (!found?.isItsOwn) return;
  const about = { orderId: found.orderId, disputeId };
  await recordDispute(
    actor,
    { ...about, amountMinor: dispute.amount.minor, feeMinor: dispute.fee.minor },
    { operationId: `dispute:${disputeId}:opened` },
  );
  if (dispute.state === "won" || dispute.state === "lost")
    await closeDispute(
      actor,
      { ...about, won: dispute.state === "won" },
      { operationId: `dispute:${disputeId}:closed` },
    );
}

/** Acts on an event of the processor. False where it is not about an order. */
export async function settleEvent(raw: unknown): Promise<boolean> {
  const parsed = Subject.safeParse(raw);
  if (!parsed.success) return false;
  const subject = parsed.data;
  switch (subject.kind) {
    case "checkout_completed":
    case "checkout_expired":
      await settleCheckout(subject.checkoutId);
      return true;
    case "payment_failed":
      if (subject.orderId)
        await noteUnpaid(actor, {
          orderId: subject.orderId,
          words: "The bank declined the last try; nothing was paid. You can try again or pay another way.",
        });
      return true;
    case "refunded":
      if (subject.paymentId) await settleRefund(subject.paymentId);
      return true;
    case "dispute_opened":
    case "dispute_closed":
      await settleDispute(subject.disputeId);
      return true;
  }
}

/** Asks the processor for a refund and writes down that it was made. */
export async function sendRefund(refundId: string): Promise<void> {
  const asked = await readRefund(system("licensing.sendRefund"), { refundId });
  if (asked.isDone) return;
  const processorRefund = await refund({
    paymentId: asked.paymentId,
    orderId: asked.orderId,
    amount: asked.amount,
    reason: "requested_by_customer",
    idempotencyKey: paymentKeys.refund(asked.orderId, refundId),
  }).then(
    (made) => made.refundId,
    (error: unknown) => {
      // Somebody gave it back at the processor itself.
      if (error instanceof PaymentError && error.reason === "already_refunded") return null;
      throw error;
    },
  );
  await completeRefund(
    system("licensing.sendRefund"),
    { refundId, processorRefund },
    { operationId: refundId },
  );
}
