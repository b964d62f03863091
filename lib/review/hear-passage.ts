import { eq } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { alignedListenings, caseGroups, cases, disclosures } from "@/db/schema/review";
import { familyById } from "@/lib/catalogue";
import { NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { hitsByIds } from "@/lib/screening";
import { lockCase, type Moderator, requireNoConflict } from "./own-case";

/** REVIEW-5: hearing another side is a disclosure, and logged. Returns where the file is; the route streams it. */
export const hearPassage = command({
  name: "review.hearPassage",
  who: ["moderator"],
  input: z.object({ passageId: z.string() }),
  authorise: async ({ tx, actor, input }) => {
    const [listening] = await tx
      .select()
      .from(alignedListenings)
      .where(eq(alignedListenings.passageId, input.passageId));
    const [group] = listening
      ? (
          await tx
            .select({ caseId: caseGroups.caseId, hitIds: caseGroups.hitIds })
            .from(caseGroups)
            .innerJoin(cases, eq(cases.id, caseGroups.caseId))
        ).filter((row) => row.hitIds.includes(listening.hitId))
      : [];
    if (!listening?.fileKey || !group) throw new NotFound();
    const row = await lockCase(tx, actor, group.caseId);
    await requireNoConflict(tx, actor, row.id);
    if (!(await mayHearReference(tx, actor, listening.hitId))) throw new NotFound();
    return { listening, row };
  },
  run: async ({ tx, actor, input, subject, now }) => {
    await tx.insert(disclosures).values({
      id: newId("dis"),
      caseId: subject.row.id,
      personId: actor.personId,
      kind: "hearing",
      subjectId: input.passageId,
      libraryId: subject.row.deliveringLibraryId,
      at: now,
    });
    return { fileKey: subject.listening.fileKey };
  },
  audit: ({ subject, input }) => ({
    subject: subject.row.id,
    libraryId: subject.row.deliveringLibraryId,
    detail: { passageId: input.passageId },
  }),
});

/** REVIEW-5: a library's moderator hears its own recordings, and of another library only what is listed. */
async function mayHearReference(tx: Tx, actor: Moderator, hitId: string): Promise<boolean> {
  if (actor.libraryId === null) return true;
  const [hit] = await hitsByIds(tx, [hitId]);
  const family = hit?.referenceFamilyId ? await familyById(tx, hit.referenceFamilyId) : null;
  return family !== null && (family.libraryId === actor.libraryId || family.state === "listed");
}
