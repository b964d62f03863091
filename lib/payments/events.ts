import type Stripe from "stripe";
import { ask, idOf, type PaymentsClient, paymentErrorOf, paymentsClient } from "./stripe";

/** What an event is about. Only ids: whoever handles it reads the object as it is now. */
export type PaymentEventSubject =
  | { kind: "checkout_completed" | "checkout_expired"; checkoutId: string; orderId: string | null }
  | { kind: "payment_failed"; paymentId: string; orderId: string | null }
  | { kind: "refunded"; chargeId: string; paymentId: string | null; orderId: string | null }
  | { kind: "dispute_opened" | "dispute_closed"; disputeId: string; paymentId: string | null }
  | { kind: "payee_changed" | "bank_changed"; accountId: string }
  | { kind: "transfer_created"; transferId: string; payoutId: string | null }
  | { kind: "ignored" };

export interface PaymentEvent {
  eventId: string;
  /** The processor's name of the event, kept with it. */
  type: string;
  createdAt: Date;
  subject: PaymentEventSubject;
}

function orderOf(metadata: Record<string, string>): string | null {
  return metadata.orderId ?? null;
}

function subjectOf(event: Stripe.Event): PaymentEventSubject {
  switch (event.type) {
    case "checkout.session.completed":
    case "checkout.session.async_payment_succeeded":
      return {
        kind: "checkout_completed",
        checkoutId: event.data.object.id,
        orderId: event.data.object.client_reference_id,
      };
    case "checkout.session.expired":
      return {
        kind: "checkout_expired",
        checkoutId: event.data.object.id,
        orderId: event.data.object.client_reference_id,
      };
    case "payment_intent.payment_failed":
      return {
        kind: "payment_failed",
        paymentId: event.data.object.id,
        orderId: orderOf(event.data.object.metadata),
      };
    case "charge.refunded": {
      const { id, payment_intent, metadata } = event.data.object;
      return { kind: "refunded", chargeId: id, paymentId: idOf(payment_intent), orderId: orderOf(metadata) };
    }
    case "charge.dispute.created":
      return {
        kind: "dispute_opened",
        disputeId: event.data.object.id,
        paymentId: idOf(event.data.object.payment_intent),
      };
    case "charge.dispute.closed":
      return {
        kind: "dispute_closed",
        disputeId: event.data.object.id,
        paymentId: idOf(event.data.object.payment_intent),
      };
    case "account.updated":
      return { kind: "payee_changed", accountId: event.data.object.id };
    case "account.external_account.created":
    case "account.external_account.updated":
      return event.account ? { kind: "bank_changed", accountId: event.account } : { kind: "ignored" };
    case "transfer.created":
      return {
        kind: "transfer_created",
        transferId: event.data.object.id,
        payoutId: event.data.object.metadata.payoutId ?? null,
      };
    default:
      return { kind: "ignored" };
  }
}

function paymentEventOf(event: Stripe.Event): PaymentEvent {
  return {
    eventId: event.id,
    type: event.type,
    createdAt: new Date(event.created * 1000),
    subject: subjectOf(event),
  };
}

/** Verifies the signature over the raw body, no older than five minutes. Throws PaymentError "bad_signature". */
export function constructEvent(
  rawBody: string,
  signatureHeader: string,
  client: PaymentsClient = paymentsClient(),
): PaymentEvent {
  try {
    return paymentEventOf(
      client.stripe.webhooks.constructEvent(rawBody, signatureHeader, client.webhookSecret),
    );
  } catch (error) {
    throw paymentErrorOf("verifying an event", error);
  }
}

export async function readEvent(
  eventId: string,
  client: PaymentsClient = paymentsClient(),
): Promise<PaymentEvent> {
  return paymentEventOf(await ask("reading an event", () => client.stripe.events.retrieve(eventId)));
}

/** Events since a moment, oldest first: what a site that was away has missed. */
export async function listEventsSince(
  since: Date,
  client: PaymentsClient = paymentsClient(),
): Promise<PaymentEvent[]> {
  return ask("listing events", async () => {
    const found: PaymentEvent[] = [];
    const created = { gte: Math.floor(since.getTime() / 1000) };
    for await (const event of client.stripe.events.list({ created, limit: 100 }))
      found.push(paymentEventOf(event));
    return found.reverse();
  });
}
