import { eq } from "drizzle-orm";
import { z } from "zod";
import { caseMessages, cases, conflictsDeclared, disclosures } from "@/db/schema/review";
import { peopleWithRole } from "@/lib/accounts";
import { Invalid, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { lockCase, requireNoConflict } from "./own-case";

/** REVIEW-1: a case has one holder at a time. */
export const takeCase = command({
  name: "review.takeCase",
  who: ["moderator"],
  input: z.object({ caseId: z.string() }),
  authorise: async ({ tx, actor, input }) => {
    const row = await lockCase(tx, actor, input.caseId);
    await requireNoConflict(tx, actor, row.id);
    return row;
  },
  run: async ({ tx, actor, subject }) => {
    if (subject.state === "closed") throw new Precondition("This case is closed.");
    if (subject.holderId && subject.holderId !== actor.personId)
      throw new Precondition("A colleague holds this case. They can hand it over.");
    await tx.update(cases).set({ holderId: actor.personId }).where(eq(cases.id, subject.id));
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.deliveringLibraryId }),
});

export const handOver = command({
  name: "review.handOver",
  who: ["moderator"],
  input: z.object({
    caseId: z.string(),
    toPersonId: z.string().nullable(),
    words: z.string().trim().min(5, "A line for the colleague who takes it.").max(1000),
  }),
  authorise: async ({ tx, actor, input }) => lockCase(tx, actor, input.caseId),
  run: async ({ tx, actor, input, subject, now }) => {
    if (subject.holderId !== actor.personId) throw new Precondition("Only who holds a case hands it over.");
    const colleagues = await peopleWithRole(tx, "moderator", subject.libraryId);
    if (input.toPersonId && !colleagues.some((person) => person.id === input.toPersonId))
      throw new Invalid("That person is not a moderator of this case.", {
        toPersonId: "not a moderator here",
      });
    await tx.update(cases).set({ holderId: input.toPersonId }).where(eq(cases.id, subject.id));
    await tx.insert(caseMessages).values({
      id: newId("msg"),
      caseId: subject.id,
      kind: "note",
      authorId: actor.personId,
      words: input.words,
      passageIds: [],
      at: now,
    });
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.deliveringLibraryId }),
});

/** A conflict is declared in words and stands; the case goes back to the queue. */
export const declareConflict = command({
  name: "review.declareConflict",
  who: ["moderator"],
  input: z.object({
    caseId: z.string(),
    words: z.string().trim().min(5, "In a few words: what the conflict is.").max(500),
  }),
  authorise: async ({ tx, actor, input }) => lockCase(tx, actor, input.caseId),
  run: async ({ tx, actor, input, subject, now }) => {
    await tx
      .insert(conflictsDeclared)
      .values({ id: newId("con"), caseId: subject.id, personId: actor.personId, words: input.words, at: now })
      .onDuplicateKeyUpdate({ set: { words: input.words } });
    if (subject.holderId === actor.personId)
      await tx.update(cases).set({ holderId: null }).where(eq(cases.id, subject.id));
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.deliveringLibraryId }),
});

/** REVIEW-2: people are roles until the papers are opened; opening them is logged. */
export const openPapers = command({
  name: "review.openPapers",
  who: ["moderator"],
  input: z.object({ caseId: z.string() }),
  authorise: async ({ tx, actor, input }) => {
    const row = await lockCase(tx, actor, input.caseId);
    await requireNoConflict(tx, actor, row.id);
    return row;
  },
  run: async ({ tx, actor, subject, now }) => {
    if (!subject.papersOpenedAt)
      await tx.update(cases).set({ papersOpenedAt: now }).where(eq(cases.id, subject.id));
    await tx.insert(disclosures).values({
      id: newId("dis"),
      caseId: subject.id,
      personId: actor.personId,
      kind: "papers",
      subjectId: subject.familyId,
      libraryId: subject.deliveringLibraryId,
      at: now,
    });
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.deliveringLibraryId }),
});
