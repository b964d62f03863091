import Stripe from "stripe";
import type { Environment } from "@/lib/kernel/env";
import { env } from "@/lib/kernel/env";
import { type Money, money } from "@/lib/kernel/money";
import { PaymentError, type PaymentErrorReason } from "./errors";

export type PaymentsConfig = Pick<
  Environment,
  "STRIPE_SECRET_KEY" | "STRIPE_WEBHOOK_SECRET" | "STRIPE_API_BASE"
>;

/** An open door to the processor; what is behind it stays in this room. */
export interface PaymentsClient {
  readonly stripe: Stripe;
  readonly webhookSecret: string;
}

function protocolOf(base: URL): "http" | "https" {
  return base.protocol === "http:" ? "http" : "https";
}

export function openPayments(config: PaymentsConfig): PaymentsClient {
  const base = config.STRIPE_API_BASE ? new URL(config.STRIPE_API_BASE) : undefined;
  const address = base ? { host: base.hostname, port: Number(base.port), protocol: protocolOf(base) } : {};
  const stripe = new Stripe(config.STRIPE_SECRET_KEY, {
    ...address,
    telemetry: false,
    maxNetworkRetries: 2,
    timeout: 15_000,
  });
  return { stripe, webhookSecret: config.STRIPE_WEBHOOK_SECRET };
}

let opened: PaymentsClient | undefined;

/** The door that the environment names. */
export function paymentsClient(): PaymentsClient {
  opened ??= openPayments(env);
  return opened;
}

export function moneyOf(amountMinor: number, currency: string): Money {
  return money(BigInt(amountMinor), currency.toUpperCase());
}

export function amountOnWire({ minor, currency }: Money): { amount: number; currency: string } {
  const amount = Number(minor);
  if (!Number.isSafeInteger(amount) || amount <= 0)
    throw new RangeError(`an amount to move must be a positive whole number, got ${minor}`);
  return { amount, currency: currency.toLowerCase() };
}

export function idOf(reference: string | { id: string } | null): string | null {
  return typeof reference === "string" ? reference : (reference?.id ?? null);
}

const REASONS: Readonly<Record<string, PaymentErrorReason>> = {
  resource_missing: "not_found",
  charge_already_refunded: "already_refunded",
  charge_disputed: "disputed",
  balance_insufficient: "insufficient_balance",
  insufficient_capabilities_for_transfer: "payee_not_ready",
  resource_not_open: "not_open",
};

function reasonOf(error: unknown): PaymentErrorReason {
  const { errors } = Stripe;
  if (error instanceof errors.StripeSignatureVerificationError) return "bad_signature";
  if (error instanceof errors.StripeIdempotencyError) return "key_reused";
  if (error instanceof errors.StripeCardError) return "declined";
  if (error instanceof errors.StripeInvalidRequestError) return REASONS[error.code ?? ""] ?? "refused";
  if (error instanceof errors.StripeConnectionError || error instanceof errors.StripeRateLimitError)
    return "unreachable";
  if (error instanceof errors.StripeAPIError) return "unreachable";
  return "refused";
}

/** Runs one call and gives its failure our name. */
export async function ask<T>(doing: string, call: () => Promise<T>): Promise<T> {
  try {
    return await call();
  } catch (error) {
    throw paymentErrorOf(doing, error);
  }
}

export function paymentErrorOf(doing: string, error: unknown): unknown {
  if (!(error instanceof Stripe.errors.StripeError)) return error;
  return new PaymentError(reasonOf(error), `${doing}: ${error.message}`, { cause: error });
}
