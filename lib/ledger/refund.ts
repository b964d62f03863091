import { createHash } from "node:crypto";
import type { Tx } from "@/db/client";
import type { Actor } from "@/lib/kernel/actor";
import { NotFound, Precondition } from "@/lib/kernel/errors";
import { takeBackLegs } from "./legs";
import { lockSale } from "./line-standing";
import { findEntry, type PostedEntry, postEntry } from "./post-entry";
import { grossOf, takeBack } from "./split";

export interface RefundOfLines {
  orderId: string;
  orderLineIds: readonly string[];
  /** Why, as a sentence: statements print it. */
  words: string;
  /** The platform bears the processor's fee; nothing else is provided for. */
  processorFeeAbsorbed: true;
  /** The processor's id of the refund, where it is known. */
  refundId?: string | null;
  eventAt: Date;
  now: Date;
  actor: Actor;
}

/**
 * Takes back all that is left of some lines of an order, by the parts that were stored at capture. The same lines refunded
 * twice are the first refund; a line that has nothing left cannot be refunded with others.
 */
export async function postRefund(tx: Tx, refund: RefundOfLines): Promise<PostedEntry> {
  const wanted = [...new Set(refund.orderLineIds)].sort();
  const hash = createHash("sha256").update(wanted.join(" ")).digest("hex").slice(0, 24);
  const idempotencyKey = `refund:${refund.orderId}:${hash}`;
  const sale = await lockSale(tx, refund.orderId);
  const found = await findEntry(tx, idempotencyKey);
  if (found) return { entryId: found.id, isNew: false };

  const lines = wanted.map((orderLineId) => {
    const line = sale.lines.find((one) => one.orderLineId === orderLineId);
    if (!line) throw new NotFound(`Order line ${orderLineId} is not in the journal.`);
    if (grossOf(line) === 0n)
      throw new Precondition("This line was refunded or disputed already. Nothing was posted.");
    return line;
  });
  return postEntry(tx, {
    idempotencyKey,
    code: "refund",
    words: refund.words,
    currency: sale.currency,
    legs: lines.flatMap((line) => takeBackLegs(sale, takeBack(line, grossOf(line)).taken, line.stage)),
    lines: sale.refs,
    libraryId: sale.libraryId,
    orderId: sale.orderId,
    processorSource: refund.refundId ?? null,
    facts: { refundId: refund.refundId ?? null },
    eventAt: refund.eventAt,
    now: refund.now,
    actor: refund.actor,
  });
}
