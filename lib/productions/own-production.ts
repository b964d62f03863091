import { eq, sql } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { productions, shortlistItems } from "@/db/schema/productions";
import type { ActorOf } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";

type Buyer = ActorOf<"buyer">;

/** PRODUCTIONS-1: a production belongs to one company; to everybody else it does not exist. */
export async function ownProduction(reader: Reader, actor: Buyer, productionId: string) {
  const [row] = await reader.select().from(productions).where(eq(productions.id, productionId));
  if (!row || row.companyId !== actor.companyId) throw new NotFound();
  return row;
}

/** For changes: locks the production and raises its version first, so that two changes never cross. */
export async function lockOwnProduction(tx: Tx, actor: Buyer, productionId: string) {
  const [row] = await tx.select().from(productions).where(eq(productions.id, productionId)).for("update");
  if (!row || row.companyId !== actor.companyId) throw new NotFound();
  await tx
    .update(productions)
    .set({ version: sql`${productions.version} + 1` })
    .where(eq(productions.id, productionId));
  return row;
}

export async function lockOwnItem(tx: Tx, actor: Buyer, itemId: string) {
  const [found] = await tx
    .select({ productionId: shortlistItems.productionId })
    .from(shortlistItems)
    .where(eq(shortlistItems.id, itemId));
  if (!found) throw new NotFound();
  const production = await lockOwnProduction(tx, actor, found.productionId);
  const [item] = await tx.select().from(shortlistItems).where(eq(shortlistItems.id, itemId)).for("update");
  if (!item) throw new NotFound();
  return { production, item };
}
