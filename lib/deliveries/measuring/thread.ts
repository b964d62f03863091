import { createHash } from "node:crypto";
import { createReadStream } from "node:fs";
import {
  estimateKey,
  estimateTempo,
  type KeyEstimate,
  measureFile,
  packContour,
  soundFeatures,
  type TempoEstimate,
} from "@/lib/audio";
import { serveThread } from "@/lib/kernel/thread-side";

/** Tempo, key and features come from the first minutes: more would not change them, and memory stays bounded. */
const ANALYSED_S_MAX = 360;
const ANALYSIS_RATE_HZ = 11_025;

export interface MeasuredFile {
  sha256: string;
  facts: Record<string, unknown>;
  measures: Record<string, unknown>;
  contour: Uint8Array;
  features: Uint8Array;
  tempo: TempoEstimate | null;
  key: KeyEstimate | null;
}

async function sha256Of(path: string): Promise<string> {
  const hash = createHash("sha256");
  for await (const part of createReadStream(path)) hash.update(part as Buffer);
  return hash.digest("hex");
}

async function measure(
  args: { path: string; limitBytes: number; limitS: number },
  progress: (done: number, of: number, words: string) => void,
): Promise<MeasuredFile> {
  const sha256 = await sha256Of(args.path);
  const analysed = new Float32Array(ANALYSED_S_MAX * ANALYSIS_RATE_HZ);
  let filled = 0;
  const { facts, measures, contour } = await measureFile(args.path, {
    limitBytes: args.limitBytes,
    limitS: args.limitS,
    onMid: (samples) => {
      const part = samples.subarray(0, analysed.length - filled);
      analysed.set(part, filled);
      filled += part.length;
    },
    onProgress: (done, total) => progress(done, total ?? 0, "measuring"),
  });
  const mid = analysed.subarray(0, filled);
  const features = soundFeatures(mid);
  return {
    sha256,
    facts: plain(facts),
    measures: plain(measures),
    contour: packContour(contour),
    features: new Uint8Array(features.buffer, features.byteOffset, features.byteLength).slice(),
    tempo: estimateTempo(mid),
    key: estimateKey(mid),
  };
}

/** As the database keeps it; a Broadcast Wave's time reference is a count that a number may not hold. */
const plain = (value: unknown): Record<string, unknown> =>
  JSON.parse(
    JSON.stringify(value, (_name, one: unknown) => (typeof one === "bigint" ? String(one) : one)),
  ) as Record<string, unknown>;

serveThread({ measure });
