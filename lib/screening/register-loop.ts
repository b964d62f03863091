import { z } from "zod";
import { sharedLoops } from "@/db/schema/screening";
import { enqueue } from "@/lib/jobs";
import { Conflict } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { isDuplicateKey } from "@/lib/kernel/transaction";
import { command, open } from "@/lib/kernel/verb";

const RegisterLoop = z.object({
  code: z.string().regex(/^LP-\d{3}$/, "LP- and three digits"),
  title: z.string().trim().min(3).max(200),
  lengthS: z.number().positive().max(120),
  bpm: z.number().min(20).max(400).nullable(),
  condition: z.enum(["with other musical content", "not as principal element", "low information"]),
  conditionWords: z.string().trim().min(10).max(300),
  coverageMaxBps: z.int().min(0).max(10_000),
  fileKey: z.string(),
});

/** Registers shared material, so that it explains itself from then on. Its sound joins the index as a reference. */
export const registerLoop = command({
  name: "screening.registerLoop",
  who: ["moderator", "system"],
  input: RegisterLoop,
  authorise: open("any moderator may propose a loop from a decision; the register is for every library"),
  run: async ({ tx, input, actor, now }) => {
    const id = newId("lop");
    try {
      await tx.insert(sharedLoops).values({
        id,
        ...input,
        registeredBy: actor.kind === "system" ? "system" : actor.personId,
        createdAt: now,
      });
    } catch (error) {
      if (isDuplicateKey(error)) throw new Conflict(`${input.code} is registered already.`);
      throw error;
    }
    await enqueue(
      tx,
      "screening.fingerprintLoop",
      { loopId: id, fileKey: input.fileKey },
      { key: id, priority: 10 },
    );
    return { loopId: id };
  },
  audit: ({ input, result }) => ({
    subject: result.loopId,
    detail: { code: input.code, condition: input.condition },
  }),
});
