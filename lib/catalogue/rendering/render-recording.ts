import { randomUUID } from "node:crypto";
import { mkdir, rm } from "node:fs/promises";
import { join } from "node:path";
import { system } from "@/lib/kernel/actor";
import { env } from "@/lib/kernel/env";
import { ThreadHost } from "@/lib/kernel/thread";
import { deleteStored, storeFile, withLocalCopy } from "@/lib/uploads";
import { versionRoleLabel } from "../version-roles";
import { readRecordingToRender, recordMaster, recordPreview } from "./record-rendering";
import type { MasterFile, MasterRequest, PreviewRequest } from "./thread";

const THREAD_MB = 768;
const TIMEOUT_S = 3600;
const actor = system("catalogue.render");
let thread: ThreadHost | null = null;

export async function closeRendering(): Promise<void> {
  await thread?.close();
  thread = null;
}

function host(): ThreadHost {
  thread ??= new ThreadHost(new URL("./thread.ts", import.meta.url), THREAD_MB);
  return thread;
}

/** Makes and keeps the preview of a recording; done already, it does nothing. */
export async function renderRecordingPreview(recordingId: string): Promise<void> {
  const recording = await readRecordingToRender(actor, { recordingId });
  if (recording.previewKey !== null) return;
  await withOutput(".mp3", async (outPath) => {
    const request: Omit<PreviewRequest, "path"> = {
      outPath,
      recordingId,
      loudness: { integratedLufs: recording.loudnessLufs, truePeakDbtp: recording.truePeakDbtp },
      sectionStartsS: recording.sectionStartsS,
    };
    const { sectionLoudness } = await withLocalCopy(recording.fileKey, recording.fileName, (path) =>
      host().call<{ sectionLoudness: number[] | null }>(
        "preview",
        { ...request, path },
        { timeoutS: TIMEOUT_S },
      ),
    );
    const previewKey = await storeFile(outPath, {
      name: `preview-${recordingId}-${randomUUID()}.mp3`,
      type: "audio/mpeg",
    });
    await keepOrDelete(previewKey, () => recordPreview(actor, { recordingId, previewKey, sectionLoudness }));
  });
}

/** Renders the one licensed master of a recording; rendered already, it does nothing. */
export async function renderLicensedMaster(recordingId: string): Promise<void> {
  const recording = await readRecordingToRender(actor, { recordingId });
  if (recording.masterSha256 !== null) return;
  const [date = "", time = ""] = recording.createdAt.toISOString().split("T");
  const bext: MasterRequest["bext"] = {
    description: `${recording.title}, ${versionRoleLabel(recording.versionRole)} (${recording.catalogueNumber})`,
    originator: recording.libraryName,
    originatorReference: recording.isrc ?? recordingId.slice(4),
    originationDate: date,
    originationTime: time.slice(0, 8),
    loudnessLufs: recording.loudnessLufs,
    loudnessRangeLu: recording.loudnessRangeLu,
    maxTruePeakDbtp: recording.truePeakDbtp,
  };
  await withOutput(".wav", async (outPath) => {
    const made = await withLocalCopy(recording.fileKey, recording.fileName, (path) =>
      host().call<MasterFile>("master", { path, outPath, bext }, { timeoutS: TIMEOUT_S }),
    );
    const fileKey = await storeFile(outPath, {
      name: `master-${recordingId}-${randomUUID()}.wav`,
      type: "audio/wav",
    });
    await keepOrDelete(fileKey, () =>
      recordMaster(actor, {
        recordingId,
        fileKey,
        sha256: made.sha256,
        sizeBytes: made.bytes,
        durationSamples: made.samples,
      }),
    );
  });
}

async function withOutput(extension: string, work: (path: string) => Promise<void>): Promise<void> {
  const folder = join(env.MEDIA_DIR, "renders");
  await mkdir(folder, { recursive: true });
  const path = join(folder, `${randomUUID()}${extension}`);
  try {
    await work(path);
  } finally {
    await rm(path, { force: true });
  }
}

/** Of two renderings that raced, the first stays and the other leaves no file behind. */
async function keepOrDelete(key: string, record: () => Promise<{ kept: boolean }>): Promise<void> {
  const { kept } = await record();
  if (!kept) await deleteStored([key]);
}
