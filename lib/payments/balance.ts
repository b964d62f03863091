import type Stripe from "stripe";
import type { Money } from "@/lib/kernel/money";
import { ask, idOf, moneyOf, type PaymentsClient, paymentsClient } from "./stripe";

export interface Balance {
  available: Money[];
  pending: Money[];
}

export async function readBalance(client: PaymentsClient = paymentsClient()): Promise<Balance> {
  const balance = await ask("reading the balance", () => client.stripe.balance.retrieve());
  const amounts = (entries: readonly { amount: number; currency: string }[]) =>
    entries.map((entry) => moneyOf(entry.amount, entry.currency));
  return { available: amounts(balance.available), pending: amounts(balance.pending) };
}

/** One line of the processor's own book, for reconciliation. */
export interface Movement {
  movementId: string;
  kind: "payment" | "refund" | "dispute" | "dispute_reversal" | "transfer" | "other";
  gross: Money;
  fee: Money;
  net: Money;
  /** The charge, refund, dispute or transfer it comes from. */
  sourceId: string | null;
  createdAt: Date;
  availableOn: Date;
  isAvailable: boolean;
}

const KINDS: Readonly<Record<string, Movement["kind"]>> = {
  charge: "payment",
  refund: "refund",
  dispute: "dispute",
  dispute_reversal: "dispute_reversal",
  transfer: "transfer",
};

function movementOf(one: Stripe.BalanceTransaction): Movement {
  return {
    movementId: one.id,
    kind: KINDS[one.reporting_category] ?? "other",
    gross: moneyOf(one.amount, one.currency),
    fee: moneyOf(one.fee, one.currency),
    net: moneyOf(one.net, one.currency),
    sourceId: idOf(one.source),
    createdAt: new Date(one.created * 1000),
    availableOn: new Date(one.available_on * 1000),
    isAvailable: one.status === "available",
  };
}

/** Everything that moved from `since` (included) to `until` (not included), newest first. */
export async function listMovements(
  period: { since: Date; until: Date },
  client: PaymentsClient = paymentsClient(),
): Promise<Movement[]> {
  const created = {
    gte: Math.floor(period.since.getTime() / 1000),
    lt: Math.floor(period.until.getTime() / 1000),
  };
  return ask("reading the processor's book", async () => {
    const found: Movement[] = [];
    for await (const one of client.stripe.balanceTransactions.list({ created, limit: 100 }))
      found.push(movementOf(one));
    return found;
  });
}
