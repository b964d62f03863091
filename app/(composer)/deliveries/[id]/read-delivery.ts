import type { DeliveryPage } from "@/components/deliveries/wire";
import { getDelivery } from "@/lib/deliveries";
import type { Actor } from "@/lib/kernel/actor";
import { Expected } from "@/lib/kernel/errors";
import { getCaseOfDelivery } from "@/lib/review";

/** One delivery as it travels to the browser. Contours that the browser has already are left out. */
export async function readDelivery(
  actor: Actor,
  deliveryId: string,
  have: readonly string[] = [],
): Promise<DeliveryPage> {
  const delivery = await getDelivery(actor, { deliveryId });
  const versions = delivery.versions.map((version) =>
    have.includes(version.id) ? { ...version, contour: null } : version,
  );
  const answer = { delivery: { ...delivery, versions }, caseOf: await caseOf(actor, deliveryId) };
  return JSON.parse(JSON.stringify(answer)) as DeliveryPage;
}

/** A co-writer sees the delivery, but a case is between its deliverer and the moderators. */
async function caseOf(actor: Actor, deliveryId: string) {
  if (actor.kind !== "composer" && actor.kind !== "owner" && actor.kind !== "staff") return null;
  try {
    return await getCaseOfDelivery(actor, { deliveryId });
  } catch (error) {
    if (error instanceof Expected && error.code === "not_found") return null;
    throw error;
  }
}
