import { eq } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { noticeEvents, notices } from "@/db/schema/reports";
import { familyById, placeHold } from "@/lib/catalogue";
import type { ActorOf } from "@/lib/kernel/actor";
import { addDays, civilDateIn, endOfDay, sameDayOrLast } from "@/lib/kernel/calendar";
import { env } from "@/lib/kernel/env";
import { Forbidden, NotFound, Precondition } from "@/lib/kernel/errors";
import { openField } from "@/lib/kernel/field-crypto";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { addReported } from "./reported-works";
import { JudgeNotice } from "./schemas";

type Notice = typeof notices.$inferSelect;

/** REPORTS-3: a person judges completeness and plausibility; nothing is hidden or rejected by software. */
export const judgeNotice = command({
  name: "reports.judgeNotice",
  who: ["moderator"],
  input: JudgeNotice,
  authorise: ({ tx, actor, input }) => lockNotice(tx, actor, input.noticeId),
  run: async ({ tx, actor, input, subject: notice, now }) => {
    if (notice.state === "decided") throw new Precondition("This report has been decided.");
    if (input.decision === "ask for more") {
      await tx
        .update(notices)
        .set({ state: "incomplete", reasons: input.reasons })
        .where(eq(notices.id, notice.id));
      await say(tx, notice, { words: `More is needed: ${input.reasons}`, personId: actor.personId, now });
      await tell(tx, notice, {
        state: "To go on we need something more from you.",
        reasons: input.reasons,
        nextStep: "Please answer by a new report that names this number, or reply to this address.",
        now,
      });
      return { reportedWorkId: null };
    }
    const accepted = input.decision === "accept";
    const reportedWorkId = accepted
      ? await addReported(tx, { notice, level: input.level, addedBy: actor.personId, now })
      : null;
    if (accepted && input.holdTarget && notice.targetFamilyId) {
      const family = await familyById(tx, notice.targetFamilyId);
      if (family)
        await placeHold(tx, {
          familyId: family.id,
          cause: "reported work",
          causeId: reportedWorkId ?? notice.id,
          reason: "A rights question is open.",
          now,
        });
    }
    await tx
      .update(notices)
      .set({
        state: "decided",
        outcome: accepted ? input.level : "rejected",
        reasons: input.reasons,
        decidedBy: actor.personId,
        decidedAt: now,
        reportedWorkId,
      })
      .where(eq(notices.id, notice.id));
    const state = accepted
      ? input.holdTarget
        ? "We have stopped new sales of the cue while the question is open. Licences already issued are handled separately."
        : "Your work is on the list that every delivery is compared with."
      : "We have not removed anything.";
    await say(tx, notice, {
      words: `Decided: ${accepted ? "accepted" : "rejected"}.`,
      personId: actor.personId,
      now,
    });
    await tell(tx, notice, { state, reasons: input.reasons, complaint: true, now });
    return { reportedWorkId };
  },
  audit: ({ input, result }) => ({
    subject: input.noticeId,
    detail: { decision: input.decision, ...result },
  }),
});

/** A person begins to read a report; whoever sent it sees so by its number. */
export const takeNotice = command({
  name: "reports.takeNotice",
  who: ["moderator"],
  input: z.object({ noticeId: z.string() }),
  authorise: ({ tx, actor, input }) => lockNotice(tx, actor, input.noticeId),
  run: async ({ tx, actor, subject: notice, now }) => {
    if (notice.state !== "received") return null;
    await tx.update(notices).set({ state: "under review" }).where(eq(notices.id, notice.id));
    await say(tx, notice, { words: "A person is reading it.", personId: actor.personId, now });
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id }),
});

async function lockNotice(tx: Tx, actor: ActorOf<"moderator">, noticeId: string): Promise<Notice> {
  if (actor.libraryId !== null) throw new Forbidden("Reported works belong to the marketplace's moderators.");
  const [notice] = await tx.select().from(notices).where(eq(notices.id, noticeId)).for("update");
  if (!notice) throw new NotFound();
  await tx
    .update(notices)
    .set({ version: notice.version + 1 })
    .where(eq(notices.id, notice.id));
  return notice;
}

async function say(
  tx: Tx,
  notice: Notice,
  event: { words: string; personId: string; now: Date },
): Promise<void> {
  await tx.insert(noticeEvents).values({
    id: newId("eve"),
    noticeId: notice.id,
    words: event.words.slice(0, 500),
    visibleToReporter: true,
    personId: event.personId,
    at: event.now,
  });
}

async function tell(
  tx: Tx,
  notice: Notice,
  letter: { state: string; reasons: string; nextStep?: string; complaint?: boolean; now: Date },
): Promise<void> {
  const contact = JSON.parse(openField(notice.contact.toString(), `notice:${notice.id}`)) as {
    email: string;
  };
  const complaintUntil = endOfDay(
    addDays(sameDayOrLast(civilDateIn(letter.now, "Etc/UTC"), 6), 1),
    "Etc/UTC",
  );
  await enqueueMail(tx, {
    toAddress: contact.email,
    template: "report-status",
    subjectId: notice.id,
    props: {
      receiptNumber: notice.receiptNumber,
      workTitle: String(notice.claim.workTitle ?? "your work"),
      state: letter.state,
      reasons: letter.reasons,
      decidedAt: letter.now.toISOString(),
      ...(letter.nextStep ? { nextStep: letter.nextStep } : {}),
      ...(letter.complaint ? { complaintUntil: complaintUntil.toISOString() } : {}),
      url: `${env.SITE_URL}/report/${notice.receiptNumber}`,
      zone: "UTC",
    },
  });
}
