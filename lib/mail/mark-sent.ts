import { eq } from "drizzle-orm";
import { z } from "zod";
import { mailOutbox } from "@/db/schema/infrastructure";
import { systemNow } from "@/lib/kernel/clock";
import { NotFound } from "@/lib/kernel/errors";
import { command, query } from "@/lib/kernel/verb";

export const readMail = query({
  name: "mail.readMail",
  who: ["system"],
  input: z.object({ mailId: z.string() }),
  authorise: async ({ reader, input }) => {
    const [row] = await reader.select().from(mailOutbox).where(eq(mailOutbox.id, input.mailId));
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ subject }) => subject,
});

export const markMailSent = command({
  name: "mail.markMailSent",
  who: ["system"],
  input: z.object({ mailId: z.string(), providerId: z.string() }),
  authorise: async ({ tx, input }) => {
    const [row] = await tx
      .select({ id: mailOutbox.id })
      .from(mailOutbox)
      .where(eq(mailOutbox.id, input.mailId))
      .for("update");
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ tx, input }) => {
    await tx
      .update(mailOutbox)
      .set({ state: "sent", providerId: input.providerId, sentAt: systemNow() })
      .where(eq(mailOutbox.id, input.mailId));
    return null;
  },
  audit: ({ input }) => ({ subject: input.mailId }),
});
