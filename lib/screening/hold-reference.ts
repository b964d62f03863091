import { z } from "zod";
import { NotFound } from "@/lib/kernel/errors";
import { command } from "@/lib/kernel/verb";
import { lockHead, takeSequence, writeIndexLog } from "./fingerprints";
import { SUBJECT_KINDS } from "./states";

/**
 * Puts a reference that is not a delivered recording (a reported work, a registered loop) into the index, or takes it
 * out: it gets its number from the same head as every admission.
 */
export const changeReference = command({
  name: "screening.changeReference",
  who: ["system"],
  input: z.object({
    change: z.enum(["add", "remove"]),
    subjectKind: z.enum(SUBJECT_KINDS),
    subjectId: z.string(),
  }),
  guard: async ({ tx }) => void (await lockHead(tx)),
  authorise: async ({ tx, input }) => {
    if (input.subjectKind === "recording" && input.change === "add")
      throw new NotFound("A recording enters the index only by being screened.");
    return takeSequence(tx);
  },
  run: async ({ tx, input, subject, now }) => {
    await writeIndexLog(tx, { seq: subject, ...input, now });
    return { seq: subject };
  },
  audit: ({ input, result }) => ({ subject: input.subjectId, detail: { ...input, ...result } }),
});
