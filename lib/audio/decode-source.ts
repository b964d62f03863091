import { FLACDecoder } from "@wasm-audio-decoders/flac";
import { decodeChunked } from "audio-decode";
import { type ByteSource, sourceChunks } from "./byte-source";
import type { ContainerFacts } from "./container-facts";
import { Damaged, TooLong, Truncated, UnsupportedAudio } from "./errors";
import { readPcm } from "./pcm-reader";

/** Called with planar blocks, in order. The arrays may be reused after it returns (or its promise settles). */
export type OnBlock = (channels: Float32Array[], offsetSamples: number) => void | Promise<void>;

export interface DecodeOptions {
  /** Refuses with TooLong as soon as more than this has been decoded. */
  limitS?: number;
  signal?: AbortSignal;
}

export interface DecodeOutcome {
  sampleRateHz: number;
  channels: number;
  samples: number;
  readableS: number;
  declaredS: number | null;
  /** False if the file is cut short or damaged; `problem` then says how. */
  complete: boolean;
  problem: "truncated" | "damaged" | null;
  what: string;
  /** Float samples that were no number, or far over any sound; they were read as silence. */
  brokenSamples: number;
}

export interface Decoded {
  channels: Float32Array[];
  broken: number;
  /** Set when the decoder itself complained. */
  error?: string;
}

/** 4 h 15 min: the product's limit of length, settable. */
export const LIMIT_S = 15_300;
/** 8 GiB: the product's limit of size, settable. */
export const LIMIT_BYTES = 8 * 2 ** 30;

/**
 * A lossy stream may end a frame or two beside its declared length (priming, the last partial frame); damage in the
 * middle of one loses 0.1 s or more (measured on MP3, Ogg and M4A with 4 kB of noise).
 */
const LOSSY_TOLERANCE_S = 0.08;
/** A browser holds a whole MP4 whose index is at its end; more than this is left to the server. */
const WHOLE_BYTES_MAX = 64 << 20;

/**
 * Decodes any readable container block by block and compares what came out with what its header declares.
 *
 * Input:   source and the facts that probeSource found for it
 * Output:  blocks of planar Float32 at the file's own rate through `onBlock`; the outcome says whether it was whole
 * Edges:   never more than one block in memory. Damage does not throw: `complete` is false and `readableS` is the
 *          time up to which samples came out. A file of no samples is complete if it declares none.
 * Error:   linear containers and FLAC exact to the bit; lossy ones as their decoder gives them
 * Throws:  TooLong, UnsupportedAudio
 */
export async function decodeSource(
  source: ByteSource,
  facts: ContainerFacts,
  onBlock: OnBlock,
  options: DecodeOptions = {},
): Promise<DecodeOutcome> {
  return runDecode(decodedBlocks(source, facts), facts, onBlock, options);
}

/** The loop shared by every decoder: limits, one width of channels, and the comparison at the end. */
export async function runDecode(
  blocks: AsyncIterable<Decoded>,
  facts: ContainerFacts,
  onBlock: OnBlock,
  options: DecodeOptions,
): Promise<DecodeOutcome> {
  const limitS = options.limitS ?? LIMIT_S;
  if (facts.declaredS !== null && facts.declaredS > limitS) throw new TooLong(facts.declaredS, limitS);
  let samples = 0;
  let given = 0;
  let brokenSamples = 0;
  let complaint: string | null = null;
  try {
    for await (const block of blocks) {
      options.signal?.throwIfAborted();
      brokenSamples += block.broken;
      complaint ??= block.error ?? null;
      const frames = block.channels[0]?.length ?? 0;
      if (frames === 0) continue;
      if ((samples + frames) / facts.sampleRateHz > limitS) {
        throw new TooLong((samples + frames) / facts.sampleRateHz, limitS);
      }
      // A lossy decoder's last frame runs past the declared end: those samples are coding, not music.
      const end = facts.lossless
        ? Number.POSITIVE_INFINITY
        : (facts.declaredSamples ?? Number.POSITIVE_INFINITY);
      const take = Math.max(0, Math.min(frames, end - given));
      if (take > 0) {
        const width = widen(block.channels, facts.channels);
        try {
          await onBlock(take === frames ? width : width.map((channel) => channel.subarray(0, take)), given);
        } catch (cause) {
          throw new ListenerError("the receiver of the samples failed", { cause });
        }
      }
      given += take;
      samples += frames;
    }
  } catch (error) {
    if (error instanceof ListenerError) throw error.cause;
    if (error instanceof TooLong || error instanceof UnsupportedAudio || options.signal?.aborted) throw error;
    if (isSystemFault(error)) throw error;
    complaint = error instanceof Error ? error.message : String(error);
  }
  return judge(facts, samples, given, brokenSamples, complaint);
}

/** Keeps a fault of the receiver apart from a fault of the file. */
class ListenerError extends Error {}

