import type { Money } from "@/lib/kernel/money";
import { amountOnWire, ask, moneyOf, type PaymentsClient, paymentsClient } from "./stripe";

export interface PayeeRequest {
  /** Our id of the person or library that is to be paid. */
  payeeId: string;
  /** ISO 3166-1, two letters. */
  country: string;
  email: string;
  idempotencyKey: string;
}

export interface Payee {
  accountId: string;
  isReady: boolean;
  /** What the processor still asks of the payee, in its own words. */
  wanted: string[];
  bankAccount: { id: string; last4: string; currency: string } | null;
}

/** Opens an account at the processor for one payee; the payee's bank data stay there. */
export async function createPayee(
  request: PayeeRequest,
  client: PaymentsClient = paymentsClient(),
): Promise<{ accountId: string }> {
  const account = await ask("opening a payee's account", () =>
    client.stripe.accounts.create(
      {
        country: request.country,
        email: request.email,
        controller: {
          fees: { payer: "application" },
          losses: { payments: "application" },
          requirement_collection: "stripe",
          stripe_dashboard: { type: "express" },
        },
        capabilities: { transfers: { requested: true } },
        metadata: { payeeId: request.payeeId },
      },
      { idempotencyKey: request.idempotencyKey },
    ),
  );
  return { accountId: account.id };
}

/** A short-lived address where the payee gives bank and identity to the processor. */
export async function onboardingLink(
  request: { accountId: string; returnUrl: string; refreshUrl: string },
  client: PaymentsClient = paymentsClient(),
): Promise<{ url: string; expiresAt: Date }> {
  const link = await ask("asking for an onboarding link", () =>
    client.stripe.accountLinks.create({
      account: request.accountId,
      type: "account_onboarding",
      return_url: request.returnUrl,
      refresh_url: request.refreshUrl,
    }),
  );
  return { url: link.url, expiresAt: new Date(link.expires_at * 1000) };
}

export async function readPayee(
  accountId: string,
  client: PaymentsClient = paymentsClient(),
): Promise<Payee> {
  const account = await ask("reading a payee", () => client.stripe.accounts.retrieve(accountId));
  const bank = account.external_accounts?.data.find((one) => one.object === "bank_account");
  return {
    accountId: account.id,
    isReady: account.capabilities?.transfers === "active" && account.payouts_enabled,
    wanted: account.requirements?.currently_due ?? [],
    bankAccount: bank ? { id: bank.id, last4: bank.last4, currency: bank.currency.toUpperCase() } : null,
  };
}

export interface TransferRequest {
  payoutId: string;
  accountId: string;
  amount: Money;
  idempotencyKey: string;
}

export interface Transfer {
  transferId: string;
  accountId: string;
  amount: Money;
  createdAt: Date;
}

/** Pays one payee from the available balance. */
export async function transfer(
  request: TransferRequest,
  client: PaymentsClient = paymentsClient(),
): Promise<Transfer> {
  const made = await ask("paying a payee", () =>
    client.stripe.transfers.create(
      {
        ...amountOnWire(request.amount),
        destination: request.accountId,
        transfer_group: request.payoutId,
        metadata: { payoutId: request.payoutId },
      },
      { idempotencyKey: request.idempotencyKey },
    ),
  );
  return {
    transferId: made.id,
    accountId: request.accountId,
    amount: moneyOf(made.amount, made.currency),
    createdAt: new Date(made.created * 1000),
  };
}
