import { and, asc, eq } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { productions, shortlistItems } from "@/db/schema/productions";

/** For upper rooms, after they have decided who may see what. */
export async function productionById(reader: Reader, id: string) {
  const [row] = await reader.select().from(productions).where(eq(productions.id, id));
  return row ?? null;
}

export async function shortlistOf(reader: Reader, productionId: string) {
  return reader
    .select()
    .from(shortlistItems)
    .where(eq(shortlistItems.productionId, productionId))
    .orderBy(asc(shortlistItems.position));
}

/** The price of an item as licensing worked it out, with its date. Called inside one of licensing's own verbs. */
export async function keepPriceSnapshot(
  tx: Tx,
  args: { productionId: string; itemId: string; snapshot: Record<string, unknown> | null },
): Promise<void> {
  await tx
    .update(shortlistItems)
    .set({ priceSnapshot: args.snapshot })
    .where(and(eq(shortlistItems.id, args.itemId), eq(shortlistItems.productionId, args.productionId)));
}
