import { randomInt } from "node:crypto";
import { db } from "@/db/client";
import { screeningRequests } from "@/db/schema/screening";
import { ENGINE_VERSION } from "@/lib/fingerprint";
import { system } from "@/lib/kernel/actor";
import { newId } from "@/lib/kernel/ids";
import { storeFingerprints } from "@/lib/screening";
import { makeFamily, makeRecording } from "@/tests/support/make";
import { COLUMNS, type Column, type Rows, type World } from "../columns";

const SYSTEM: readonly Column[] = ["system"];
const MODERATORS: readonly Column[] = ["moderator", "otherModerator", "marketplaceModerator"];

/** A recording that waits to be screened, without its sound. */
async function pending(world: World): Promise<string> {
  const familyId = await makeFamily({ libraryId: world.libraryId, state: "pending" });
  const recordingId = await makeRecording({ familyId, libraryId: world.libraryId, state: "pending" });
  await db().insert(screeningRequests).values({
    recordingId,
    familyId,
    libraryId: world.libraryId,
    delivererId: "per_nobody",
    writerIds: [],
    declaredLoops: [],
    expectsFamilyMatch: false,
    requestedAt: new Date(),
  });
  return recordingId;
}

const SILENT = {
  channel: "mid" as const,
  packed: new Uint8Array([1]),
  durationS: 60,
  contentS: 0,
  comparable: false,
  notComparable: [{ startS: 0, endS: 60, reason: "silence" }],
};

async function fingerprinted(recordingId: string): Promise<string> {
  await storeFingerprints(system("the matrix"), {
    subjectKind: "recording",
    subjectId: recordingId,
    engineVersion: ENGINE_VERSION,
    rows: [SILENT],
  });
  return recordingId;
}

export const rows = {
  "screening.readHead": { input: async () => ({}), may: SYSTEM },
  "screening.readIndexChanges": {
    input: async () => ({ after: 0, engineVersion: ENGINE_VERSION }),
    may: SYSTEM,
  },
  "screening.readScreeningSubject": {
    input: async (world) => ({ recordingId: await pending(world) }),
    may: SYSTEM,
  },
  "screening.storeFingerprints": {
    input: async () => ({
      subjectKind: "recording",
      subjectId: newId("rec"),
      engineVersion: ENGINE_VERSION,
      rows: [SILENT],
    }),
    may: SYSTEM,
  },
  "screening.admitRecording": {
    input: async (world) => ({
      recordingId: await fingerprinted(await pending(world)),
      engineVersion: ENGINE_VERSION,
      seqSearched: 0,
      recordingsCompared: 0,
      hoursCompared: 0,
      thresholds: {},
      found: [],
      startedAt: new Date(),
    }),
    may: SYSTEM,
  },
  "screening.changeReference": {
    input: async () => ({ change: "remove", subjectKind: "reported", subjectId: newId("rw") }),
    may: SYSTEM,
  },
  "screening.announceReported": {
    input: async () => ({ reportedWorkId: newId("rw"), comparable: false, turn: 0 }),
    may: SYSTEM,
  },
  "screening.registerLoop": {
    input: async () => ({
      code: `LP-${String(randomInt(100, 999))}`,
      title: "Four bars of a kit",
      lengthS: 8,
      bpm: 104,
      condition: "with other musical content",
      conditionWords: "Only where other music plays with it.",
      coverageMaxBps: 6000,
      fileKey: newId("key"),
    }),
    may: [...MODERATORS, "system"],
    orAnswers: ["conflict"],
  },
  "screening.registerEntry": {
    input: async () => ({
      kind: "other title",
      code: null,
      title: "An old tune",
      familyIds: [],
      personId: null,
      libraryId: null,
      words: "The same work under another title.",
    }),
    may: [...MODERATORS, "system"],
  },
  "screening.listRegisters": { input: async () => ({}), may: MODERATORS },
  "screening.getScreeningOfCue": {
    input: async (world) => ({ familyId: await makeFamily({ libraryId: world.libraryId }) }),
    may: COLUMNS,
  },
} satisfies Rows;
