"use client";

import { AffairsDesk } from "./affairs-desk";
import { DraftDesk } from "./draft-desk";
import { useDelivery } from "./use-delivery";
import type { DeliveryPage } from "./wire";

/** One delivery: the form while it is a draft of this person's, the state of affairs once it is signed. */
export function DeliveryDesk({ first, zone, now }: { first: DeliveryPage; zone: string; now: number }) {
  const { data: page } = useDelivery(first);
  const { delivery } = page;
  if (delivery.state === "draft" && delivery.isDeliverer) return <DraftDesk delivery={delivery} />;
  return <AffairsDesk now={now} page={page} zone={zone} />;
}
