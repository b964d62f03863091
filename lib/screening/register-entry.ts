import { z } from "zod";
import { registerEntries } from "@/db/schema/screening";
import { newId } from "@/lib/kernel/ids";
import { command, open } from "@/lib/kernel/verb";

const RegisterEntry = z.object({
  kind: z.enum(["public domain", "other title"]),
  code: z.string().max(10).nullable(),
  title: z.string().trim().min(2).max(200),
  familyIds: z.array(z.string()).max(20),
  personId: z.string().nullable(),
  libraryId: z.string().nullable(),
  words: z.string().trim().min(10).max(500),
});

/** Keeps an old tune or another title on the register, with the words that explain it. */
export const registerEntry = command({
  name: "screening.registerEntry",
  who: ["moderator", "system"],
  input: RegisterEntry,
  authorise: open("any moderator may keep the registers"),
  run: async ({ tx, input, now }) => {
    const id = newId("reg");
    await tx.insert(registerEntries).values({ id, ...input, createdAt: now });
    return { entryId: id };
  },
  audit: ({ input, result }) => ({
    subject: result.entryId,
    detail: { kind: input.kind, title: input.title },
  }),
});
