import { eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader, Tx } from "@/db/client";
import { families, libraries, licensedMasters, recordings } from "@/db/schema/catalogue";
import { NotFound } from "@/lib/kernel/errors";
import { command, query } from "@/lib/kernel/verb";

const RecordingId = z.object({ recordingId: z.string() });

async function rowsOf(reader: Reader, recordingId: string) {
  const [row] = await reader
    .select({ recording: recordings, family: families, library: libraries })
    .from(recordings)
    .innerJoin(families, eq(families.id, recordings.familyId))
    .innerJoin(libraries, eq(libraries.id, recordings.libraryId))
    .where(eq(recordings.id, recordingId));
  if (!row) throw new NotFound();
  return row;
}

/** Everything that making a preview or a licensed master needs of a recording, and what is made already. */
export const readRecordingToRender = query({
  name: "catalogue.readRecordingToRender",
  who: ["system"],
  input: RecordingId,
  authorise: async ({ reader, input }) => rowsOf(reader, input.recordingId),
  run: async ({ reader, subject: { recording, family, library } }) => {
    const [master] = await reader
      .select({ sha256: licensedMasters.sha256 })
      .from(licensedMasters)
      .where(eq(licensedMasters.recordingId, recording.id));
    const isHead = family.headRecordingId === recording.id;
    return {
      fileKey: recording.fileKey,
      fileName: recording.fileName,
      isrc: recording.isrc,
      versionRole: recording.versionRole,
      durationS: recording.durationS,
      loudnessLufs: recording.loudnessLufs,
      loudnessRangeLu: recording.loudnessRangeLu,
      truePeakDbtp: recording.truePeakDbtp,
      createdAt: recording.createdAt,
      title: family.title,
      catalogueNumber: family.catalogueNumber,
      libraryName: library.name,
      previewKey: recording.previewKey,
      masterSha256: master?.sha256 ?? null,
      /** Where each section begins, on the head only: the soundings of its chart. */
      sectionStartsS: isHead ? family.sections.map((section) => section.atS) : [],
    };
  },
});

async function lockRecording(tx: Tx, recordingId: string) {
  const [recording] = await tx
    .select({ id: recordings.id, libraryId: recordings.libraryId, previewKey: recordings.previewKey })
    .from(recordings)
    .where(eq(recordings.id, recordingId))
    .for("update");
  if (!recording) throw new NotFound();
  return recording;
}

/** Keeps the first preview that arrives: `kept` is false where another was there before. */
export const recordPreview = command({
  name: "catalogue.recordPreview",
  who: ["system"],
  input: RecordingId.extend({
    previewKey: z.string().min(1).max(120),
    sectionLoudness: z.array(z.number()).nullable(),
  }),
  authorise: async ({ tx, input }) => lockRecording(tx, input.recordingId),
  run: async ({ tx, input, subject }) => {
    if (subject.previewKey !== null) return { kept: false };
    await tx
      .update(recordings)
      .set({
        previewKey: input.previewKey,
        ...(input.sectionLoudness ? { sectionLoudness: input.sectionLoudness } : {}),
      })
      .where(eq(recordings.id, subject.id));
    return { kept: true };
  },
  audit: ({ subject, result }) => ({ subject: subject.id, libraryId: subject.libraryId, detail: result }),
});

/** CATALOGUE-3: a version has one licensed master, whose bytes never change; a second rendering is not kept. */
export const recordMaster = command({
  name: "catalogue.recordMaster",
  who: ["system"],
  input: RecordingId.extend({
    fileKey: z.string().min(1).max(120),
    sha256: z.string().regex(/^[0-9a-f]{64}$/),
    sizeBytes: z.int().positive(),
    durationSamples: z.int().positive(),
  }),
  authorise: async ({ tx, input }) => lockRecording(tx, input.recordingId),
  run: async ({ tx, input, now }) => {
    const [there] = await tx
      .select({ fileKey: licensedMasters.fileKey })
      .from(licensedMasters)
      .where(eq(licensedMasters.recordingId, input.recordingId));
    if (there) return { kept: false };
    await tx.insert(licensedMasters).values({ ...input, createdAt: now });
    return { kept: true };
  },
  audit: ({ subject, input, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { ...result, sha256: input.sha256 },
  }),
});
