import { eq } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { deliveries, deliveryEvents } from "@/db/schema/deliveries";
import type { Actor, ActorOf } from "@/lib/kernel/actor";
import { NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";

export const DELIVERERS = ["composer", "owner", "staff"] as const;
export type Deliverer = ActorOf<(typeof DELIVERERS)[number]>;
export type DeliveryRow = typeof deliveries.$inferSelect;

/** A composer's own deliveries, or all of the library's for its owner and staff. Anything else does not exist for them. */
export function maySee(actor: Actor, delivery: DeliveryRow): boolean {
  if (actor.kind === "system") return true;
  if (actor.kind === "composer")
    return delivery.delivererId === actor.personId && delivery.libraryId === actor.libraryId;
  if (actor.kind === "owner" || actor.kind === "staff") return delivery.libraryId === actor.libraryId;
  return false;
}

export async function ownDelivery(reader: Reader, actor: Actor, deliveryId: string): Promise<DeliveryRow> {
  const [row] = await reader.select().from(deliveries).where(eq(deliveries.id, deliveryId));
  if (!row || !maySee(actor, row)) throw new NotFound();
  return row;
}

/** For changes: locks the delivery and raises its version first, so that two changes never cross. */
export async function lockOwnDelivery(tx: Tx, actor: Actor, deliveryId: string): Promise<DeliveryRow> {
  const [row] = await tx.select().from(deliveries).where(eq(deliveries.id, deliveryId)).for("update");
  if (!row || !maySee(actor, row)) throw new NotFound();
  await tx
    .update(deliveries)
    .set({ version: row.version + 1 })
    .where(eq(deliveries.id, deliveryId));
  return row;
}

/** Only who hands it in changes a draft; an owner may look at a composer's, and deliver for their own library. */
export function requireDraft(actor: Actor, delivery: DeliveryRow): void {
  if (actor.kind !== "system" && delivery.delivererId !== (actor as Deliverer).personId) throw new NotFound();
  if (delivery.state !== "draft")
    throw new Precondition(
      "This delivery has been signed. Replace a file, or write to the library, to change it.",
    );
}

export async function writeDeliveryEvent(
  tx: Tx,
  event: {
    deliveryId: string;
    versionId?: string;
    fromState?: string;
    toState?: string;
    words: string;
    personId?: string | null;
    codes?: string[];
    now: Date;
  },
): Promise<void> {
  await tx.insert(deliveryEvents).values({
    id: newId("eve"),
    deliveryId: event.deliveryId,
    versionId: event.versionId ?? null,
    happenedAt: event.now,
    fromState: event.fromState ?? null,
    toState: event.toState ?? null,
    words: event.words,
    personId: event.personId ?? null,
    codes: event.codes ?? [],
  });
}
