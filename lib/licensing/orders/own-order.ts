import { asc, eq, sql } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { orderLines, orders } from "@/db/schema/licensing";
import type { ActorOf } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import type { PriceFactor } from "../price";
import type { Use } from "../rate-card";

export type OrderRow = typeof orders.$inferSelect;
export type OrderLineRow = typeof orderLines.$inferSelect;

/** What the order keeps of its price: inputs, factors, card and result, so that nothing is priced again. */
export interface StoredPrice {
  totalMinor: string;
  currency: string;
  sentence: string;
  factors: PriceFactor[];
  minimumApplied: boolean;
  cardVersion: string;
  inputs: Use;
}

export interface StoredLicensee {
  name: string;
  endClient: string | null;
  address: string;
  countryCode: string;
  taxNumber: string | null;
}

export interface StoredAcceptance {
  termsVersion: string;
  termsSha256: string;
  authorityStatement: string;
  acceptedAt: string;
  personId: string;
  name: string;
  role: string;
  addressSha256: string | null;
}

export const storedPrice = (line: OrderLineRow): StoredPrice => line.price as unknown as StoredPrice;
export const storedLicensee = (order: OrderRow): StoredLicensee =>
  order.licensee as unknown as StoredLicensee;
export const storedAcceptance = (order: OrderRow): StoredAcceptance | null =>
  order.acceptance as unknown as StoredAcceptance | null;

/** "O-1041" */
export const orderNumber = (order: Pick<OrderRow, "number">): string => `O-${order.number}`;

/** The guard of every change to an order: its row is locked and its version raised before anything is read. */
export async function lockOrder(tx: Tx, orderId: string): Promise<void> {
  await tx.select({ id: orders.id }).from(orders).where(eq(orders.id, orderId)).for("update");
  await tx
    .update(orders)
    .set({ version: sql`${orders.version} + 1` })
    .where(eq(orders.id, orderId));
}

export async function orderById(reader: Reader, orderId: string): Promise<OrderRow | null> {
  const [row] = await reader.select().from(orders).where(eq(orders.id, orderId));
  return row ?? null;
}

/** LICENSING-3: an order belongs to one company; to every other buyer it does not exist. */
export async function ownOrder(reader: Reader, actor: ActorOf<"buyer">, orderId: string): Promise<OrderRow> {
  const order = await orderById(reader, orderId);
  if (order?.companyId !== actor.companyId) throw new NotFound();
  return order;
}

export async function linesOf(reader: Reader, orderId: string): Promise<OrderLineRow[]> {
  return reader
    .select()
    .from(orderLines)
    .where(eq(orderLines.orderId, orderId))
    .orderBy(asc(orderLines.number));
}
