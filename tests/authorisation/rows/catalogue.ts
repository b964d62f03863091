import { randomBytes } from "node:crypto";
import { makeFamily, makeRecording } from "@/tests/support/make";
import { COLUMNS, type Column, type Rows, type World } from "../columns";

const SYSTEM: readonly Column[] = ["system"];
const EVERYBODY = [...COLUMNS];

async function listed(world: World): Promise<{ familyId: string; recordingId: string; number: string }> {
  const number = `ZZ${randomBytes(3).readUIntBE(0, 3)}`;
  const familyId = await makeFamily({
    libraryId: world.libraryId,
    catalogueNumber: number,
    listedAt: new Date(),
  });
  const recordingId = await makeRecording({ familyId, libraryId: world.libraryId, previewKey: "preview" });
  return { familyId, recordingId, number };
}

async function pending(world: World): Promise<string> {
  const familyId = await makeFamily({ libraryId: world.libraryId, state: "pending" });
  return makeRecording({ familyId, libraryId: world.libraryId, state: "pending" });
}

const fresh = async (world: World) => ({ recordingId: (await listed(world)).recordingId });
const capitals = () => Array.from(randomBytes(4), (byte) => String.fromCharCode(65 + (byte % 26))).join("");

export const rows = {
  "catalogue.createLibrary": {
    input: async () => ({
      code: capitals(),
      name: "A new library",
      place: "Somewhere",
      countryCode: "GB",
      currency: "GBP",
      timeZone: "Europe/London",
      publisherIpi: "99900002152",
      composerPoolBps: 5000,
      character: "",
    }),
    may: ["admin", "system"],
  },
  "catalogue.readRecordingToRender": { input: fresh, may: SYSTEM },
  "catalogue.recordPreview": {
    input: async (world: World) => ({
      recordingId: await pending(world),
      previewKey: "key",
      sectionLoudness: null,
    }),
    may: SYSTEM,
  },
  "catalogue.recordMaster": {
    input: async (world: World) => ({
      ...(await fresh(world)),
      fileKey: "key",
      sha256: "a".repeat(64),
      sizeBytes: 1,
      durationSamples: 1,
    }),
    may: SYSTEM,
  },
  /** On a recording that is not listed: what is on sale is heard by everybody. */
  "catalogue.hearRecording": {
    input: async (world: World) => ({ recordingId: await pending(world) }),
    may: ["owner", "staff", "moderator", "system"],
  },
  "catalogue.searchCues": { input: async () => ({}), may: EVERYBODY },
  "catalogue.getCue": {
    input: async (world: World) => ({ number: (await listed(world)).number }),
    may: EVERYBODY,
  },
  "catalogue.listLibraries": { input: async () => ({}), may: EVERYBODY },
  "catalogue.countListed": { input: async () => ({}), may: EVERYBODY },
} satisfies Rows;
