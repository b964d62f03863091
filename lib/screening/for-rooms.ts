import { and, asc, desc, eq, inArray, isNull } from "drizzle-orm";
import type { Reader } from "@/db/client";
import {
  certificates,
  hits,
  indexHead,
  passages,
  recordingFingerprints,
  screeningRuns,
  sharedLoops,
} from "@/db/schema/screening";

/** Reads for upper rooms, used inside their own verbs after they have decided who may see what. */
export async function currentRun(reader: Reader, recordingId: string) {
  const [run] = await reader
    .select()
    .from(screeningRuns)
    .where(and(eq(screeningRuns.recordingId, recordingId), isNull(screeningRuns.supersededBy)));
  return run ?? null;
}

export async function currentRuns(reader: Reader, recordingIds: readonly string[]) {
  return recordingIds.length
    ? reader
        .select()
        .from(screeningRuns)
        .where(and(inArray(screeningRuns.recordingId, [...recordingIds]), isNull(screeningRuns.supersededBy)))
    : [];
}

export type HitRow = typeof hits.$inferSelect;
export type PassageRow = typeof passages.$inferSelect;

/** Hits of the current run of each recording, with their passages, surest first. */
export async function hitsOf(
  reader: Reader,
  recordingIds: readonly string[],
): Promise<(HitRow & { passages: PassageRow[] })[]> {
  const runs = await currentRuns(reader, recordingIds);
  if (runs.length === 0) return [];
  const rows = await reader
    .select()
    .from(hits)
    .where(
      inArray(
        hits.runId,
        runs.map((run) => run.id),
      ),
    )
    .orderBy(desc(hits.evidence));
  return withPassages(reader, rows);
}

export async function hitsByIds(reader: Reader, ids: readonly string[]) {
  if (ids.length === 0) return [];
  return withPassages(
    reader,
    await reader
      .select()
      .from(hits)
      .where(inArray(hits.id, [...ids]))
      .orderBy(desc(hits.evidence)),
  );
}

async function withPassages(
  reader: Reader,
  rows: HitRow[],
): Promise<(HitRow & { passages: PassageRow[] })[]> {
  if (rows.length === 0) return [];
  const all = await reader
    .select()
    .from(passages)
    .where(
      inArray(
        passages.hitId,
        rows.map((row) => row.id),
      ),
    )
    .orderBy(asc(passages.number));
  return rows.map((row) => ({ ...row, passages: all.filter((passage) => passage.hitId === row.id) }));
}

export async function certificateOf(reader: Reader, recordingId: string) {
  const [row] = await reader
    .select()
    .from(certificates)
    .where(eq(certificates.recordingId, recordingId))
    .orderBy(desc(certificates.issuedAt))
    .limit(1);
  return row ?? null;
}

export async function notComparableSpans(reader: Reader, subjectId: string) {
  const [row] = await reader
    .select({
      notComparable: recordingFingerprints.notComparable,
      durationS: recordingFingerprints.durationS,
      contentS: recordingFingerprints.contentS,
    })
    .from(recordingFingerprints)
    .where(and(eq(recordingFingerprints.subjectId, subjectId), eq(recordingFingerprints.channel, "mid")));
  return row ?? null;
}

export async function listLoops(reader: Reader) {
  return reader.select().from(sharedLoops).orderBy(asc(sharedLoops.code));
}

export async function indexSize(reader: Reader): Promise<{ seq: number }> {
  const [head] = await reader
    .select({ seq: indexHead.seq })
    .from(indexHead)
    .where(eq(indexHead.name, "index"));
  return { seq: head?.seq ?? 0 };
}

/** Where the sound of a reference that is not a delivered recording is kept: a loop's file, a reported work's recording. */
export async function reportedFile(
  reader: Reader,
  subjectKind: string,
  subjectId: string,
): Promise<{ key: string; name: string } | null> {
  if (subjectKind === "loop") {
    const [loop] = await reader
      .select({ fileKey: sharedLoops.fileKey })
      .from(sharedLoops)
      .where(eq(sharedLoops.id, subjectId));
    return loop?.fileKey ? { key: loop.fileKey, name: "loop.wav" } : null;
  }
  const [row] = await reader
    .select({ fileKey: recordingFingerprints.fileKey })
    .from(recordingFingerprints)
    .where(
      and(
        eq(recordingFingerprints.subjectKind, subjectKind),
        eq(recordingFingerprints.subjectId, subjectId),
        eq(recordingFingerprints.channel, "mid"),
      ),
    );
  return row?.fileKey ? { key: row.fileKey, name: "reference.wav" } : null;
}
