import { defineHandlers } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { renderListening } from "./listening";
import { openCase } from "./open-case";

const actor = system("review");

export const reviewHandlers = defineHandlers({
  "review.openCase": {
    timeoutS: 60,
    handle: async ({ deliveryId, familyId }, { jobId }) => {
      // Two cases opened at once count to the same number: the operation's id has the later one counted again.
      await openCase(actor, { deliveryId, familyId }, { operationId: `case:${jobId}` });
    },
  },
  "review.renderListening": {
    heavy: true,
    timeoutS: 1800,
    handle: ({ hitId }, { progress }) => renderListening(hitId, progress),
  },
});
