import { defineHandlers } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { recordFingerprinted } from "./reported-works";

const actor = system("reports.afterFingerprint");

export const reportsHandlers = defineHandlers({
  "reports.afterFingerprint": {
    timeoutS: 60,
    handle: async ({ reportedWorkId, comparable }) => {
      await recordFingerprinted(actor, { reportedWorkId, comparable });
    },
  },
});
