import { z } from "zod";
import { enqueue } from "@/lib/jobs";
import { command, open } from "@/lib/kernel/verb";

/** Tells the room above that a reported recording is in the index, or that it cannot be compared. */
export const announceReported = command({
  name: "screening.announceReported",
  who: ["system"],
  input: z.object({ reportedWorkId: z.string(), comparable: z.boolean(), turn: z.int().min(0) }),
  authorise: open("only the screening worker fingerprints"),
  run: async ({ tx, input }) => {
    const { turn, ...heard } = input;
    await enqueue(tx, "reports.afterFingerprint", heard, { key: `${input.reportedWorkId}:${turn}` });
    return null;
  },
  audit: ({ input }) => ({ subject: input.reportedWorkId, detail: { comparable: input.comparable } }),
});
