import { and, asc, eq, inArray, isNull } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { families, familyTerms, holds, libraries, recordings } from "@/db/schema/catalogue";
import { splitsNow } from "./for-rooms";
import { versionRoleLabel } from "./version-roles";

/** Whether a cue can be licensed at present and, if not, why, in words that name nobody's report. */
export type Availability =
  | { kind: "on sale" }
  | { kind: "rights question" | "exclusive" | "off sale"; since: string | null };

export interface CueVersion {
  recordingId: string;
  role: string;
  label: string;
  durationS: number;
  ending: string;
  /** False until its preview has been made. */
  canBeHeard: boolean;
}

/** A cue as everybody who looks for music sees it. Versions are the listed ones, the head first. */
export interface CueCard {
  familyId: string;
  number: string;
  title: string;
  library: { id: string; code: string; name: string; currency: string };
  writers: string[];
  bpm: number | null;
  musicalKey: string | null;
  genre: string;
  terms: { genre: string[]; mood: string[]; instrument: string[]; use: string[] };
  voice: string;
  voiceLanguage: string | null;
  shape: string;
  density: string;
  ending: string;
  durationS: number;
  description: string;
  sections: { atS: number; label: string; energy: number }[];
  versions: CueVersion[];
  availability: Availability;
  listedAt: Date | null;
}

/** By family id. A family that was never listed is not in the answer: nobody outside may know of it. */
export async function cueCards(reader: Reader, familyIds: readonly string[]): Promise<Map<string, CueCard>> {
  if (familyIds.length === 0) return new Map();
  const ids = [...new Set(familyIds)];
  const [rows, terms, versions, open, writers] = await Promise.all([
    reader
      .select({ family: families, library: libraries })
      .from(families)
      .innerJoin(libraries, eq(libraries.id, families.libraryId))
      .where(inArray(families.id, ids)),
    reader
      .select()
      .from(familyTerms)
      .where(inArray(familyTerms.familyId, ids))
      .orderBy(asc(familyTerms.position)),
    listedVersions(reader, ids),
    openHoldsOf(reader, ids),
    splitsNow(reader, ids),
  ]);
  const cards = new Map<string, CueCard>();
  for (const { family, library } of rows) {
    if (family.listedAt === null) continue;
    const own = terms.filter((term) => term.familyId === family.id);
    const ofKind = (kind: string) => own.filter((term) => term.kind === kind).map((term) => term.term);
    const listed = (versions.get(family.id) ?? []).sort(
      (a, b) =>
        Number(b.recordingId === family.headRecordingId) - Number(a.recordingId === family.headRecordingId),
    );
    const availability = availabilityOf(family.state, open.get(family.id) ?? []);
    cards.set(family.id, {
      familyId: family.id,
      number: family.catalogueNumber,
      title: family.title,
      library: { id: library.id, code: library.code, name: library.name, currency: library.currency },
      writers: (writers.get(family.id) ?? []).map((writer) => writer.name),
      bpm: family.bpm,
      musicalKey: family.musicalKey,
      genre: family.genre,
      terms: {
        genre: ofKind("genre"),
        mood: ofKind("mood"),
        instrument: ofKind("instrument"),
        use: ofKind("use"),
      },
      voice: family.voice,
      voiceLanguage: family.voiceLanguage,
      shape: family.shape,
      density: family.density,
      ending: family.ending,
      durationS: listed[0]?.durationS ?? 0,
      description: family.description,
      sections: family.sections,
      versions: availability.kind === "on sale" ? listed : [],
      availability,
      listedAt: family.listedAt,
    });
  }
  return cards;
}

async function listedVersions(reader: Reader, familyIds: string[]): Promise<Map<string, CueVersion[]>> {
  const rows = await reader
    .select({
      familyId: recordings.familyId,
      recordingId: recordings.id,
      role: recordings.versionRole,
      durationS: recordings.durationS,
      ending: recordings.ending,
      previewKey: recordings.previewKey,
    })
    .from(recordings)
    .where(and(inArray(recordings.familyId, familyIds), eq(recordings.state, "listed")))
    .orderBy(asc(recordings.position));
  const byFamily = new Map<string, CueVersion[]>();
  for (const { familyId, previewKey, ...row } of rows) {
    const version = { ...row, label: versionRoleLabel(row.role), canBeHeard: previewKey !== null };
    byFamily.set(familyId, [...(byFamily.get(familyId) ?? []), version]);
  }
  return byFamily;
}

async function openHoldsOf(reader: Reader, familyIds: string[]) {
  const rows = await reader
    .select({ familyId: holds.familyId, cause: holds.cause, sinceAt: holds.sinceAt })
    .from(holds)
    .where(and(inArray(holds.familyId, familyIds), isNull(holds.endedAt)))
    .orderBy(asc(holds.sinceAt));
  const byFamily = new Map<string, { cause: string; sinceAt: Date }[]>();
  for (const row of rows) byFamily.set(row.familyId, [...(byFamily.get(row.familyId) ?? []), row]);
  return byFamily;
}

function availabilityOf(state: string, open: readonly { cause: string; sinceAt: Date }[]): Availability {
  const first = open[0];
  if (first) {
    const kind =
      first.cause === "exclusive" ? "exclusive" : first.cause === "owner" ? "off sale" : "rights question";
    return { kind, since: first.sinceAt.toISOString() };
  }
  return state === "listed" ? { kind: "on sale" } : { kind: "off sale", since: null };
}
