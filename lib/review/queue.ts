import { and, asc, desc, eq, inArray, isNull, ne, or } from "drizzle-orm";
import { z } from "zod";
import { caseGroups, cases, findings } from "@/db/schema/review";
import { peopleByIds } from "@/lib/accounts";
import { familiesByIds } from "@/lib/catalogue";
import { open, query } from "@/lib/kernel/verb";

export interface QueueRow {
  id: string;
  number: number;
  title: string;
  state: string;
  dueAt: Date;
  openedAt: Date;
  closedAt: Date | null;
  holderName: string | null;
  isYours: boolean;
  relations: string[];
  groups: number;
  outcome: string | null;
  forMarketplace: boolean;
}

/** The queue of a moderator, oldest deadline first; with `closed`, what was decided, newest first. */
export const listCases = query({
  name: "review.listCases",
  who: ["moderator"],
  input: z.object({ closed: z.boolean().default(false) }),
  authorise: open("the list holds only cases of the actor's library or of the marketplace"),
  run: async ({ reader, actor, input }): Promise<QueueRow[]> => {
    const mine =
      actor.libraryId === null
        ? or(isNull(cases.libraryId), eq(cases.state, "waiting on second person"))
        : eq(cases.libraryId, actor.libraryId);
    const state = input.closed ? eq(cases.state, "closed") : ne(cases.state, "closed");
    const rows = await reader
      .select()
      .from(cases)
      .where(and(mine, state))
      .orderBy(input.closed ? desc(cases.closedAt) : asc(cases.dueAt))
      .limit(300);
    if (rows.length === 0) return [];
    const ids = rows.map((row) => row.id);
    const groups = await reader
      .select({ caseId: caseGroups.caseId, relation: caseGroups.relation })
      .from(caseGroups)
      .where(inArray(caseGroups.caseId, ids));
    const answers = await reader
      .select({ caseId: findings.caseId, outcome: findings.outcome })
      .from(findings)
      .where(and(inArray(findings.caseId, ids), isNull(findings.supersededBy)));
    const families = new Map(
      (
        await familiesByIds(
          reader,
          rows.map((row) => row.familyId),
        )
      ).map((family) => [family.id, family.title]),
    );
    const holders = await peopleByIds(
      reader,
      rows.flatMap((row) => (row.holderId ? [row.holderId] : [])),
    );
    return rows.map((row) => ({
      id: row.id,
      number: row.number,
      title: families.get(row.familyId) ?? "",
      state: row.state,
      dueAt: row.dueAt,
      openedAt: row.openedAt,
      closedAt: row.closedAt,
      holderName: row.holderId ? (holders.get(row.holderId)?.name ?? null) : null,
      isYours: row.holderId === actor.personId,
      relations: [
        ...new Set(groups.filter((group) => group.caseId === row.id).map((group) => group.relation)),
      ],
      groups: groups.filter((group) => group.caseId === row.id).length,
      outcome: answers.find((answer) => answer.caseId === row.id)?.outcome ?? null,
      forMarketplace: row.libraryId === null,
    }));
  },
});
