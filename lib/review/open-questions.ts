import { and, desc, eq } from "drizzle-orm";
import { z } from "zod";
import { caseMessages, cases } from "@/db/schema/review";
import { deliveryOfFamily } from "@/lib/deliveries";
import { open, query } from "@/lib/kernel/verb";

/** Questions that wait for this person's answer: by delivery, with the time until which it is waited for. */
export const listOpenQuestions = query({
  name: "review.listOpenQuestions",
  who: ["composer", "owner", "staff"],
  input: z.object({}),
  authorise: open("only cases about the actor's own deliveries are answered"),
  run: async ({ reader, actor }) => {
    const waiting = await reader.select().from(cases).where(eq(cases.state, "waiting on composer"));
    const own: { deliveryId: string; answerUntil: Date | null }[] = [];
    for (const row of waiting) {
      const delivery = await deliveryOfFamily(reader, row.familyId, row.deliveryId);
      if (delivery?.delivererId !== actor.personId || delivery.libraryId !== actor.libraryId) continue;
      const [question] = await reader
        .select({ answerUntil: caseMessages.answerUntil })
        .from(caseMessages)
        .where(and(eq(caseMessages.caseId, row.id), eq(caseMessages.kind, "question")))
        .orderBy(desc(caseMessages.at))
        .limit(1);
      own.push({ deliveryId: row.deliveryId, answerUntil: question?.answerUntil ?? null });
    }
    return own;
  },
});
