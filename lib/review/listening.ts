import { mkdir, rm } from "node:fs/promises";
import { join } from "node:path";
import { eq } from "drizzle-orm";
import { z } from "zod";
import { alignedListenings } from "@/db/schema/review";
import { AudioError, renderAligned } from "@/lib/audio";
import { recordingById } from "@/lib/catalogue";
import { system } from "@/lib/kernel/actor";
import { env } from "@/lib/kernel/env";
import { NotFound } from "@/lib/kernel/errors";
import { command, open, query } from "@/lib/kernel/verb";
import { hitsByIds, reportedFile } from "@/lib/screening";
import { storeFile, withLocalCopy } from "@/lib/uploads";

const actor = system("review.renderListening");
const PASSAGES_MAX = 12;

export const readListeningSubject = query({
  name: "review.readListeningSubject",
  who: ["system"],
  input: z.object({ hitId: z.string() }),
  authorise: open("only the worker renders"),
  run: async ({ reader, input }) => {
    const [hit] = await hitsByIds(reader, [input.hitId]);
    const recording = hit ? await recordingById(reader, hit.recordingId) : null;
    if (!hit || !recording) throw new NotFound();
    const done = await reader
      .select({ passageId: alignedListenings.passageId })
      .from(alignedListenings)
      .where(eq(alignedListenings.hitId, hit.id));
    const reference = hit.referenceKind === "recording" ? await recordingById(reader, hit.referenceId) : null;
    const referenceFile = reference
      ? { key: reference.fileKey, name: reference.fileName }
      : await reportedFile(reader, hit.referenceKind, hit.referenceId);
    return {
      hit,
      file: { key: recording.fileKey, name: recording.fileName },
      referenceFile,
      done: done.map((row) => row.passageId),
    };
  },
});

export const recordListening = command({
  name: "review.recordListening",
  who: ["system"],
  input: z.object({
    passageId: z.string(),
    hitId: z.string(),
    fileKey: z.string().nullable(),
    render: z.record(z.string(), z.unknown()).nullable(),
  }),
  authorise: open("only the worker renders"),
  run: async ({ tx, input, now }) => {
    const values = { ...input, state: input.fileKey ? "ready" : "impossible", createdAt: now };
    await tx.insert(alignedListenings).values(values).onDuplicateKeyUpdate({ set: values });
    return null;
  },
  audit: ({ input }) => ({ subject: input.hitId, detail: { passageId: input.passageId } }),
});

/** Renders each passage of a hit: the delivery's seconds and the reference's, the alteration undone, in one file. */
export async function renderListening(
  hitId: string,
  progress: (words: string, done: number, of: number) => void,
): Promise<void> {
  const { hit, file, referenceFile, done } = await readListeningSubject(actor, { hitId });
  if (!referenceFile || hit.reversed) return;
  const passages = hit.passages.slice(0, PASSAGES_MAX).filter((passage) => !done.includes(passage.id));
  await withLocalCopy(file.key, file.name, (aPath) =>
    withLocalCopy(referenceFile.key, referenceFile.name, async (bPath) => {
      for (const [index, passage] of passages.entries()) {
        progress("lining up", index, passages.length);
        const outPath = join(env.MEDIA_DIR, "copies", `${passage.id}.flac`);
        await mkdir(join(env.MEDIA_DIR, "copies"), { recursive: true });
        try {
          const render = await renderAligned({
            aPath,
            bPath,
            aStartS: Math.max(0, passage.startS),
            aEndS: passage.endS,
            bStartS: Math.max(0, passage.refStartS),
            bEndS: passage.refEndS,
            // A hit says how the delivery runs against the reference; the rendering asks the other way round.
            speed: 1 / passage.speed,
            pitchSemitones: -passage.pitchSemitones,
            outPath,
          });
          const fileKey = await storeFile(outPath, { name: `${passage.id}.flac`, type: "audio/flac" });
          await recordListening(actor, { passageId: passage.id, hitId, fileKey, render: { ...render } });
        } catch (error) {
          if (!(error instanceof AudioError)) throw error;
          await recordListening(actor, {
            passageId: passage.id,
            hitId,
            fileKey: null,
            render: { reason: error.message },
          });
        } finally {
          await rm(outPath, { force: true });
        }
      }
    }),
  );
}
