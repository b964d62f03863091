import { randomInt } from "node:crypto";
import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { deliveries, deliveryVersions } from "@/db/schema/deliveries";
import { alignedListenings, caseGroups, cases } from "@/db/schema/review";
import { hits, passages, screeningRuns } from "@/db/schema/screening";
import { type Contour, packContour } from "@/lib/audio";
import type { ActorOf } from "@/lib/kernel/actor";
import { newId } from "@/lib/kernel/ids";
import { makeFamily, makeLibrary, makeMembership, makePerson, makeRecording } from "./make";

export async function makeModerator(libraryId: string | null): Promise<ActorOf<"moderator">> {
  const person = await makePerson();
  await makeMembership({ personId: person.id, role: "moderator", libraryId });
  return { kind: "moderator", personId: person.id, name: person.name, libraryId };
}

/** A picture with something in every bin. */
export function makeContour(durationS = 120): Buffer {
  const binsPerSecond = 4;
  const values = () => new Uint8Array(durationS * binsPerSecond).fill(200);
  const channel = () => ({ peak: values(), rms: values(), core: values() });
  const contour: Contour = { seconds: durationS, binsPerSecond, channels: [channel(), channel()] };
  return Buffer.from(packContour(contour));
}

export interface MadeDelivery {
  deliveryId: string;
  familyId: string;
  libraryId: string;
  delivererId: string;
  recordingIds: string[];
}

/** A signed delivery whose versions wait for a person, without their sound. */
export async function makeHeldDelivery(values: {
  libraryId: string;
  delivererId?: string;
  versions?: number;
}): Promise<MadeDelivery> {
  const delivererId = values.delivererId ?? (await makePerson({ timeZone: "Europe/Paris" })).id;
  const { libraryId } = values;
  const familyId = await makeFamily({ libraryId, state: "pending" });
  const deliveryId = newId("del");
  const now = new Date();
  await db().insert(deliveries).values({
    id: deliveryId,
    libraryId,
    delivererId,
    delivererKind: "composer",
    familyId,
    title: "A delivery",
    draft: {},
    state: "delivered",
    createdAt: now,
    updatedAt: now,
    deliveredAt: now,
  });
  const recordingIds: string[] = [];
  for (let position = 0; position < (values.versions ?? 1); position++) {
    const recordingId = await makeRecording({
      familyId,
      libraryId,
      position,
      state: "held",
      versionRole: position === 0 ? "full" : `${position * 10}`,
      contour: makeContour(),
    });
    recordingIds.push(recordingId);
    await db()
      .insert(deliveryVersions)
      .values({
        id: newId("ver"),
        deliveryId,
        position,
        fileKey: `file-${recordingId}`,
        fileName: "made-by-a-test.wav",
        sizeBytes: 1,
        versionRole: "full",
        state: "held",
        stateWords: "A person will listen.",
        recordingId,
        arrivedAt: now,
      });
  }
  return { deliveryId, familyId, libraryId, delivererId, recordingIds };
}

export interface MadeReference {
  familyId: string;
  recordingId: string;
  title: string;
  libraryId: string;
}

/** Somebody's recording that a delivery lines up with; its title occurs nowhere else. */
export async function makeReference(values: {
  libraryId: string;
  state: "listed" | "pending" | "refused";
}): Promise<MadeReference> {
  const title = `Reference ${newId("ref").slice(4)}`;
  const familyId = await makeFamily({ libraryId: values.libraryId, state: values.state, title });
  const recordingId = await makeRecording({
    familyId,
    libraryId: values.libraryId,
    state: values.state === "listed" ? "listed" : values.state,
    contour: makeContour(),
  });
  return { familyId, recordingId, title, libraryId: values.libraryId };
}

type HitReference = { reported: string } | MadeReference;

