import { eq } from "drizzle-orm";
import { z } from "zod";
import { orders } from "@/db/schema/licensing";
import { companyById, peopleByIds } from "@/lib/accounts";
import { familiesByIds } from "@/lib/catalogue";
import type { Actor } from "@/lib/kernel/actor";
import { env } from "@/lib/kernel/env";
import { assert, Forbidden, Precondition } from "@/lib/kernel/errors";
import { money } from "@/lib/kernel/money";
import { command, query } from "@/lib/kernel/verb";
import { type CheckoutRequest, createCheckout, paymentKeys, readCheckout } from "@/lib/payments";
import { linesOf, lockOrder, orderNumber, ownOrder } from "./own-order";

const OrderId = z.object({ orderId: z.string().max(40) });

/** What the processor is asked to take: all of it follows from the order, so that a repeated call asks for the same. */
const readPayable = query({
  name: "licensing.readPayable",
  who: ["buyer"],
  input: OrderId,
  authorise: async ({ reader, actor, input }) => {
    const order = await ownOrder(reader, actor, input.orderId);
    if (!actor.mayApprove) throw new Forbidden("Your seat may propose; somebody who may approve pays.");
    return order;
  },
  run: async ({ reader, subject: order }) => {
    if (order.state !== "awaiting payment")
      throw new Precondition("This order is not waiting for a payment.");
    const lines = await linesOf(reader, order.id);
    const families = new Map(
      (
        await familiesByIds(
          reader,
          lines.map(({ familyId }) => familyId),
        )
      ).map((family) => [family.id, family]),
    );
    const payer = (await peopleByIds(reader, [order.approvedBy ?? order.placedBy])).get(
      order.approvedBy ?? order.placedBy,
    );
    const company = await companyById(reader, order.companyId);
    assert(payer && company, `the payer of ${order.id} is there`);
    const tax = money(order.taxMinor, order.currency);
    const request: Omit<CheckoutRequest, "idempotencyKey"> = {
      orderId: order.id,
      lines: [
        ...lines.map((line) => ({
          name: `Licence for “${families.get(line.familyId)?.title ?? "a cue"}”, order ${orderNumber(order)}`,
          amount: money(line.netMinor, order.currency),
        })),
        ...(tax.minor > 0n ? [{ name: order.taxWords, amount: tax }] : []),
      ],
      customerEmail: payer.email,
      successUrl: `${env.SITE_URL}/orders/${order.id}?paid=1`,
      cancelUrl: `${env.SITE_URL}/orders/${order.id}`,
    };
    return { request, attempt: order.checkoutAttempt, checkoutId: order.checkoutSession };
  },
});

/** Notes which checkout is the order's present one, before the processor is asked and after it has answered. */
const recordCheckout = command({
  name: "licensing.recordCheckout",
  who: ["buyer"],
  input: z.object({
    orderId: z.string().max(40),
    attempt: z.number().int().positive(),
    checkoutId: z.string().max(120).nullable(),
  }),
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: async ({ tx, actor, input }) => {
    const order = await ownOrder(tx, actor, input.orderId);
    if (!actor.mayApprove) throw new Forbidden("Your seat may propose; somebody who may approve pays.");
    return order;
  },
  run: async ({ tx, input, subject: order }) => {
    if (order.state !== "awaiting payment" || input.attempt < order.checkoutAttempt) return null;
    if (input.attempt === order.checkoutAttempt && order.checkoutSession !== null) return null;
    await tx
      .update(orders)
      .set({ checkoutAttempt: input.attempt, checkoutSession: input.checkoutId })
      .where(eq(orders.id, order.id));
    return null;
  },
  audit: ({ subject, input }) => ({
    subject: subject.id,
    detail: { attempt: input.attempt, checkoutId: input.checkoutId },
  }),
});

export type OpenedForPayment = { state: "open"; url: string } | { state: "paid" };

/**
 * The processor's page for an approved order. Outside any transaction: the order says which attempt it is at, the processor is
 * asked under a key made from order and attempt, and the answer is noted. Whatever is lost in between, a second call meets
 * the same checkout; a new one is begun only when the last has lapsed.
 */
export async function openCheckout(actor: Actor, input: { orderId: string }): Promise<OpenedForPayment> {
  const { request, attempt, checkoutId } = await readPayable(actor, input);
  if (checkoutId !== null) {
    const known = await readCheckout(checkoutId);
    if (known.state === "paid") return { state: "paid" };
    if (known.state === "open" && known.url) return { state: "open", url: known.url };
  }
  const present = checkoutId === null ? Math.max(attempt, 1) : attempt + 1;
  await recordCheckout(actor, { orderId: input.orderId, attempt: present, checkoutId: null });
  const opened = await createCheckout({
    ...request,
    idempotencyKey: paymentKeys.checkout(input.orderId, present),
  });
  await recordCheckout(actor, { orderId: input.orderId, attempt: present, checkoutId: opened.checkoutId });
  return { state: "open", url: opened.url };
}
