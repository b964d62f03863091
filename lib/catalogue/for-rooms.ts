import { and, asc, desc, eq, inArray, lte } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { families, libraries, recordings, splitShares, splitVersions } from "@/db/schema/catalogue";

/** Reads that upper rooms use inside their own verbs, after they have decided who may see what. */
export async function libraryById(reader: Reader, id: string) {
  const [row] = await reader.select().from(libraries).where(eq(libraries.id, id));
  return row ?? null;
}

export async function libraryByCode(reader: Reader, code: string) {
  const [row] = await reader.select().from(libraries).where(eq(libraries.code, code));
  return row ?? null;
}

export async function allLibraries(reader: Reader) {
  return reader.select().from(libraries).orderBy(asc(libraries.name));
}

export async function familyById(reader: Reader, id: string) {
  const [row] = await reader.select().from(families).where(eq(families.id, id));
  return row ?? null;
}

export async function recordingById(reader: Reader, id: string) {
  const [row] = await reader.select().from(recordings).where(eq(recordings.id, id));
  return row ?? null;
}

export async function recordingsByIds(reader: Reader, ids: readonly string[]) {
  return ids.length
    ? reader
        .select()
        .from(recordings)
        .where(inArray(recordings.id, [...ids]))
    : [];
}

export async function familiesByIds(reader: Reader, ids: readonly string[]) {
  return ids.length
    ? reader
        .select()
        .from(families)
        .where(inArray(families.id, [...ids]))
    : [];
}

export async function recordingsOfFamily(reader: Reader, familyId: string) {
  return reader
    .select()
    .from(recordings)
    .where(eq(recordings.familyId, familyId))
    .orderBy(asc(recordings.position));
}

/** Recordings with exactly these bytes, in every library: the same file twice is one result. */
export async function recordingsBySha256(reader: Reader, sha256: string) {
  return reader.select().from(recordings).where(eq(recordings.fileSha256, sha256));
}

/** The split valid at an instant, writers before publishers, in their fixed order. */
export async function splitAt(reader: Reader, familyId: string, at: Date) {
  const [version] = await reader
    .select()
    .from(splitVersions)
    .where(and(eq(splitVersions.familyId, familyId), lte(splitVersions.validFrom, at)))
    .orderBy(desc(splitVersions.validFrom), desc(splitVersions.version))
    .limit(1);
  if (!version) return null;
  const shares = await reader
    .select()
    .from(splitShares)
    .where(eq(splitShares.splitVersionId, version.id))
    .orderBy(asc(splitShares.position));
  return {
    splitVersionId: version.id,
    writers: shares.filter((share) => share.side === "writer"),
    publishers: shares.filter((share) => share.side === "publisher"),
  };
}

interface WriterNow {
  personId: string | null;
  name: string;
  shareBps: number;
  /** Null while the writer has been named by somebody else and has not answered. */
  acceptedAt: Date | null;
}

/** The newest split's writers of each family, by family id. */
export async function splitsNow(reader: Reader, familyIds: readonly string[]) {
  if (familyIds.length === 0) return new Map<string, WriterNow[]>();
  const rows = await reader
    .select({
      familyId: splitVersions.familyId,
      version: splitVersions.version,
      side: splitShares.side,
      personId: splitShares.personId,
      name: splitShares.name,
      shareBps: splitShares.shareBps,
      acceptedAt: splitShares.acceptedAt,
    })
    .from(splitShares)
    .innerJoin(splitVersions, eq(splitVersions.id, splitShares.splitVersionId))
    .where(inArray(splitVersions.familyId, [...familyIds]))
    .orderBy(asc(splitVersions.version), asc(splitShares.position));
  const newest = new Map<string, number>();
  for (const row of rows) newest.set(row.familyId, Math.max(row.version, newest.get(row.familyId) ?? 0));
  const byFamily = new Map<string, WriterNow[]>();
  for (const row of rows) {
    if (row.side !== "writer" || row.version !== newest.get(row.familyId)) continue;
    byFamily.set(row.familyId, [
      ...(byFamily.get(row.familyId) ?? []),
      { personId: row.personId, name: row.name, shareBps: row.shareBps, acceptedAt: row.acceptedAt },
    ]);
  }
  return byFamily;
}

export async function familyByCatalogueNumber(reader: Reader, catalogueNumber: string) {
  const [row] = await reader.select().from(families).where(eq(families.catalogueNumber, catalogueNumber));
  return row ?? null;
}
