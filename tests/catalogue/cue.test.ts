import "@/tests/support/database";
import { beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { catalogueEvents } from "@/db/schema/catalogue";
import {
  getCue,
  hearRecording,
  listClearRecordings,
  placeHold,
  registerFamily,
  setFamilyState,
  setRecordingState,
} from "@/lib/catalogue";
import type { Actor } from "@/lib/kernel/actor";
import { ANONYMOUS } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { type FilledCue, fillCues } from "@/tests/support/fill-cues";
import { makeFamily, makeLibrary, makePerson, makeRecording } from "@/tests/support/make";

let filled: Map<number, FilledCue>;
beforeAll(async () => {
  filled = await fillCues();
});
const cue = (number: number): FilledCue => {
  const found = filled.get(number);
  if (!found) throw new Error(`no cue ${number}`);
  return found;
};

async function pendingIn(libraryId: string, delivererId?: string) {
  const familyId = await makeFamily({ libraryId, state: "pending" });
  if (delivererId)
    await db()
      .insert(catalogueEvents)
      .values({
        id: newId("eve"),
        familyId,
        happenedAt: new Date(),
        words: "Delivered and held for screening.",
        toState: "pending",
        personId: delivererId,
      });
  return makeRecording({ familyId, libraryId, state: "pending", fileKey: "original", fileName: "a.FLAC" });
}

const as = (
  kind: "owner" | "staff" | "moderator" | "composer",
  libraryId: string | null,
  personId = "per_x",
) => ({ kind, libraryId, personId, name: "Somebody", granted: [] }) as unknown as Actor;

describe("a family and its shares", () => {
  const registration = async (bps: number[], publisherBps: number[]) => ({
    libraryId: await makeLibrary(),
    personId: null,
    demo: false,
    now: new Date(),
    description: {
      title: `A title of ${newId("fam")}`,
      otherTitles: [],
      iswc: null,
      deal: "exclusive" as const,
      bpm: null,
      musicalKey: null,
      genre: "jazz",
      moreGenres: [],
      moods: ["calm"],
      instruments: ["piano"],
      uses: [],
      voice: "none",
      voiceLanguage: null,
      ending: "button",
      shape: "steady",
      density: "solo",
      description: "A cue made by a test, which nobody will ever hear or look for in earnest.",
      keywords: [],
      sections: [],
      explicitContent: "none" as const,
      yearRecorded: null,
      restrictedTerritories: [],
      refusedUses: [],
    },
    shares: [
      ...bps.map((shareBps) => ({ side: "writer" as const, shareBps, name: "A writer", role: "C" })),
      ...publisherBps.map((shareBps) => ({
        side: "publisher" as const,
        shareBps,
        name: "A publisher",
        role: "E",
      })),
    ].map((share) => ({ ...share, personId: null, ipi: null, acceptedAt: null })),
    recordings: [],
  });

  test.each([
    ["writers of 99.99", [5000, 4999], [10_000]],
    ["writers of 100.01", [5000, 5001], [10_000]],
    ["no writer", [], [10_000]],
    ["publishers of 50", [10_000], [5000]],
  ])(
    "CATALOGUE-1: %s are refused, and nothing of the family is kept",
    async (_words, writers, publishers) => {
      const wanted = await registration(writers, publishers);
      await expect(db().transaction((tx) => registerFamily(tx, wanted))).rejects.toThrow("CATALOGUE-1");
    },
  );

  test("CATALOGUE-1: 33.34, 33.33 and 33.33 sum, and a work may be unpublished", async () => {
    const wanted = await registration([3334, 3333, 3333], []);
    const made = await db().transaction((tx) => registerFamily(tx, wanted));
    expect(made.catalogueNumber).toMatch(/0001$/);
  });

  test("CATALOGUE-2: a family whose head is not clear is not listed, even if another version is", async () => {
    const libraryId = await makeLibrary();
    const headRecordingId = newId("rec");
    const familyId = await makeFamily({ libraryId, state: "pending", headRecordingId });
    await makeRecording({ id: headRecordingId, familyId, libraryId, state: "held" });
    const bed = await makeRecording({ familyId, libraryId, versionRole: "bed", state: "clear" });
    const change = { words: "Listed.", now: new Date() };
    await expect(db().transaction((tx) => listClearRecordings(tx, familyId, change))).rejects.toThrow(
      "CATALOGUE-2",
    );
    await db().transaction((tx) => setRecordingState(tx, headRecordingId, "clear", change));
    const listed = await db().transaction((tx) => listClearRecordings(tx, familyId, change));
    expect(listed.sort()).toEqual([headRecordingId, bed].sort());
  });
});

describe("hearing", () => {
  test("CATALOGUE-4: everybody hears the preview of what is on sale, never its master", async () => {
    const [head = ""] = cue(1).recordingIds;
    await expect(hearRecording(ANONYMOUS, { recordingId: head })).resolves.toEqual({
      fileKey: "preview-1-0",
      type: "audio/mpeg",
    });
  });

  test("CATALOGUE-4: what is pending is heard by its library, its deliverer and its writers, as it was delivered", async () => {
    const libraryId = await makeLibrary();
    const { id } = await makePerson();
    const recordingId = await pendingIn(libraryId, id);
    for (const actor of [
      as("owner", libraryId),
      as("staff", libraryId),
      as("moderator", libraryId),
      as("composer", libraryId, id),
    ])
      await expect(hearRecording(actor, { recordingId })).resolves.toEqual({
        fileKey: "original",
        type: "audio/flac",
      });
  });

  test("CATALOGUE-4: to everybody else it does not exist, marketplace moderators and a foreign composer included", async () => {
    const libraryId = await makeLibrary();
    const other = await makeLibrary();
    const recordingId = await pendingIn(libraryId, (await makePerson()).id);
    for (const actor of [
      ANONYMOUS,
      as("owner", other),
      as("moderator", other),
      as("moderator", null),
      as("composer", libraryId, "per_another"),
    ])
      await expect(hearRecording(actor, { recordingId })).rejects.toBeInstanceOf(NotFound);
    await expect(hearRecording(ANONYMOUS, { recordingId: "rec_none" })).rejects.toBeInstanceOf(NotFound);
  });

  test("CATALOGUE-4: a hold silences a listed cue for the public", async () => {
    const [head = ""] = cue(5).recordingIds;
    await expect(hearRecording(ANONYMOUS, { recordingId: head })).resolves.toBeDefined();
    await db().transaction((tx) =>
      placeHold(tx, {
        familyId: cue(5).familyId,
        cause: "finding",
        causeId: "fin",
        reason: "r",
        now: new Date(),
      }),
    );
    await expect(hearRecording(ANONYMOUS, { recordingId: head })).rejects.toBeInstanceOf(NotFound);
  });
});

describe("the page of a cue", () => {
  test("says who wrote, publishes and can grant it", async () => {
    const page = await getCue(ANONYMOUS, { number: cue(1).catalogueNumber.toLowerCase() });
    expect(page).toMatchObject({ title: "Salt on the Window Frame", oneStop: true, iswc: "T9990000016" });
    expect(page.writersShares.map(({ name, shareBps }) => [name, shareBps])).toEqual([
      ["Ailsa Trevarrick-Moe", 6000],
      ["Celandine Harrowgill", 4000],
    ]);
    expect(page.publishersShares).toMatchObject([
      { name: "Saltmarrow Music Library", role: "publisher", shareBps: 10_000 },
    ]);
    expect(Object.values(page.isrcs)).toContain("XXDM12401001");
  });

  test("of a held cue names neither the report nor anything that can be heard", async () => {
    await db().transaction((tx) =>
      placeHold(tx, {
        familyId: cue(7).familyId,
        cause: "reported work",
        causeId: "RW-77",
        reason: "Reported by Somebody of Somewhere",
        now: new Date("2026-05-11T10:00:00Z"),
      }),
    );
    const page = await getCue(ANONYMOUS, { number: cue(7).catalogueNumber });
    expect(page).toMatchObject({
      availability: { kind: "rights question", since: "2026-05-11T10:00:00.000Z" },
      versions: [],
      contours: {},
      isrcs: {},
    });
    expect(JSON.stringify(page)).not.toMatch(/RW-77|Somebody of Somewhere/);
  });

  test("is not there for a cue that was never listed or that was refused", async () => {
    const libraryId = await makeLibrary();
    const number = `ZZ${Date.now() % 1e6}`;
    await makeFamily({ libraryId, state: "pending", catalogueNumber: number });
    await expect(getCue(ANONYMOUS, { number })).rejects.toBeInstanceOf(NotFound);
    await db().transaction((tx) =>
      setFamilyState(tx, cue(27).familyId, "refused", { words: "Cannot be listed.", now: new Date() }),
    );
    await expect(getCue(ANONYMOUS, { number: cue(27).catalogueNumber })).rejects.toBeInstanceOf(NotFound);
    await expect(getCue(ANONYMOUS, { number: "SM1; drop" })).rejects.toBeInstanceOf(NotFound);
  });

  test("never carries a file key", async () => {
    const page = await getCue(ANONYMOUS, { number: cue(1).catalogueNumber });
    expect(JSON.stringify(page)).not.toMatch(/file-1-|preview-1-/);
  });
});
