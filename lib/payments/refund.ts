import type { Money } from "@/lib/kernel/money";
import { amountOnWire, ask, idOf, moneyOf, type PaymentsClient, paymentsClient } from "./stripe";

export interface RefundRequest {
  paymentId: string;
  orderId: string;
  /** Left out: everything that is not refunded yet. */
  amount?: Money;
  reason: "duplicate" | "requested_by_customer";
  idempotencyKey: string;
}

export interface Refund {
  refundId: string;
  paymentId: string | null;
  amount: Money;
  state: string;
  createdAt: Date;
}

/** Gives back all or part of one payment, in its own currency. */
export async function refund(
  request: RefundRequest,
  client: PaymentsClient = paymentsClient(),
): Promise<Refund> {
  const made = await ask("refunding a payment", () =>
    client.stripe.refunds.create(
      {
        payment_intent: request.paymentId,
        ...(request.amount ? { amount: amountOnWire(request.amount).amount } : {}),
        reason: request.reason,
        metadata: { orderId: request.orderId },
      },
      { idempotencyKey: request.idempotencyKey },
    ),
  );
  return {
    refundId: made.id,
    paymentId: idOf(made.payment_intent),
    amount: moneyOf(made.amount, made.currency),
    state: made.status ?? "unknown",
    createdAt: new Date(made.created * 1000),
  };
}
