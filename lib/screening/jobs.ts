import { defineHandlers } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { withLocalCopy } from "@/lib/uploads";
import { announceReported } from "./announce-reported";
import { screeningEngine } from "./engine/engine";
import { storeFingerprints } from "./fingerprints";
import { changeReference } from "./hold-reference";
import { screenRecording } from "./screen-recording";
import type { SubjectKind } from "./states";

const actor = system("screening");

async function fingerprintReference(
  subjectKind: SubjectKind,
  subjectId: string,
  fileKey: string,
  turn = 0,
): Promise<boolean> {
  const result = await withLocalCopy(fileKey, "reference.wav", (path) =>
    screeningEngine().fingerprintFile({ path, isLoop: subjectKind === "loop" }),
  );
  await storeFingerprints(actor, {
    subjectKind,
    subjectId,
    engineVersion: result.engineVersion,
    fileKey,
    rows: result.rows,
  });
  await changeReference(
    actor,
    { change: "add", subjectKind, subjectId },
    { operationId: `reference:${subjectId}:${turn}:${fileKey}`.slice(0, 120) },
  );
  return result.rows.some((row) => row.comparable);
}

export const screeningHandlers = defineHandlers({
  "screening.screen": {
    heavy: true,
    timeoutS: 3600,
    handle: async ({ recordingId }, { jobId, progress }) => {
      await screenRecording(recordingId, jobId, progress);
    },
  },
  "screening.fingerprintLoop": {
    heavy: true,
    timeoutS: 600,
    handle: async ({ loopId, fileKey }) => {
      await fingerprintReference("loop", loopId, fileKey);
    },
  },
  "screening.fingerprintReported": {
    heavy: true,
    timeoutS: 1800,
    handle: async ({ reportedWorkId, fileKey, turn }) => {
      const comparable = await fingerprintReference("reported", reportedWorkId, fileKey, turn);
      await announceReported(
        actor,
        { reportedWorkId, comparable, turn },
        { operationId: `reported:${reportedWorkId}:${turn}:${fileKey}`.slice(0, 120) },
      );
    },
  },
  "screening.dropReported": {
    timeoutS: 60,
    handle: async ({ reportedWorkId, turn }) => {
      await changeReference(
        actor,
        { change: "remove", subjectKind: "reported", subjectId: reportedWorkId },
        { operationId: `drop:${reportedWorkId}:${turn}` },
      );
    },
  },
});
