import { eq, inArray, sql } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { libraries, licensedMasters } from "@/db/schema/catalogue";

/** Locks a library and raises its version: the guard of what is numbered within it. */
export async function lockLibrary(tx: Tx, libraryId: string) {
  const [library] = await tx.select().from(libraries).where(eq(libraries.id, libraryId)).for("update");
  if (!library) return null;
  await tx
    .update(libraries)
    .set({ version: sql`${libraries.version} + 1` })
    .where(eq(libraries.id, libraryId));
  return library;
}

/** The masters as licensed, of the recordings that have one, by recording id. */
export async function licensedMastersOf(reader: Reader, recordingIds: readonly string[]) {
  if (recordingIds.length === 0) return new Map<string, typeof licensedMasters.$inferSelect>();
  const rows = await reader
    .select()
    .from(licensedMasters)
    .where(inArray(licensedMasters.recordingId, [...recordingIds]));
  return new Map(rows.map((row) => [row.recordingId, row]));
}
