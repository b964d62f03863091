import { type ContainerFacts, ENDINGS, type Ending, type Measures, technicalChecks } from "@/lib/audio";
import { genres } from "@/lib/catalogue/vocabularies";
import { system } from "@/lib/kernel/actor";
import { ThreadError, ThreadHost } from "@/lib/kernel/thread";
import { withLocalCopy } from "@/lib/uploads";
import { readVersionToMeasure, recordMeasurement, recordUnreadable } from "../record-measurement";
import type { MeasuredFile } from "./thread";

const LIMIT_BYTES = 8 * 2 ** 30;
const LIMIT_S = 4.25 * 3600;
const THREAD_MB = 768;
const actor = system("delivery.measure");
let thread: ThreadHost | null = null;

export async function closeMeasuring(): Promise<void> {
  await thread?.close();
  thread = null;
}

/** Measures one delivered file, or only judges it again where it was measured and its role has changed. */
export async function measureVersion(
  versionId: string,
  progress: (words: string, done: number, of: number) => void,
  isLast: boolean,
): Promise<void> {
  const version = await readVersionToMeasure(actor, { versionId });
  const judge = (facts: unknown, measures: unknown) =>
    technicalChecks(facts as ContainerFacts, measures as Measures, {
      versionRole: version.versionRole,
      endingDeclared: isEnding(version.ending) ? version.ending : null,
      ...(version.genre ? { genre: genreLabel(version.genre) } : {}),
    }).map((check) => ({ ...check }));
  if (version.facts && version.measures && version.sha256) {
    await recordMeasurement(actor, {
      versionId,
      sha256: version.sha256,
      checks: judge(version.facts, version.measures),
    });
    return;
  }
  thread ??= new ThreadHost(new URL("./thread.ts", import.meta.url), THREAD_MB);
  const host = thread;
  try {
    const measured = await withLocalCopy(version.fileKey, version.fileName, (path) =>
      host.call<MeasuredFile>(
        "measure",
        { path, limitBytes: LIMIT_BYTES, limitS: LIMIT_S },
        { timeoutS: 3600, onProgress: (done, of, words) => progress(words, done, of) },
      ),
    );
    const { tempo, key, ...rest } = measured;
    await recordMeasurement(actor, {
      versionId,
      ...rest,
      measures: { ...measured.measures, tempo, key },
      checks: judge(measured.facts, measured.measures),
    });
  } catch (error) {
    if (error instanceof ThreadError && typeof (error.data as { code?: unknown }).code === "string") {
      await recordUnreadable(actor, { versionId, words: error.message });
      return;
    }
    if (isLast)
      await recordUnreadable(actor, {
        versionId,
        words:
          "This file could not be measured: it took too long or too much memory. Please export it again, or write to the library.",
      });
    throw error;
  }
}

/** The checks know genres by their names, the form keeps their ids. */
const genreLabel = (id: string) => genres.find((genre) => genre.id === id)?.label ?? id;

const isEnding = (value: string | null): value is Ending =>
  value !== null && (ENDINGS as readonly string[]).includes(value);
