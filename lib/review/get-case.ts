import { and, asc, eq, isNull } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { caseMessages, confirmations, conflictsDeclared, findings } from "@/db/schema/review";
import { peopleByIds, peopleWithRole } from "@/lib/accounts";
import { familyById, recordingsOfFamily } from "@/lib/catalogue";
import { query } from "@/lib/kernel/verb";
import { certificateOf, notComparableSpans } from "@/lib/screening";
import { groupView } from "./case-group-view";
import { groupsOfCase } from "./case-hits";
import { explanationFacts, papersOf } from "./case-papers";
import { type CaseRow, type Moderator, ownCase } from "./own-case";

/**
 * One case as its moderator may see it. People are roles until the papers are opened. Of a recording of another library
 * only the overlapping seconds are drawn, and a confidential holding has no title, writer or sound.
 */
export const getCase = query({
  name: "review.getCase",
  who: ["moderator"],
  input: z.object({ caseId: z.string() }),
  authorise: async ({ reader, actor, input }) => ownCase(reader, actor, input.caseId),
  run: async ({ reader, actor, subject: row }) => {
    const family = await familyById(reader, row.familyId);
    const groups = await groupsOfCase(reader, row.id);
    const conflicts = await reader
      .select()
      .from(conflictsDeclared)
      .where(eq(conflictsDeclared.caseId, row.id));
    const given = await findingsOfCase(reader, row.id);
    const names = await peopleByIds(
      reader,
      [
        row.holderId,
        ...given.flatMap(({ finding, second }) => [finding.deciderId, second?.confirmerId]),
      ].filter((id) => typeof id === "string"),
    );
    const colleagues = await peopleWithRole(reader, "moderator", row.libraryId);
    return {
      id: row.id,
      number: row.number,
      state: row.state,
      dueAt: row.dueAt,
      openedAt: row.openedAt,
      closedAt: row.closedAt,
      holder: row.holderId
        ? { name: names.get(row.holderId)?.name ?? "", isYou: row.holderId === actor.personId }
        : null,
      youDeclaredConflict: conflicts.some((conflict) => conflict.personId === actor.personId),
      forMarketplace: row.libraryId === null,
      title: family?.title ?? "",
      colleagues: colleagues
        .filter((person) => person.id !== actor.personId)
        .map((person) => ({ id: person.id, name: person.name })),
      recordings: await recordingsView(reader, row.familyId),
      groups: await Promise.all(groups.map((group) => groupView(reader, actor, group))),
      explanations: await explanationFacts(reader, row),
      papers: row.papersOpenedAt ? await papersOf(reader, actor, row, groups) : null,
      messages: await messagesFor(reader, actor, row),
      findings: given.map((entry) => findingView(entry, actor, (id) => names.get(id)?.name ?? "")),
    };
  },
});

export type CaseView = Awaited<ReturnType<typeof getCase>>;
export type CaseGroupView = CaseView["groups"][number];

interface Given {
  finding: typeof findings.$inferSelect;
  second: typeof confirmations.$inferSelect | null;
}

/** Findings in force, oldest first, each with its second person's answer. */
async function findingsOfCase(reader: Reader, caseId: string): Promise<Given[]> {
  return reader
    .select({ finding: findings, second: confirmations })
    .from(findings)
    .leftJoin(confirmations, eq(confirmations.findingId, findings.id))
    .where(and(eq(findings.caseId, caseId), isNull(findings.supersededBy)))
    .orderBy(asc(findings.decidedAt));
}

function findingView({ finding, second }: Given, actor: Moderator, nameOf: (personId: string) => string) {
  return {
    id: finding.id,
    groupId: finding.groupId,
    outcome: finding.outcome,
    explainedBy: finding.explainedBy,
    codes: finding.codes,
    reasons: finding.reasons,
    notDecided: finding.notDecided,
    knowing: finding.knowing,
    knowingBecause: finding.knowingBecause,
    decidedAt: finding.decidedAt,
    deciderName: nameOf(finding.deciderId),
    isYours: finding.deciderId === actor.personId,
    needsSecond: finding.needsSecond,
    second: second
      ? {
          confirmed: second.confirmed,
          words: second.words,
          at: second.at,
          name: nameOf(second.confirmerId),
        }
      : null,
  };
}

async function recordingsView(reader: Reader, familyId: string) {
  const recordings = await recordingsOfFamily(reader, familyId);
  return Promise.all(
    recordings.map(async (recording) => ({
      id: recording.id,
      versionRole: recording.versionRole,
      durationS: recording.durationS,
      ending: recording.ending,
      contour: recording.contour ? recording.contour.toString("base64") : null,
      notComparable: (await notComparableSpans(reader, recording.id))?.notComparable ?? [],
      certificate: (await certificateOf(reader, recording.id))?.body ?? null,
    })),
  );
}

/** Questions and answers are everybody's; a note is its author's and the holder's. */
async function messagesFor(reader: Reader, actor: Moderator, row: CaseRow) {
  const messages = await reader
    .select()
    .from(caseMessages)
    .where(eq(caseMessages.caseId, row.id))
    .orderBy(asc(caseMessages.at));
  return messages
    .filter(
      (message) =>
        message.kind !== "note" || message.authorId === actor.personId || row.holderId === actor.personId,
    )
    .map((message) => ({
      id: message.id,
      kind: message.kind,
      words: message.words,
      at: message.at,
      answerUntil: message.answerUntil,
      hasFile: message.fileKey !== null,
    }));
}
