import type Stripe from "stripe";
import type { Money } from "@/lib/kernel/money";
import { amountOnWire, ask, moneyOf, type PaymentsClient, paymentsClient } from "./stripe";

export interface CheckoutLine {
  /** Plain text, as the buyer reads it on the processor's page. */
  name: string;
  /** More than zero: a line of nothing, such as no tax, is left out. */
  amount: Money;
}

export interface CheckoutRequest {
  orderId: string;
  lines: readonly CheckoutLine[];
  customerEmail: string;
  /** May hold {CHECKOUT_SESSION_ID}. */
  successUrl: string;
  cancelUrl: string;
  /** Between 30 minutes and 24 hours from now, by the machine's clock. */
  expiresAt?: Date;
  idempotencyKey: string;
}

export interface OpenedCheckout {
  checkoutId: string;
  url: string;
  expiresAt: Date;
}

export interface Payment {
  paymentId: string;
  /** The order it was started for. */
  orderId: string | null;
  chargeId: string;
  paidAt: Date;
  gross: Money;
  /** What the processor keeps, in the currency of the payment. */
  fee: Money;
  net: Money;
  /** When the net amount can be paid out. */
  availableOn: Date;
  refunded: Money;
  isDisputed: boolean;
}

export interface Checkout {
  checkoutId: string;
  orderId: string | null;
  state: "open" | "paid" | "unpaid" | "expired";
  total: Money;
  url: string | null;
  /** May lag behind `state`: where it is null although the state is "paid", read again. */
  payment: Payment | null;
  /** The last refusal by the buyer's bank, in its words. */
  lastDecline: string | null;
}

/** Starts a payment of one order; the buyer pays on the processor's own page. */
export async function createCheckout(
  request: CheckoutRequest,
  client: PaymentsClient = paymentsClient(),
): Promise<OpenedCheckout> {
  const metadata = { orderId: request.orderId };
  const lines = request.lines.map(({ name, amount }) => {
    const { amount: unitAmount, currency } = amountOnWire(amount);
    return { quantity: 1, price_data: { currency, unit_amount: unitAmount, product_data: { name } } };
  });
  const session = await ask("starting a checkout", () =>
    client.stripe.checkout.sessions.create(
      {
        mode: "payment",
        line_items: lines,
        client_reference_id: request.orderId,
        customer_email: request.customerEmail,
        metadata,
        payment_intent_data: { metadata, transfer_group: request.orderId },
        success_url: request.successUrl,
        cancel_url: request.cancelUrl,
        ...(request.expiresAt ? { expires_at: Math.floor(request.expiresAt.getTime() / 1000) } : {}),
      },
      { idempotencyKey: request.idempotencyKey },
    ),
  );
  return { checkoutId: session.id, url: session.url ?? "", expiresAt: new Date(session.expires_at * 1000) };
}

function stateOf(session: Stripe.Checkout.Session): Checkout["state"] {
  if (session.status === "open") return "open";
  if (session.status === "expired") return "expired";
  return session.payment_status === "paid" ? "paid" : "unpaid";
}

function isExpanded<T extends { id: string }>(reference: string | T | null | undefined): reference is T {
  return typeof reference === "object" && reference !== null;
}

function paymentOf(intent: Stripe.PaymentIntent | null): Payment | null {
  const charge = intent?.latest_charge;
  if (!intent || !isExpanded(charge) || !charge.paid) return null;
  const movement = charge.balance_transaction;
  if (!isExpanded(movement)) return null;
  return {
    paymentId: intent.id,
    orderId: intent.metadata.orderId ?? null,
    chargeId: charge.id,
    paidAt: new Date(charge.created * 1000),
    gross: moneyOf(charge.amount, charge.currency),
    fee: moneyOf(movement.fee, movement.currency),
    net: moneyOf(movement.net, movement.currency),
    availableOn: new Date(movement.available_on * 1000),
    refunded: moneyOf(charge.amount_refunded, charge.currency),
    isDisputed: charge.disputed,
  };
}

/** The state of a checkout as the processor has it now, whatever events have said. */
export async function readCheckout(
  checkoutId: string,
  client: PaymentsClient = paymentsClient(),
): Promise<Checkout> {
  const session = await ask("reading a checkout", () =>
    client.stripe.checkout.sessions.retrieve(checkoutId, {
      expand: ["payment_intent.latest_charge.balance_transaction"],
    }),
  );
  const intent = isExpanded(session.payment_intent) ? session.payment_intent : null;
  return {
    checkoutId: session.id,
    orderId: session.client_reference_id,
    state: stateOf(session),
    total: moneyOf(session.amount_total ?? 0, session.currency ?? ""),
    url: session.url,
    payment: paymentOf(intent),
    lastDecline: intent?.last_payment_error?.message ?? null,
  };
}

/** The payment behind a charge or a dispute, by the processor's id of the payment. */
export async function readPayment(
  paymentId: string,
  client: PaymentsClient = paymentsClient(),
): Promise<Payment | null> {
  const intent = await ask("reading a payment", () =>
    client.stripe.paymentIntents.retrieve(paymentId, { expand: ["latest_charge.balance_transaction"] }),
  );
  return paymentOf(intent);
}

/** Closes a checkout that nobody has paid. False where it was no longer open. */
export async function expireCheckout(
  checkoutId: string,
  idempotencyKey: string,
  client: PaymentsClient = paymentsClient(),
): Promise<boolean> {
  const { state } = await readCheckout(checkoutId, client);
  if (state !== "open") return false;
  await ask("closing a checkout", () =>
    client.stripe.checkout.sessions.expire(checkoutId, {}, { idempotencyKey }),
  );
  return true;
}
