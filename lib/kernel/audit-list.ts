import { and, desc, eq, lt, or } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { auditLog } from "@/db/schema/kernel";

export interface AuditRow {
  id: string;
  verb: string;
  actorKind: string;
  actorPersonId: string | null;
  actorScope: string | null;
  subject: string;
  businessAt: Date;
  systemAt: Date;
}

/** The newest rows first; `after` is the id of the last row of the page before. Details and results stay here. */
export async function listAuditRows(
  reader: Reader,
  page: {
    libraryId?: string | undefined;
    subject?: string | undefined;
    after?: string | undefined;
    limit: number;
  },
): Promise<AuditRow[]> {
  const conditions = [];
  if (page.libraryId) conditions.push(eq(auditLog.libraryId, page.libraryId));
  if (page.subject) conditions.push(eq(auditLog.subject, page.subject));
  if (page.after) {
    const [last] = await reader
      .select({ systemAt: auditLog.systemAt })
      .from(auditLog)
      .where(eq(auditLog.id, page.after));
    if (!last) return [];
    const isOlder = lt(auditLog.systemAt, last.systemAt);
    conditions.push(or(isOlder, and(eq(auditLog.systemAt, last.systemAt), lt(auditLog.id, page.after))));
  }
  return reader
    .select({
      id: auditLog.id,
      verb: auditLog.verb,
      actorKind: auditLog.actorKind,
      actorPersonId: auditLog.actorPersonId,
      actorScope: auditLog.actorScope,
      subject: auditLog.subject,
      businessAt: auditLog.businessAt,
      systemAt: auditLog.systemAt,
    })
    .from(auditLog)
    .where(and(...conditions))
    .orderBy(desc(auditLog.systemAt), desc(auditLog.id))
    .limit(page.limit);
}
