import type { Tx } from "@/db/client";
import type { Actor } from "@/lib/kernel/actor";
import { type AccountRef, CLEARING, type Leg } from "./legs";
import { type PostedEntry, postEntry } from "./post-entry";

const one = (kind: AccountRef["kind"]): AccountRef => ({ kind, holderId: "-" });
const TO_SEND = one("refunds to send");

export interface RefusedPayment {
  orderId: string;
  paymentId: string;
  currency: string;
  grossMinor: bigint;
  /** What the processor really took; it stays with the platform. */
  feeMinor: bigint;
  chargeId: string;
  words: string;
  eventAt: Date;
  now: Date;
  actor: Actor;
}

const leg = (debit: AccountRef, credit: AccountRef, amountMinor: bigint): Leg[] =>
  amountMinor > 0n ? [{ debit, credit, amountMinor, orderLineId: null, shareBps: null }] : [];

/**
 * A payment came for which no licence was given: it is the buyer's, and waits to be sent back. It is in no library's books,
 * and the processor's fee for it is the platform's cost.
 */
export async function postRefusedPayment(tx: Tx, refused: RefusedPayment): Promise<PostedEntry> {
  const { orderId, paymentId, currency, grossMinor, feeMinor, chargeId, words, eventAt, now, actor } =
    refused;
  return postEntry(tx, {
    idempotencyKey: `refused:${paymentId}`,
    code: "payment refused",
    words: words.slice(0, 300),
    currency,
    legs: [...leg(CLEARING, TO_SEND, grossMinor), ...leg(one("processor fee cost"), CLEARING, feeMinor)],
    orderId,
    processorSource: chargeId,
    facts: { paymentId },
    eventAt,
    now,
    actor,
  });
}

/** That payment has gone back in full. */
export async function postReturnedPayment(
  tx: Tx,
  returned: Pick<
    RefusedPayment,
    "orderId" | "paymentId" | "currency" | "grossMinor" | "eventAt" | "now" | "actor"
  > & {
    refundId: string | null;
  },
): Promise<PostedEntry> {
  const { orderId, paymentId, currency, grossMinor, refundId, eventAt, now, actor } = returned;
  return postEntry(tx, {
    idempotencyKey: `refused:${paymentId}:returned`,
    code: "payment returned",
    words: "A payment for which no licence was given went back to the buyer in full.",
    currency,
    legs: leg(TO_SEND, CLEARING, grossMinor),
    orderId,
    processorSource: refundId,
    facts: { paymentId, refundId },
    eventAt,
    now,
    actor,
  });
}
