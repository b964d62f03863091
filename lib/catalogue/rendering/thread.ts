import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";
import { type BextInput, decodeStream, encodePreview, LoudnessMeter, probe, renderMaster } from "@/lib/audio";
import { serveThread } from "@/lib/kernel/thread-side";

export interface PreviewRequest {
  path: string;
  outPath: string;
  recordingId: string;
  loudness: { integratedLufs: number | null; truePeakDbtp: number | null };
  sectionStartsS: readonly number[];
}

export interface MasterRequest {
  path: string;
  outPath: string;
  bext: BextInput;
}

export interface MasterFile {
  samples: number;
  bytes: number;
  sha256: string;
}

/** Silence has no loudness; it is drawn as the floor of the measure. */
const FLOOR_LUFS = -70;

async function preview(request: PreviewRequest): Promise<{ sectionLoudness: number[] | null }> {
  await encodePreview(request.path, request.outPath, {
    seed: request.recordingId,
    loudness: request.loudness,
  });
  if (request.sectionStartsS.length === 0) return { sectionLoudness: null };
  return { sectionLoudness: await loudnessBySection(request.path, request.sectionStartsS) };
}

/** Integrated loudness of each section of the master, the last ending with the file. */
async function loudnessBySection(path: string, startsS: readonly number[]): Promise<number[]> {
  const facts = await probe(path);
  const edges = startsS.map((startS) => Math.round(startS * facts.sampleRateHz));
  const meters = edges.map(() => new LoudnessMeter(facts.sampleRateHz, facts.channels));
  let done = 0;
  await decodeStream(
    path,
    (block) => {
      const length = block[0]?.length ?? 0;
      for (const [index, meter] of meters.entries()) {
        const from = Math.max(0, (edges[index] ?? 0) - done);
        const to = Math.min(length, (edges[index + 1] ?? Number.POSITIVE_INFINITY) - done);
        if (from < to) meter.push(block.map((channel) => channel.subarray(from, to)));
      }
      done += length;
    },
    { facts },
  );
  return meters.map((meter) => Math.round((meter.finish().integratedLufs ?? FLOOR_LUFS) * 10) / 10);
}

async function master(request: MasterRequest): Promise<MasterFile> {
  const { samples, bytes } = await renderMaster(request.path, request.outPath, request.bext);
  const hash = createHash("sha256");
  for await (const part of createReadStream(request.outPath)) hash.update(part as Buffer);
  return { samples, bytes, sha256: hash.digest("hex") };
}

serveThread({ preview, master });
