import { eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { orders } from "@/db/schema/licensing";
import { familyById, libraryById } from "@/lib/catalogue";
import { assert, Forbidden, Precondition } from "@/lib/kernel/errors";
import { blindHash } from "@/lib/kernel/field-crypto";
import { command } from "@/lib/kernel/verb";
import { saleObstacle } from "../cards/sale-guard";
import { cardAt } from "../cards/set-rate-card";
import { sha256Hex } from "../record/signing-key";
import { ApproveOrder } from "../schemas";
import { AUTHORITY_STATEMENT, OFFER_DAYS } from "../states";
import { TERMS_TEXT, TERMS_VERSION } from "../terms";
import { linesOf, lockOrder, type OrderLineRow, type OrderRow, ownOrder, storedPrice } from "./own-order";

const DAY_MS = 86_400_000;

/** LICENSING-2 for every line of an order as it stands; the first obstacle, in words, or null. */
export async function orderObstacle(
  reader: Reader,
  order: Pick<OrderRow, "libraryId" | "placedAt">,
  lines: readonly OrderLineRow[],
  at: Date,
): Promise<string | null> {
  const library = await libraryById(reader, order.libraryId);
  const card = await cardAt(reader, order.libraryId, order.placedAt);
  assert(library && card, `the library ${order.libraryId} and its card are there`);
  for (const line of lines) {
    const family = await familyById(reader, line.familyId);
    assert(family, `the family of line ${line.id} is there`);
    const use = storedPrice(line).inputs;
    const obstacle = await saleObstacle(reader, { family, library, card: card.card, use, at });
    if (obstacle) return `“${family.title}”: ${obstacle.sentence}`;
  }
  return null;
}

/** Somebody with authority accepts the terms for the company; what was accepted, by whom and when is kept. */
export const approveOrder = command({
  name: "licensing.approveOrder",
  who: ["buyer"],
  input: ApproveOrder,
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: async ({ tx, actor, input }) => {
    const order = await ownOrder(tx, actor, input.orderId);
    if (!actor.mayApprove)
      throw new Forbidden(
        "Your seat may propose. Somebody of your company who may approve has to accept and pay; the order waits for them.",
      );
    return order;
  },
  run: async ({ tx, actor, input, subject: order, now }) => {
    if (order.state !== "proposed")
      throw new Precondition("This order is not waiting for approval any more.");
    if (input.termsVersion !== TERMS_VERSION)
      throw new Precondition("The terms were renewed while you were reading. Please read them again.");
    if (now.getTime() - order.placedAt.getTime() > OFFER_DAYS * DAY_MS)
      throw new Precondition(
        `This price stood for ${OFFER_DAYS} days. Nothing was ordered; place the order again at today's price.`,
      );
    const obstacle = await orderObstacle(tx, order, await linesOf(tx, order.id), now);
    if (obstacle) throw new Precondition(`${obstacle} Nothing was paid.`);
    await tx
      .update(orders)
      .set({
        state: "awaiting payment",
        stateWords: `Approved by ${actor.name}; the payment is still to come.`,
        approvedBy: actor.personId,
        acceptance: {
          termsVersion: TERMS_VERSION,
          termsSha256: sha256Hex(TERMS_TEXT),
          authorityStatement: AUTHORITY_STATEMENT,
          acceptedAt: now.toISOString(),
          personId: actor.personId,
          name: actor.name,
          role: "approver",
          addressSha256: input.address ? blindHash(input.address, `acceptance:${order.id}`) : null,
        },
      })
      .where(eq(orders.id, order.id));
    return { orderId: order.id };
  },
  audit: ({ subject }) => ({ subject: subject.id, detail: { termsVersion: TERMS_VERSION } }),
});

/** Takes an order back before it is paid. A payment that comes all the same is refunded. */
export const withdrawOrder = command({
  name: "licensing.withdrawOrder",
  who: ["buyer"],
  input: z.object({ orderId: z.string().max(40) }),
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: ({ tx, actor, input }) => ownOrder(tx, actor, input.orderId),
  run: async ({ tx, actor, subject: order }) => {
    if (order.state !== "proposed" && order.state !== "awaiting payment")
      throw new Precondition("This order has been paid or closed already.");
    await tx
      .update(orders)
      .set({ state: "withdrawn", stateWords: `Withdrawn by ${actor.name}; nothing was licensed.` })
      .where(eq(orders.id, order.id));
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id }),
});
