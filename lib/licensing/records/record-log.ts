import { asc, eq, max, sql } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { licenceStatusEvents, recordLog, recordLogHead } from "@/db/schema/licensing";
import { addDays, type CivilDate } from "@/lib/kernel/calendar";
import { assert } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { leafOf } from "../record/day-root";
import { StatusEvent, type StatusKind } from "../record/schema";
import type { Seal } from "../record/sign-record";
import { sha256Hex } from "../record/signing-key";

const HEAD = "log";

/** Locks the one row under which places are taken and days are closed, and raises its version. */
export async function lockLog(tx: Tx): Promise<{ publishedThrough: CivilDate | null }> {
  await tx
    .insert(recordLogHead)
    .values({ name: HEAD, publishedThrough: null })
    .onDuplicateKeyUpdate({ set: { name: sql`name` } });
  const [head] = await tx.select().from(recordLogHead).where(eq(recordLogHead.name, HEAD)).for("update");
  assert(head, "the head of the record log is there");
  await tx.update(recordLogHead).set({ version: sql`version + 1` }).where(eq(recordLogHead.name, HEAD));
  return head;
}

export interface LogPlace {
  day: CivilDate;
  position: number;
}

/** LICENSING-7: the next place of the day, or of the first day that has no root yet. */
export async function takeLogPlace(tx: Tx, now: Date): Promise<LogPlace> {
  const { publishedThrough } = await lockLog(tx);
  const today = now.toISOString().slice(0, 10);
  const day = publishedThrough !== null && publishedThrough >= today ? addDays(publishedThrough, 1) : today;
  const [row] = await tx
    .select({ last: max(recordLog.position) })
    .from(recordLog)
    .where(eq(recordLog.day, day));
  return { day, position: row?.last == null ? 0 : row.last + 1 };
}

export async function writeRecordLeaf(tx: Tx, place: LogPlace, seal: Seal): Promise<void> {
  await tx
    .insert(recordLog)
    .values({ ...place, kind: "record", licenceNumber: seal.number, leaf: leafOf(seal) });
}

export async function statusHistory(reader: Reader, number: string): Promise<StatusEvent[]> {
  const rows = await reader
    .select({ canonical: licenceStatusEvents.canonical })
    .from(licenceStatusEvents)
    .where(eq(licenceStatusEvents.licenceNumber, number))
    .orderBy(asc(licenceStatusEvents.sequence));
  return rows.map((row) => StatusEvent.parse(JSON.parse(row.canonical)));
}

/**
 * LICENSING-6: adds a dated line to a licence's history, a leaf of its day. A line is never before the one that stands above
 * it. Only for the run of a verb.
 */
export async function addLicenceStatus(
  tx: Tx,
  line: { number: string; kind: StatusKind; words: string; at: Date; now: Date },
): Promise<StatusEvent> {
  const place = await takeLogPlace(tx, line.now);
  const last = (await statusHistory(tx, line.number)).at(-1);
  const wanted = line.at.toISOString();
  const event: StatusEvent = {
    format: "sedgewren-status-event/1",
    number: line.number,
    sequence: (last?.sequence ?? 0) + 1,
    at: last && last.at > wanted ? last.at : wanted,
    kind: line.kind,
    words: line.words.slice(0, 500),
  };
  const leaf = leafOf(event);
  await tx.insert(recordLog).values({ ...place, kind: "status", licenceNumber: line.number, leaf });
  await tx.insert(licenceStatusEvents).values({
    id: newId("eve"),
    licenceNumber: line.number,
    sequence: event.sequence,
    status: event.kind,
    words: event.words,
    effectiveAt: new Date(event.at),
    recordedAt: line.now,
    canonical: leaf,
    sha256: sha256Hex(leaf),
  });
  return event;
}
