import { eq } from "drizzle-orm";
import { z } from "zod";
import { recordingFingerprints, screeningRequests } from "@/db/schema/screening";
import { recordingById } from "@/lib/catalogue";
import { DEFAULT_THRESHOLDS } from "@/lib/fingerprint";
import { system } from "@/lib/kernel/actor";
import { businessNow } from "@/lib/kernel/clock";
import { NotFound } from "@/lib/kernel/errors";
import { query } from "@/lib/kernel/verb";
import { withLocalCopy } from "@/lib/uploads";
import { AGAIN, admitRecording } from "./admit-recording";
import { screeningEngine } from "./engine/engine";
import { storeFingerprints } from "./fingerprints";
import type { Channel } from "./states";

const actor = system("screening.screen");

/** What a screening starts from: the recording, what deliveries told of it, and its fingerprints if it has some. */
export const readScreeningSubject = query({
  name: "screening.readScreeningSubject",
  who: ["system"],
  input: z.object({ recordingId: z.string() }),
  authorise: async ({ reader, input }) => {
    const recording = await recordingById(reader, input.recordingId);
    const [request] = await reader
      .select()
      .from(screeningRequests)
      .where(eq(screeningRequests.recordingId, input.recordingId));
    if (!recording || !request) throw new NotFound();
    return { recording, request };
  },
  run: async ({ reader, subject }) => {
    const prints = await reader
      .select({ channel: recordingFingerprints.channel, packed: recordingFingerprints.packed })
      .from(recordingFingerprints)
      .where(eq(recordingFingerprints.subjectId, subject.recording.id));
    return {
      ...subject,
      prints: prints.map((row) => ({ channel: row.channel as Channel, packed: new Uint8Array(row.packed) })),
    };
  },
});

export type ScreenProgress = (words: string, done: number, of: number) => void;

/**
 * Screens one recording: fingerprint it, search the index as it stands, then admit it under the head row, where only
 * what was admitted meanwhile is compared again. Safe to repeat at any point: a job whose worker died after the admission
 * finds it done, and makes neither a second run nor a second number.
 */
export async function screenRecording(
  recordingId: string,
  jobId: string,
  progress: ScreenProgress,
): Promise<{ runId: string }> {
  const startedAt = businessNow();
  const subject = await readScreeningSubject(actor, { recordingId });
  const engine = screeningEngine();
  const { fileKey, fileName } = subject.recording;
  const fingerprinted = await withLocalCopy(fileKey, fileName, (path) =>
    engine.fingerprintFile({ path }, (done, of) => progress("reading", done, of)),
  );
  await storeFingerprints(actor, {
    subjectKind: "recording",
    subjectId: recordingId,
    engineVersion: fingerprinted.engineVersion,
    rows: fingerprinted.rows,
  });
  const rows = fingerprinted.rows.map((row) => ({ channel: row.channel, packed: row.packed }));
  for (let turn = 0; ; turn++) {
    const index = await engine.catchUp();
    progress("searching", 0, index.recordings);
    const found = await engine.search({ query: rows, exclude: [`recording:${recordingId}`] }, (done, of) =>
      progress("searching", Math.round((done / Math.max(1, of)) * index.recordings), index.recordings),
    );
    const admitted = await admitRecording(
      actor,
      {
        recordingId,
        engineVersion: fingerprinted.engineVersion,
        seqSearched: index.seq,
        recordingsCompared: index.recordings,
        hoursCompared: index.hours,
        thresholds: { ...DEFAULT_THRESHOLDS },
        found,
        startedAt,
      },
      { operationId: `screened:${jobId}:${turn}` },
    );
    if (admitted !== AGAIN) return admitted;
  }
}
