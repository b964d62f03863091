import { eq } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { auditLog } from "@/db/schema/kernel";
import { type Actor, describeActor } from "./actor";
import { businessNow, systemNow } from "./clock";
import { decode, encode } from "./codec";
import { newId } from "./ids";
import { requestId } from "./log";

export type AuditEntry = { subject: string; libraryId?: string | null; detail?: Record<string, unknown> };

export async function writeAudit(
  tx: Tx,
  row: { operationId: string; verb: string; actor: Actor; entry: AuditEntry; result: unknown },
): Promise<void> {
  const who = describeActor(row.actor);
  await tx.insert(auditLog).values({
    id: newId("aud"),
    operationId: row.operationId,
    verb: row.verb,
    actorKind: who.kind,
    actorPersonId: who.personId,
    actorScope: who.scope,
    subject: row.entry.subject,
    libraryId: row.entry.libraryId ?? null,
    detail: row.entry.detail ?? {},
    result: encode(row.result ?? null),
    requestId: requestId(),
    businessAt: businessNow(),
    systemAt: systemNow(),
  });
}

/** The result of an operation that has already been carried out, or null. */
export async function findOperation(
  reader: Reader,
  operationId: string,
): Promise<{ verb: string; result: unknown } | null> {
  const [row] = await reader
    .select({ verb: auditLog.verb, result: auditLog.result })
    .from(auditLog)
    .where(eq(auditLog.operationId, operationId));
  return row ? { verb: row.verb, result: decode(row.result) } : null;
}