/** A failed read or a missing program says nothing about the file: it must not be reported as damage. */
function isSystemFault(error: unknown): boolean {
  for (let at: unknown = error, depth = 0; at instanceof Error && depth < 4; at = at.cause, depth++) {
    if ("syscall" in at) return true;
  }
  return false;
}

/** A decoder may give one channel while both are silent (stereo MP3 with a quiet start); the header decides. */
function widen(channels: Float32Array[], width: number): Float32Array[] {
  if (channels.length === width) return channels;
  return Array.from({ length: width }, (_, c) => channels[c] ?? channels[0]!);
}

function judge(
  facts: ContainerFacts,
  samples: number,
  given: number,
  brokenSamples: number,
  complaint: string | null,
): DecodeOutcome {
  const readableS = given / facts.sampleRateHz;
  const declared = facts.declaredSamples;
  const outcome = {
    sampleRateHz: facts.sampleRateHz,
    channels: facts.channels,
    samples: given,
    readableS,
    declaredS: facts.truncated ? facts.truncated.declaredS : facts.declaredS,
    brokenSamples,
  };
  if (facts.truncated) {
    return { ...outcome, complete: false, problem: "truncated", what: "the file ends before its samples do" };
  }
  const tolerance = facts.lossless ? 0 : LOSSY_TOLERANCE_S * facts.sampleRateHz;
  const off = declared === null ? 0 : samples - declared;
  if (complaint !== null || Math.abs(off) > tolerance) {
    const what = complaint ?? (off < 0 ? "samples are missing" : "more samples than declared");
    return { ...outcome, complete: false, problem: "damaged", what };
  }
  return { ...outcome, complete: true, problem: null, what: "" };
}

/** Turns an incomplete outcome into its typed refusal. */
export function assertComplete(outcome: DecodeOutcome): void {
  if (outcome.complete) return;
  if (outcome.problem === "truncated") throw new Truncated(outcome.readableS, outcome.declaredS);
  throw new Damaged(outcome.readableS, outcome.declaredS, outcome.what);
}

export async function* decodedBlocks(source: ByteSource, facts: ContainerFacts): AsyncGenerator<Decoded> {
  if (facts.pcm) yield* readPcm(source, facts.pcm);
  else if (facts.codec === "FLAC") yield* flacBlocks(source, facts);
  else yield* packageBlocks(source, facts);
}

async function* flacBlocks(source: ByteSource, facts: ContainerFacts): AsyncGenerator<Decoded> {
  const decoder = new FLACDecoder();
  await decoder.ready;
  try {
    for await (const chunk of sourceChunks(source, facts.streamOffset)) {
      yield flacDecoded(await decoder.decode(chunk));
    }
    yield flacDecoded(await decoder.flush());
  } finally {
    decoder.free();
  }
}

function flacDecoded(out: Awaited<ReturnType<FLACDecoder["decode"]>>): Decoded {
  const first = out.errors[0];
  if (out.samplesDecoded > 0) for (const channel of out.channelData) toFullScale(channel, out.bitDepth);
  return {
    channels: out.samplesDecoded > 0 ? out.channelData : [],
    broken: 0,
    ...(first ? { error: `a FLAC frame does not decode: ${first.message}` } : {}),
  };
}

/**
 * FLACDecoder divides by 2^(bits − 1) − 1; every other reader here by 2^(bits − 1). The integer is found again exactly
 * (float32 holds 24 bits), so that a FLAC and the WAV it was made from give the same samples.
 */
function toFullScale(channel: Float32Array, bits: number): void {
  if (!(bits >= 4 && bits <= 24)) return;
  const full = 2 ** (bits - 1);
  for (let i = 0; i < channel.length; i++) channel[i] = Math.round(channel[i]! * (full - 1)) / full;
}

const PACKAGE_FORMATS = {
  MP3: "mp3",
  AAC: "aac",
  M4A: "m4a",
  "Ogg Vorbis": "oga",
  "Ogg Opus": "opus",
} as const;

async function* packageBlocks(source: ByteSource, facts: ContainerFacts): AsyncGenerator<Decoded> {
  const format = PACKAGE_FORMATS[facts.container as keyof typeof PACKAGE_FORMATS];
  if (!format || facts.codec === "ALAC") throw new UnsupportedAudio(`${facts.codec} in ${facts.container}`);
  if (facts.indexAtEnd && facts.sizeBytes > WHOLE_BYTES_MAX) {
    throw new UnsupportedAudio("an MP4 of this size with its index at the end");
  }
  const chunkBytes = facts.indexAtEnd ? facts.sizeBytes : 1 << 16;
  const chunks = sourceChunks(source, facts.streamOffset, facts.sizeBytes, chunkBytes);
  for await (const { channelData } of decodeChunked(chunks, format)) {
    yield { channels: channelData, broken: 0 };
  }
}