/** An unexplained hit of one passage, as a screening writes it. */
export async function makeHit(
  recordingId: string,
  reference: HitReference,
): Promise<{ hitId: string; passageId: string }> {
  const [hitId, passageId] = [newId("hit"), newId("pas")];
  const now = new Date();
  const isReported = "reported" in reference;
  await db()
    .insert(hits)
    .values({
      id: hitId,
      runId: await heldRun(recordingId),
      recordingId,
      referenceKind: isReported ? "reported" : "recording",
      referenceId: isReported ? reference.reported : reference.recordingId,
      referenceFamilyId: isReported ? null : reference.familyId,
      referenceLibraryId: isReported ? null : reference.libraryId,
      relation: "excerpt",
      band: "hold",
      evidence: 200,
      evidence2: 100,
      chance: null,
      speed: 1,
      pitchSemitones: 0,
      coverageRecording: 0.1,
      coverageReference: 0.1,
      channel: "mid",
      reversed: false,
      lowDistinctiveness: false,
      createdAt: now,
    });
  await db().insert(passages).values({
    id: passageId,
    hitId,
    number: 1,
    startS: 10,
    endS: 20,
    refStartS: 30,
    refEndS: 40,
    speed: 1,
    pitchSemitones: 0,
    landmarksMatched: 50,
    landmarksTotal: 60,
    evidence: 200,
  });
  return { hitId, passageId };
}

async function heldRun(recordingId: string): Promise<string> {
  const [there] = await db()
    .select({ id: screeningRuns.id })
    .from(screeningRuns)
    .where(eq(screeningRuns.recordingId, recordingId));
  if (there) return there.id;
  const id = newId("run");
  const now = new Date();
  await db().insert(screeningRuns).values({
    id,
    recordingId,
    engineVersion: 1,
    seqSearched: 0,
    seqAdmitted: 0,
    recordingsCompared: 1,
    hoursCompared: 0,
    thresholds: {},
    outcome: "held",
    outcomeWords: "Part of it lines up with another recording.",
    startedAt: now,
    finishedAt: now,
  });
  return id;
}

export interface MadeCase extends MadeDelivery {
  caseId: string;
  groupIds: string[];
  hits: { hitId: string; passageId: string }[];
}

/** A case as `openCase` leaves it: one group a reference, one version a reference. For the matrix and for what openCase cannot make. */
export async function makeCase(values: {
  libraryId: string | null;
  deliveringLibraryId: string;
  references?: HitReference[];
  delivererId?: string;
  state?: string;
  holderId?: string | null;
}): Promise<MadeCase> {
  const references = values.references ?? [
    await makeReference({ libraryId: values.deliveringLibraryId, state: "listed" }),
  ];
  const delivery = await makeHeldDelivery({
    libraryId: values.deliveringLibraryId,
    versions: references.length,
    ...(values.delivererId ? { delivererId: values.delivererId } : {}),
  });
  const caseId = newId("cas");
  const now = new Date();
  await db()
    .insert(cases)
    .values({
      id: caseId,
      number: randomInt(1_000_000, 2_000_000_000),
      deliveryId: delivery.deliveryId,
      familyId: delivery.familyId,
      libraryId: values.libraryId,
      deliveringLibraryId: values.deliveringLibraryId,
      state: values.state ?? "open",
      holderId: values.holderId ?? null,
      dueAt: now,
      openedAt: now,
    });
  const made: MadeCase = { ...delivery, caseId, groupIds: [], hits: [] };
  for (const [index, reference] of references.entries()) {
    const hit = await makeHit(delivery.recordingIds[index] ?? "", reference);
    const groupId = newId("grp");
    const isReported = "reported" in reference;
    await db()
      .insert(caseGroups)
      .values({
        id: groupId,
        caseId,
        referenceKind: isReported ? "reported" : "recording",
        referenceKey: isReported ? reference.reported : reference.familyId,
        hitIds: [hit.hitId],
        relation: "excerpt",
        outsideLibrary: isReported || reference.libraryId !== values.deliveringLibraryId,
      });
    await db()
      .insert(alignedListenings)
      .values({
        passageId: hit.passageId,
        hitId: hit.hitId,
        state: "ready",
        fileKey: `listening-${hit.passageId}`,
        render: { gainDb: 0 },
        createdAt: now,
      });
    made.groupIds.push(groupId);
    made.hits.push(hit);
  }
  return made;
}

export const freshLibraryWith = async (moderators: number) => {
  const libraryId = await makeLibrary();
  const people: ActorOf<"moderator">[] = [];
  for (let index = 0; index < moderators; index++) people.push(await makeModerator(libraryId));
  return { libraryId, moderators: people };
};
