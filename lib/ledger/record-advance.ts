import { z } from "zod";
import { advances } from "@/db/schema/ledger";
import { holdsRole } from "@/lib/accounts";
import { NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";

/** Memo of an advance that a library paid a composer outside this service; it comes back from that composer's part only. */
export const recordAdvance = command({
  name: "ledger.recordAdvance",
  who: ["owner", "system"],
  input: z.object({
    libraryId: z.string().max(40),
    personId: z.string().max(40),
    amountMinor: z.bigint().positive("An advance is more than nothing."),
    currency: z.string().length(3),
    paidAt: z.date().optional(),
  }),
  authorise: async ({ tx, actor, input }) => {
    if (actor.kind === "owner" && actor.libraryId !== input.libraryId) throw new NotFound();
    if (!(await holdsRole(tx, input.personId, "composer", input.libraryId))) throw new NotFound();
    return null;
  },
  run: async ({ tx, input, now }) => {
    const id = newId("adv");
    const { libraryId, personId, amountMinor, currency } = input;
    await tx
      .insert(advances)
      .values({ id, libraryId, personId, amountMinor, currency, paidAt: input.paidAt ?? now });
    return { advanceId: id };
  },
  audit: ({ input, result }) => ({
    subject: result.advanceId,
    libraryId: input.libraryId,
    detail: { personId: input.personId, amountMinor: input.amountMinor.toString(), currency: input.currency },
  }),
});
