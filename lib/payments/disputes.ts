import type Stripe from "stripe";
import type { Money } from "@/lib/kernel/money";
import { ask, idOf, moneyOf, type PaymentsClient, paymentsClient } from "./stripe";

export interface Dispute {
  disputeId: string;
  paymentId: string | null;
  chargeId: string | null;
  state: "open" | "answered" | "won" | "lost";
  amount: Money;
  /** What the processor has charged for the dispute so far. */
  fee: Money;
  reason: string;
  evidenceDueBy: Date | null;
}

function stateOf(status: Stripe.Dispute["status"]): Dispute["state"] {
  if (status === "won") return "won";
  if (status === "lost") return "lost";
  return status === "needs_response" || status === "warning_needs_response" ? "open" : "answered";
}

function disputeOf(dispute: Stripe.Dispute): Dispute {
  const feeMinor = dispute.balance_transactions.reduce((sum, movement) => sum + movement.fee, 0);
  const dueBy = dispute.evidence_details.due_by;
  return {
    disputeId: dispute.id,
    paymentId: idOf(dispute.payment_intent),
    chargeId: idOf(dispute.charge),
    state: stateOf(dispute.status),
    amount: moneyOf(dispute.amount, dispute.currency),
    fee: moneyOf(feeMinor, dispute.currency),
    reason: dispute.reason,
    evidenceDueBy: dueBy ? new Date(dueBy * 1000) : null,
  };
}

export async function readDispute(
  disputeId: string,
  client: PaymentsClient = paymentsClient(),
): Promise<Dispute> {
  return disputeOf(await ask("reading a dispute", () => client.stripe.disputes.retrieve(disputeId)));
}

/** Hands in what the seller has to say; it cannot be changed afterwards. */
export async function answerDispute(
  request: { disputeId: string; customerEmail: string; text: string; idempotencyKey: string },
  client: PaymentsClient = paymentsClient(),
): Promise<Dispute> {
  const answered = await ask("answering a dispute", () =>
    client.stripe.disputes.update(
      request.disputeId,
      {
        evidence: { customer_email_address: request.customerEmail, uncategorized_text: request.text },
        submit: true,
      },
      { idempotencyKey: request.idempotencyKey },
    ),
  );
  return disputeOf(answered);
}
