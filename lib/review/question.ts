import { and, desc, eq } from "drizzle-orm";
import { z } from "zod";
import { caseMessages, cases } from "@/db/schema/review";
import { peopleByIds } from "@/lib/accounts";
import { familyById } from "@/lib/catalogue";
import { deliveryOfFamily, paperOfDelivery } from "@/lib/deliveries";
import { addBusinessDays, addDays, civilDateIn, endOfDay } from "@/lib/kernel/calendar";
import { env } from "@/lib/kernel/env";
import { Invalid, NotFound, Precondition } from "@/lib/kernel/errors";
import { UK_HOLIDAYS } from "@/lib/kernel/holidays";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { hitsByIds } from "@/lib/screening";
import { caseHitIds } from "./case-hits";
import { lockCase, requireNoConflict } from "./own-case";
import { ANSWER_DAYS, DECISION_WORKING_DAYS } from "./states";

/** One specific question with the places it is about and a deadline in the deliverer's own zone. Nothing is decided by it. */
export const askComposer = command({
  name: "review.askComposer",
  who: ["moderator"],
  input: z.object({
    caseId: z.string(),
    words: z.string().trim().min(20, "Ask one specific thing, in a sentence or two.").max(2000),
  }),
  authorise: async ({ tx, actor, input }) => {
    const row = await lockCase(tx, actor, input.caseId);
    await requireNoConflict(tx, actor, row.id);
    return row;
  },
  run: async ({ tx, actor, input, subject, now }) => {
    if (subject.state !== "open")
      throw new Precondition(
        "A question can be asked while the case is open and nobody is being waited for.",
      );
    const delivery = await deliveryOfFamily(tx, subject.familyId, subject.deliveryId);
    const family = await familyById(tx, subject.familyId);
    const person = delivery
      ? (await peopleByIds(tx, [delivery.delivererId])).get(delivery.delivererId)
      : undefined;
    if (!family || !person) throw new NotFound();
    const answerUntil = endOfDay(addDays(civilDateIn(now, person.timeZone), ANSWER_DAYS), person.timeZone);
    const hits = await hitsByIds(tx, await caseHitIds(tx, subject.id));
    const passages = hits.flatMap((hit) => hit.passages);
    await tx.insert(caseMessages).values({
      id: newId("msg"),
      caseId: subject.id,
      kind: "question",
      authorId: actor.personId,
      words: input.words,
      passageIds: passages.map((passage) => passage.id),
      answerUntil,
      at: now,
    });
    await tx
      .update(cases)
      .set({ state: "waiting on composer", holderId: subject.holderId ?? actor.personId })
      .where(eq(cases.id, subject.id));
    await enqueueMail(tx, {
      toAddress: person.email,
      personId: person.id,
      template: "question-from-moderator",
      subjectId: subject.id,
      props: {
        title: family.title,
        passages: passages
          .slice(0, 12)
          .map((passage) => ({ from: clock(passage.startS), to: clock(passage.endS) })),
        question: input.words,
        answerBy: answerUntil.toISOString(),
        url: `${env.SITE_URL}/deliveries/${subject.deliveryId}`,
        zone: person.timeZone,
      },
    });
    return { answerUntil };
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.deliveringLibraryId }),
});

const clock = (seconds: number) =>
  `${Math.floor(seconds / 60)}:${String(Math.floor(seconds % 60)).padStart(2, "0")}`;

/** The deliverer answers, with a paper if there is one. The case goes back to its moderator. */
export const answerQuestion = command({
  name: "review.answerQuestion",
  who: ["composer", "owner", "staff"],
  input: z.object({
    deliveryId: z.string(),
    words: z.string().trim().min(5, "A sentence that answers the question.").max(4000),
    fileKey: z.string().max(120).nullable(),
  }),
  authorise: async ({ tx, actor, input }) => {
    const [row] = await tx
      .select()
      .from(cases)
      .where(and(eq(cases.deliveryId, input.deliveryId), eq(cases.state, "waiting on composer")))
      .orderBy(desc(cases.openedAt))
      .limit(1)
      .for("update");
    const delivery = row ? await deliveryOfFamily(tx, row.familyId, row.deliveryId) : null;
    if (!row || delivery?.delivererId !== actor.personId)
      throw new NotFound("No question about this delivery is open.");
    await tx
      .update(cases)
      .set({ version: row.version + 1 })
      .where(eq(cases.id, row.id));
    return row;
  },
  run: async ({ tx, actor, input, subject, now }) => {
    if (input.fileKey && !(await paperOfDelivery(tx, input.deliveryId, input.fileKey)))
      throw new Invalid("That file is not among this delivery's papers; please send it again.", {
        fileKey: "not among the papers",
      });
    await tx.insert(caseMessages).values({
      id: newId("msg"),
      caseId: subject.id,
      kind: "answer",
      authorId: actor.personId,
      words: input.words,
      passageIds: [],
      fileKey: input.fileKey,
      at: now,
    });
    await tx.update(cases).set({ state: "open" }).where(eq(cases.id, subject.id));
    const person = (await peopleByIds(tx, [actor.personId])).get(actor.personId);
    const family = await familyById(tx, subject.familyId);
    if (person && family) {
      const decisionBy = endOfDay(
        addBusinessDays(civilDateIn(now, "Europe/London"), DECISION_WORKING_DAYS, UK_HOLIDAYS),
        "Europe/London",
      );
      await enqueueMail(tx, {
        toAddress: person.email,
        personId: person.id,
        template: "answer-received",
        subjectId: subject.id,
        props: {
          title: family.title,
          receivedAt: now.toISOString(),
          papersCount: input.fileKey ? 1 : 0,
          decisionBy: decisionBy.toISOString(),
          url: `${env.SITE_URL}/deliveries/${subject.deliveryId}`,
          zone: person.timeZone,
        },
      });
    }
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.deliveringLibraryId }),
});
