import { defineHandlers } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { afterScreening } from "./after-screening";
import { measureVersion } from "./measuring/measure-version";
import { findUnanswered, remindWriters } from "./remind-writers";
import { tryListing } from "./try-listing";

const actor = system("deliveries");

export const deliveriesHandlers = defineHandlers({
  "delivery.measure": {
    heavy: true,
    timeoutS: 3700,
    handle: ({ versionId }, { progress, isLast }) => measureVersion(versionId, progress, isLast),
  },
  "delivery.afterScreening": {
    timeoutS: 60,
    handle: async ({ recordingId, runId }) => {
      await afterScreening(actor, { recordingId }, { operationId: `screened:${runId}` });
    },
  },
  "delivery.remindWriters": {
    timeoutS: 300,
    handle: async ({ slot }) => {
      for (const deliveryId of await findUnanswered(actor, {}))
        await remindWriters(actor, { deliveryId }, { operationId: `remind:${slot}:${deliveryId}` });
    },
  },
  "delivery.tryListing": {
    timeoutS: 60,
    handle: async ({ deliveryId }) => {
      await tryListing(actor, { deliveryId });
    },
  },
});
