import { chmod, copyFile, mkdtemp, open, rm, stat } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { PassThrough, type Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import type { ContainerFacts } from "./container-facts";
import {
  assertComplete,
  type Decoded,
  type DecodeOptions,
  type DecodeOutcome,
  decodeSource,
  LIMIT_BYTES,
  type OnBlock,
  runDecode,
} from "./decode-source";
import { TooLarge } from "./errors";
import { openFileSource } from "./file-source";
import { descriptorPath, runFfmpeg } from "./native";
import { convertPcm } from "./pcm-reader";
import { probeSource } from "./probe-source";

export interface FileDecodeOptions extends DecodeOptions {
  limitBytes?: number;
  /** From an earlier probe of the same file; saves a second look at its header. */
  facts?: ContainerFacts;
}

/** A native decoder gets this long for an hour of audio, and at least the minimum. */
const NATIVE_MS_PER_S = 60;
const NATIVE_MS_MIN = 60_000;

/**
 * Decodes a file of any length in bounded memory. See decodeSource; this adds the size limit and an ffmpeg child for
 * what cannot be streamed in this process (MP4 with its index at the end, ALAC).
 *
 * Throws:  NotAudio, UnsupportedAudio, TooLarge, TooLong. Damage does not throw: read `complete`.
 */
export async function decodeStream(
  path: string,
  onBlock: OnBlock,
  options: FileDecodeOptions = {},
): Promise<DecodeOutcome> {
  const source = await openFileSource(path);
  try {
    const limitBytes = options.limitBytes ?? LIMIT_BYTES;
    if (source.sizeBytes > limitBytes) throw new TooLarge(source.sizeBytes, limitBytes);
    const facts = options.facts ?? (await probeSource(source));
    if (facts.container === "M4A" && (facts.indexAtEnd || facts.codec === "ALAC")) {
      return await decodeNative(path, facts, onBlock, options);
    }
    return await decodeSource(source, facts, onBlock, options);
  } finally {
    await source.close();
  }
}

/** Everything at once, for short files. Throws Truncated or Damaged rather than return a part. */
export async function decodeWhole(
  path: string,
  options: FileDecodeOptions = {},
): Promise<{ channels: Float32Array[]; sampleRateHz: number; durationS: number }> {
  const blocks: Float32Array[][] = [];
  const outcome = await decodeStream(
    path,
    (channels) => {
      blocks.push(channels.map((channel) => channel.slice()));
    },
    options,
  );
  assertComplete(outcome);
  const channels = Array.from({ length: outcome.channels }, (_, c) => {
    const whole = new Float32Array(outcome.samples);
    let at = 0;
    for (const block of blocks) {
      whole.set(block[c]!, at);
      at += block[c]!.length;
    }
    return whole;
  });
  return { channels, sampleRateHz: outcome.sampleRateHz, durationS: outcome.readableS };
}

async function decodeNative(
  path: string,
  facts: ContainerFacts,
  onBlock: OnBlock,
  options: DecodeOptions,
): Promise<DecodeOutcome> {
  const shared = await readableByChild(path);
  const input = await open(shared.path, "r");
  const through = new PassThrough();
  const child = runFfmpeg({
    args: [
      ...["-i", descriptorPath(0), "-map", "0:a:0", "-f", "f32le", "-c:a", "pcm_f32le"],
      ...["-ac", String(facts.channels), "-ar", String(facts.sampleRateHz), "pipe:1"],
    ],
    input,
    timeoutMs: Math.max(NATIVE_MS_MIN, (facts.declaredS ?? 0) * NATIVE_MS_PER_S),
    drain: (stdout) => pipeline(stdout, through, { end: false }),
  }).then(
    () => through.end(),
    (error: Error) => through.destroy(error),
  );
  try {
    return await runDecode(floatBlocks(through, facts.channels), facts, onBlock, options);
  } finally {
    through.destroy();
    await child;
    await input.close();
    await shared.remove();
  }
}

/** The child reopens its input as an unprivileged user; a file that only its owner may read is copied for it. */
async function readableByChild(path: string): Promise<{ path: string; remove: () => Promise<void> }> {
  const asRoot = process.getuid?.() === 0;
  if (!asRoot || ((await stat(path)).mode & 0o004) !== 0) return { path, remove: async () => {} };
  const folder = await mkdtemp(join(tmpdir(), "decode-"));
  const copy = join(folder, "input");
  await copyFile(path, copy);
  await chmod(copy, 0o644);
  return { path: copy, remove: () => rm(folder, { recursive: true, force: true }) };
}

async function* floatBlocks(stream: Readable, width: number): AsyncGenerator<Decoded> {
  const frameBytes = 4 * width;
  let rest = new Uint8Array(0);
  for await (const chunk of stream as AsyncIterable<Uint8Array>) {
    const bytes = new Uint8Array(rest.length + chunk.length);
    bytes.set(rest);
    bytes.set(chunk, rest.length);
    const frames = Math.floor(bytes.length / frameBytes);
    const channels = Array.from({ length: width }, () => new Float32Array(frames));
    const broken = convertPcm(bytes, { ...FLOAT_PIPE, channels: width, frames }, frames, channels);
    rest = bytes.subarray(frames * frameBytes);
    yield { channels, broken };
  }
}

const FLOAT_PIPE = { kind: "float", bytesPerSample: 4, littleEndian: true, dataOffset: 0 } as const;
