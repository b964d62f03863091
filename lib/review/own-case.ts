import { and, eq } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { cases, conflictsDeclared } from "@/db/schema/review";
import type { Actor, ActorOf } from "@/lib/kernel/actor";
import { Forbidden, NotFound } from "@/lib/kernel/errors";

export type CaseRow = typeof cases.$inferSelect;
export type Moderator = ActorOf<"moderator">;

/**
 * A library's moderator resolves the cases whose references all lie in that library; everything else, and a second
 * opinion, is the marketplace's. A case that is not theirs does not exist for them.
 */
export function maySeeCase(actor: Actor, row: CaseRow): boolean {
  if (actor.kind === "system") return true;
  if (actor.kind !== "moderator") return false;
  if (actor.libraryId === null) return row.libraryId === null || row.state === "waiting on second person";
  return row.libraryId === actor.libraryId;
}

export async function ownCase(reader: Reader, actor: Actor, caseId: string): Promise<CaseRow> {
  const [row] = await reader.select().from(cases).where(eq(cases.id, caseId));
  if (!row || !maySeeCase(actor, row)) throw new NotFound();
  return row;
}

export async function lockCase(tx: Tx, actor: Actor, caseId: string): Promise<CaseRow> {
  const [row] = await tx.select().from(cases).where(eq(cases.id, caseId)).for("update");
  if (!row || !maySeeCase(actor, row)) throw new NotFound();
  await tx
    .update(cases)
    .set({ version: row.version + 1 })
    .where(eq(cases.id, caseId));
  return row;
}

/** REVIEW-4: who has declared a conflict decides nothing in the case. */
export async function requireNoConflict(tx: Tx, actor: Moderator, caseId: string): Promise<void> {
  const [row] = await tx
    .select({ id: conflictsDeclared.id })
    .from(conflictsDeclared)
    .where(and(eq(conflictsDeclared.caseId, caseId), eq(conflictsDeclared.personId, actor.personId)));
  if (row)
    throw new Forbidden("You declared a conflict of interest in this case; somebody else must decide it.");
}
