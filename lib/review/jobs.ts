import { defineHandlers } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { renderListening } from "./listening";
import { openCase } from "./open-case";

const actor = system("review");

export const reviewHandlers = defineHandlers({
  "review.openCase": {
    timeoutS: 60,
    handle: async ({ deliveryId, familyId }) => {
      await openCase(actor, { deliveryId, familyId });
    },
  },
  "review.renderListening": {
    heavy: true,
    timeoutS: 1800,
    handle: ({ hitId }, { progress }) => renderListening(hitId, progress),
  },
});
