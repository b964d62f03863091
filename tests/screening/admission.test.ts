import "@/tests/support/database";
import { eq, inArray } from "drizzle-orm";
import { afterAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { indexHead, indexLog, screeningRequests, screeningRuns } from "@/db/schema/screening";
import { renderVersion } from "@/fixtures/audio";
import { createMonoResampler } from "@/lib/audio";
import { ENGINE_VERSION, fingerprint, packFingerprint } from "@/lib/fingerprint";
import { system } from "@/lib/kernel/actor";
import { changeReference, storeFingerprints } from "@/lib/screening";
import { admitRecording } from "@/lib/screening/admit-recording";
import { closeScreeningEngine } from "@/lib/screening/engine/engine";
import { makeFamily, makeLibrary, makePerson, makeRecording } from "@/tests/support/make";

/*
 * The race that matters: both were searched before either was admitted, so neither search could see the other. Only the
 * comparison under the head row can tell.
 */
const ROUNDS = 40;
const SPAN_S = 14;
const actor = system("tests");

const music = (() => {
  const low: Float32Array[] = [];
  for (const cue of [1, 17, 30]) {
    const resampler = createMonoResampler(48_000);
    const { channels } = renderVersion(cue, "full", { seconds: 40 });
    low.push(Float32Array.from(resampler.push(channels[0] ?? new Float32Array(0))));
  }
  return low;
})();

/** A stretch of music of its own for each round: another cue, another place. */
function stretch(round: number): Float32Array {
  const source = music[round % music.length] ?? new Float32Array(0);
  const from = Math.floor(((round * 1.7) % 22) * 11_025);
  return source.subarray(from, from + SPAN_S * 11_025);
}

async function pendingRecording(packed: Uint8Array): Promise<string> {
  const libraryId = await makeLibrary();
  const familyId = await makeFamily({ libraryId, state: "pending" });
  const recordingId = await makeRecording({ familyId, libraryId, state: "pending", durationS: SPAN_S });
  const { id: delivererId } = await makePerson();
  await db().insert(screeningRequests).values({
    recordingId,
    familyId,
    libraryId,
    delivererId,
    writerIds: [],
    declaredLoops: [],
    expectsFamilyMatch: false,
    requestedAt: new Date(),
  });
  await storeFingerprints(actor, {
    subjectKind: "recording",
    subjectId: recordingId,
    engineVersion: ENGINE_VERSION,
    rows: [
      { channel: "mid", packed, durationS: SPAN_S, contentS: SPAN_S, comparable: true, notComparable: [] },
    ],
  });
  return recordingId;
}

async function headSeq(): Promise<number> {
  const [row] = await db().select().from(indexHead).where(eq(indexHead.name, "index"));
  return row?.seq ?? 0;
}

const admit = (recordingId: string, seqSearched: number) =>
  admitRecording(actor, {
    recordingId,
    engineVersion: ENGINE_VERSION,
    seqSearched,
    recordingsCompared: 0,
    hoursCompared: 0,
    thresholds: {},
    found: [],
    startedAt: new Date(),
  });

afterAll(closeScreeningEngine);

describe("admission", () => {
  test(`SCREENING-2, SCREENING-3: of two that were delivered in the same second exactly one passes unquestioned, ${ROUNDS} times out of ${ROUNDS}`, {
    timeout: 300_000,
  }, async () => {
    const passed: number[] = [];
    for (let round = 0; round < ROUNDS; round++) {
      const packed = packFingerprint(fingerprint(stretch(round)));
      const rivals = [await pendingRecording(packed), await pendingRecording(packed)];
      // The head as of this round's searches: earlier rounds are not what is tested here.
      const seqSearched = await headSeq();
      await Promise.all(rivals.map((recordingId) => admit(recordingId, seqSearched)));
      const runs = await db()
        .select({ outcome: screeningRuns.outcome })
        .from(screeningRuns)
        .where(inArray(screeningRuns.recordingId, rivals));
      passed.push(runs.filter((run) => run.outcome === "clear").length);
      expect(runs).toHaveLength(2);
    }
    expect(passed).toEqual(Array.from({ length: ROUNDS }, () => 1));
  });

  test("SCREENING-1: the log has every number once, with none left out", async () => {
    const rows = await db().select({ seq: indexLog.seq }).from(indexLog);
    expect(rows.map((row) => row.seq).sort((a, b) => a - b)).toEqual(
      Array.from({ length: await headSeq() }, (_, index) => index + 1),
    );
  });

  test("more than fifty admitted meanwhile: the head is let go, nothing is written, and the search is done again", async () => {
    const packed = packFingerprint(fingerprint(stretch(5)));
    const recordingId = await pendingRecording(packed);
    const seqSearched = await headSeq();
    for (let index = 0; index < 51; index++)
      await changeReference(actor, { change: "add", subjectKind: "loop", subjectId: `lop_${index}` });
    const before = await headSeq();
    expect(await admit(recordingId, seqSearched)).toBe("again");
    expect(await headSeq()).toBe(before);
    expect(
      await db().select().from(screeningRuns).where(eq(screeningRuns.recordingId, recordingId)),
    ).toHaveLength(0);
  });
});
