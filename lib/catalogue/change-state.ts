import { and, eq, inArray, isNull, sql } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { catalogueEvents, families, holds, recordings } from "@/db/schema/catalogue";
import { assert } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import type { FamilyState, RecordingState } from "./states";

interface Change {
  words: string;
  personId?: string | null;
  now: Date;
}

/** Locks a family and raises its version: the guard of every change to it and of every sale. */
export async function lockFamily(tx: Tx, familyId: string) {
  const [family] = await tx.select().from(families).where(eq(families.id, familyId)).for("update");
  assert(family, `no family ${familyId}`);
  await tx
    .update(families)
    .set({ version: sql`${families.version} + 1` })
    .where(eq(families.id, familyId));
  return family;
}

export async function setRecordingState(
  tx: Tx,
  recordingId: string,
  state: RecordingState,
  change: Change,
): Promise<void> {
  const [recording] = await tx
    .select({ familyId: recordings.familyId, state: recordings.state })
    .from(recordings)
    .where(eq(recordings.id, recordingId))
    .for("update");
  assert(recording, `no recording ${recordingId}`);
  if (recording.state === state) return;
  await tx.update(recordings).set({ state }).where(eq(recordings.id, recordingId));
  await writeEvent(tx, {
    familyId: recording.familyId,
    recordingId,
    fromState: recording.state,
    toState: state,
    ...change,
  });
}

export async function setFamilyState(
  tx: Tx,
  familyId: string,
  state: FamilyState,
  change: Change,
): Promise<void> {
  const family = await lockFamily(tx, familyId);
  if (family.state === state) return;
  await tx
    .update(families)
    .set({ state, ...(state === "listed" ? { listedAt: change.now } : {}) })
    .where(eq(families.id, familyId));
  await writeEvent(tx, { familyId, fromState: family.state, toState: state, ...change });
}

/** Another recording becomes the head: the one before it was returned and replaced. */
export async function setHead(tx: Tx, familyId: string, recordingId: string): Promise<void> {
  await lockFamily(tx, familyId);
  await tx.update(families).set({ headRecordingId: recordingId }).where(eq(families.id, familyId));
}

/** Lists a family's clear recordings; the head must be among them. Versions that clear later join by the same call. */
export async function listClearRecordings(tx: Tx, familyId: string, change: Change): Promise<string[]> {
  const family = await lockFamily(tx, familyId);
  const clear = await tx
    .select({ id: recordings.id })
    .from(recordings)
    .where(and(eq(recordings.familyId, familyId), eq(recordings.state, "clear")));
  if (clear.length === 0) return [];
  if (family.state !== "listed") {
    assert(
      clear.some((recording) => recording.id === family.headRecordingId),
      `CATALOGUE-2: the head of ${familyId} is not clear`,
    );
    await setFamilyState(tx, familyId, "listed", change);
  }
  const ids = clear.map((recording) => recording.id);
  await tx.update(recordings).set({ state: "listed" }).where(inArray(recordings.id, ids));
  return ids;
}

export async function placeHold(
  tx: Tx,
  hold: {
    familyId: string;
    cause: "reported work" | "finding" | "exclusive" | "owner";
    causeId: string;
    reason: string;
    now: Date;
  },
): Promise<void> {
  await lockFamily(tx, hold.familyId);
  const { now, ...columns } = hold;
  await tx.insert(holds).values({ id: newId("hol"), ...columns, sinceAt: now });
  await writeEvent(tx, { familyId: hold.familyId, words: `Held: ${hold.reason}`, now });
}

export async function endHold(tx: Tx, hold: { familyId: string; causeId: string; now: Date }): Promise<void> {
  await lockFamily(tx, hold.familyId);
  await tx
    .update(holds)
    .set({ endedAt: hold.now })
    .where(and(eq(holds.familyId, hold.familyId), eq(holds.causeId, hold.causeId), isNull(holds.endedAt)));
  await writeEvent(tx, { familyId: hold.familyId, words: "A hold has ended.", now: hold.now });
}

export async function openHolds(reader: Reader, familyId: string) {
  return reader
    .select()
    .from(holds)
    .where(and(eq(holds.familyId, familyId), isNull(holds.endedAt)));
}

async function writeEvent(
  tx: Tx,
  event: { familyId: string; recordingId?: string; fromState?: string; toState?: string } & Change,
): Promise<void> {
  await tx.insert(catalogueEvents).values({
    id: newId("eve"),
    familyId: event.familyId,
    recordingId: event.recordingId ?? null,
    happenedAt: event.now,
    words: event.words.slice(0, 300),
    fromState: event.fromState ?? null,
    toState: event.toState ?? null,
    personId: event.personId ?? null,
  });
}
