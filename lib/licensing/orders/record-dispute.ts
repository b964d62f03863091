import { z } from "zod";
import type { Tx } from "@/db/client";
import { NotFound, Precondition } from "@/lib/kernel/errors";
import { formatMoney, money } from "@/lib/kernel/money";
import { command } from "@/lib/kernel/verb";
import { postDispute, postDisputeWon } from "@/lib/ledger";
import type { StatusKind } from "../record/schema";
import { addLicenceStatus, statusHistory } from "../records/record-log";
import { linesOf, lockOrder, type OrderRow, orderById } from "./own-order";

const OfOrder = z.object({ orderId: z.string().max(40), disputeId: z.string().max(80) });
const UNDONE: readonly StatusKind[] = ["refunded", "payment reversed", "rescinded", "cancelled"];

async function markLicences(
  tx: Tx,
  order: OrderRow,
  line: { kind: StatusKind; words: string; onlyAfter?: StatusKind; now: Date },
): Promise<string[]> {
  const marked: string[] = [];
  for (const { licenceNumber: number } of await linesOf(tx, order.id)) {
    if (!number) continue;
    const last = (await statusHistory(tx, number)).at(-1);
    if (!last || UNDONE.includes(last.kind)) continue;
    if (line.onlyAfter && last.kind !== line.onlyAfter) continue;
    await addLicenceStatus(tx, { number, kind: line.kind, words: line.words, at: line.now, now: line.now });
    marked.push(number);
  }
  return marked;
}

async function paidOrder(tx: Tx, orderId: string): Promise<OrderRow> {
  const order = await orderById(tx, orderId);
  if (!order) throw new NotFound();
  if (order.state !== "licensed")
    throw new Precondition(
      "The licences of this order are not signed yet; the dispute is recorded when they are.",
    );
  return order;
}

/** The buyer's bank has taken a payment back: journal and licences say so. */
export const recordDispute = command({
  name: "licensing.recordDispute",
  who: ["system"],
  input: OfOrder.extend({ amountMinor: z.bigint(), feeMinor: z.bigint() }),
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: ({ tx, input }) => paidOrder(tx, input.orderId),
  run: async ({ tx, actor, input, subject: order, now }) => {
    await postDispute(tx, {
      orderId: order.id,
      disputeId: input.disputeId,
      amountMinor: input.amountMinor,
      chargeMinor: input.feeMinor,
      words: `The buyer's bank took back ${formatMoney(money(input.amountMinor, order.currency))} of order O-${order.number}.`,
      eventAt: now,
      now,
      actor,
    });
    const licences = await markLicences(tx, order, {
      kind: "payment disputed",
      words: "The payment is disputed at the buyer's bank.",
      now,
    });
    return { licences };
  },
  audit: ({ subject, input, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { disputeId: input.disputeId, licences: result.licences },
  }),
});

/** The dispute was decided. Won: the money is back; lost: the payment stays reversed and the licences end. */
export const closeDispute = command({
  name: "licensing.closeDispute",
  who: ["system"],
  input: OfOrder.extend({ won: z.boolean() }),
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: ({ tx, input }) => paidOrder(tx, input.orderId),
  run: async ({ tx, actor, input, subject: order, now }) => {
    if (input.won)
      await postDisputeWon(tx, {
        disputeId: input.disputeId,
        words: `The dispute about order O-${order.number} was decided for the seller.`,
        eventAt: now,
        now,
        actor,
      });
    const licences = await markLicences(tx, order, {
      onlyAfter: "payment disputed",
      now,
      ...(input.won
        ? { kind: "dispute withdrawn" as const, words: "The dispute has ended; the payment stands." }
        : {
            kind: "payment reversed" as const,
            words: "The payment was reversed for good; the licence ends here.",
          }),
    });
    return { licences };
  },
  audit: ({ subject, input, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { disputeId: input.disputeId, won: input.won, licences: result.licences },
  }),
});
