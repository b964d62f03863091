import { and, eq, isNull } from "drizzle-orm";
import type { Tx } from "@/db/client";
import {
  catalogueEvents,
  families,
  familyTerms,
  libraries,
  recordings,
  splitShares,
  splitVersions,
} from "@/db/schema/catalogue";
import { assert, Invalid } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { isDuplicateKey } from "@/lib/kernel/transaction";
import type { FamilyDescription, Share } from "./schemas";
import { searchTextOf } from "./search-text";

export interface NewRecording {
  versionRole: string;
  isrc: string | null;
  ending: string;
  fileKey: string;
  fileName: string;
  fileSha256: string;
  sampleRateHz: number;
  bitDepth: number;
  channels: number;
  durationS: number;
  loudnessLufs: number | null;
  truePeakDbtp: number | null;
  loudnessRangeLu: number | null;
  bpmMeasured: number | null;
  keyMeasured: string | null;
  contour: Buffer | null;
  soundFeatures: Buffer | null;
  sectionLoudness: number[] | null;
}

export interface FamilyRegistration {
  libraryId: string;
  description: FamilyDescription;
  shares: readonly Share[];
  /** The first is the head. */
  recordings: readonly NewRecording[];
  personId: string | null;
  demo: boolean;
  now: Date;
}

/**
 * Takes a delivered family into the catalogue as pending: held and screened, not yet listed. Called inside the
 * transaction that signs the delivery. Returns the new ids, recordings in the order given.
 */
export async function registerFamily(
  tx: Tx,
  registration: FamilyRegistration,
): Promise<{ familyId: string; recordingIds: string[]; catalogueNumber: string }> {
  const { description, now } = registration;
  const { number, catalogueNumber } = await takeNumber(tx, registration.libraryId);
  const familyId = newId("fam");
  const recordingIds = registration.recordings.map(() => newId("rec"));
  const { moreGenres, moods, instruments, uses, ...columns } = description;
  try {
    await tx.insert(families).values({
      ...columns,
      id: familyId,
      libraryId: registration.libraryId,
      number,
      catalogueNumber,
      state: "pending",
      searchText: searchTextOf(description),
      headRecordingId: recordingIds[0] ?? null,
      demo: registration.demo,
      createdAt: now,
    });
  } catch (error) {
    if (!isDuplicateKey(error)) throw error;
    throw new Invalid(
      "This library already has a cue of that title. Give this one a qualifier, or link it to that family.",
      { title: "already used in this library" },
    );
  }
  await writeTerms(tx, familyId, {
    genre: [description.genre, ...moreGenres],
    mood: moods,
    instrument: instruments,
    use: uses,
  });
  await writeSplit(tx, { familyId, version: 1, shares: registration.shares, now });
  for (const [index, recording] of registration.recordings.entries()) {
    await insertRecording(tx, {
      id: recordingIds[index] as string,
      familyId,
      libraryId: registration.libraryId,
      position: index,
      recording,
      now,
    });
  }
  await tx.insert(catalogueEvents).values({
    id: newId("eve"),
    familyId,
    happenedAt: now,
    words: "Delivered and held for screening.",
    toState: "pending",
    personId: registration.personId,
  });
  return { familyId, recordingIds, catalogueNumber };
}

export async function insertRecording(
  tx: Tx,
  row: {
    id: string;
    familyId: string;
    libraryId: string;
    position: number;
    recording: NewRecording;
    now: Date;
  },
): Promise<void> {
  const { recording } = row;
  try {
    await tx.insert(recordings).values({
      ...recording,
      id: row.id,
      familyId: row.familyId,
      libraryId: row.libraryId,
      position: row.position,
      state: "pending",
      createdAt: row.now,
    });
  } catch (error) {
    if (!isDuplicateKey(error)) throw error;
    throw new Invalid(
      `The ISRC ${recording.isrc} already belongs to another recording. Each distinct recording has its own.`,
      { isrc: "already used by another recording" },
    );
  }
}

async function takeNumber(tx: Tx, libraryId: string): Promise<{ number: number; catalogueNumber: string }> {
  const [library] = await tx
    .select({ code: libraries.code, last: libraries.lastNumber })
    .from(libraries)
    .where(eq(libraries.id, libraryId))
    .for("update");
  assert(library, `no library ${libraryId}`);
  const number = library.last + 1;
  await tx.update(libraries).set({ lastNumber: number }).where(eq(libraries.id, libraryId));
  return { number, catalogueNumber: `${library.code}${String(number).padStart(4, "0")}` };
}

async function writeTerms(
  tx: Tx,
  familyId: string,
  terms: Record<"genre" | "mood" | "instrument" | "use", readonly string[]>,
): Promise<void> {
  const rows = Object.entries(terms).flatMap(([kind, values]) =>
    [...new Set(values)].map((term, position) => ({ familyId, kind, term, position })),
  );
  if (rows.length) await tx.insert(familyTerms).values(rows);
}

/** CATALOGUE-1: both sides sum to exactly 100.00, or the publisher side is empty. */
export async function writeSplit(
  tx: Tx,
  split: { familyId: string; version: number; shares: readonly Share[]; now: Date },
): Promise<string> {
  const sum = (side: Share["side"]) =>
    split.shares.filter((share) => share.side === side).reduce((total, share) => total + share.shareBps, 0);
  assert(sum("writer") === 10_000, `CATALOGUE-1: writers' shares sum to ${sum("writer")} of 10000`);
  assert(
    sum("publisher") === 10_000 || sum("publisher") === 0,
    `CATALOGUE-1: publishers' shares sum to ${sum("publisher")} of 10000`,
  );
  const id = newId("spl");
  await tx.insert(splitVersions).values({
    id,
    familyId: split.familyId,
    version: split.version,
    validFrom: split.now,
    createdAt: split.now,
  });
  await tx
    .insert(splitShares)
    .values(
      split.shares.map((share, position) => ({ ...share, id: newId("sha"), splitVersionId: id, position })),
    );
  return id;
}

/** Marks a writer's share of the newest split as accepted by that writer. */
export async function acceptShare(
  tx: Tx,
  args: { familyId: string; personId: string; now: Date },
): Promise<void> {
  const versions = await tx
    .select({ id: splitVersions.id, version: splitVersions.version })
    .from(splitVersions)
    .where(eq(splitVersions.familyId, args.familyId));
  const newest = versions.sort((a, b) => b.version - a.version)[0];
  if (!newest) return;
  await tx
    .update(splitShares)
    .set({ acceptedAt: args.now })
    .where(
      and(
        eq(splitShares.splitVersionId, newest.id),
        eq(splitShares.personId, args.personId),
        isNull(splitShares.acceptedAt),
      ),
    );
}
