import type { ContainerFacts } from "./container-facts";
import { type Contour, createContour } from "./contour";
import { assertComplete, type DecodeOutcome, LIMIT_BYTES, LIMIT_S } from "./decode-source";
import { decodeStream } from "./decode-stream";
import { TooLarge } from "./errors";
import { createMeter, type Measures } from "./meter";
import { probe } from "./probe";
import { createMonoResampler, createResampler } from "./resample";

/** Called with blocks of mono 11,025 Hz; the array is the receiver's to keep. */
export type OnAnalysis = (samples: Float32Array) => void | Promise<void>;

export interface MeasureOptions {
  limitBytes?: number;
  limitS?: number;
  /** (L + R) / 2, left and right at 11,025 Hz. A mono file gives the same samples three times. */
  onMid?: OnAnalysis;
  onLeft?: OnAnalysis;
  onRight?: OnAnalysis;
  /** About ten times for any file, and at the end. `totalS` is null where the file declares no length. */
  onProgress?: (secondsRead: number, totalS: number | null) => void;
  /** Measure what can be read of a cut or damaged file instead of throwing. */
  allowIncomplete?: boolean;
  signal?: AbortSignal;
}

export interface Measured {
  facts: ContainerFacts;
  outcome: DecodeOutcome;
  measures: Measures;
  contour: Contour;
}

/**
 * One streaming pass over a delivered file: header, every measure, contours, and the mono streams that fingerprints
 * and features are made from.
 *
 * Cost:    memory bounded whatever the length (ten loudness values and at most 20 contour bins a second)
 * Throws:  NotAudio, UnsupportedAudio, TooLarge, TooLong; Truncated and Damaged unless `allowIncomplete`.
 *          By then the callbacks may have had a part: their receivers must drop it.
 */
export async function measureFile(path: string, options: MeasureOptions = {}): Promise<Measured> {
  const limitBytes = options.limitBytes ?? LIMIT_BYTES;
  const limitS = options.limitS ?? LIMIT_S;
  const facts = await probe(path);
  if (facts.sizeBytes > limitBytes) throw new TooLarge(facts.sizeBytes, limitBytes);
  const meter = createMeter(facts.sampleRateHz, facts.channels);
  const contour = createContour(facts.sampleRateHz, facts.channels, facts.declaredS ?? 0);
  const analysis = new AnalysisStreams(facts, options);
  const progressS = Math.max(1, (facts.declaredS ?? 0) / 10);
  let reportedS = 0;
  const outcome = await decodeStream(
    path,
    async (channels, offsetSamples) => {
      meter.push(channels);
      contour.push(channels);
      await analysis.push(channels);
      const readS = (offsetSamples + channels[0]!.length) / facts.sampleRateHz;
      if (readS - reportedS >= progressS) {
        reportedS = readS;
        options.onProgress?.(readS, facts.declaredS);
      }
    },
    { limitBytes, limitS, facts, ...(options.signal ? { signal: options.signal } : {}) },
  );
  if (!options.allowIncomplete) assertComplete(outcome);
  await analysis.finish();
  options.onProgress?.(outcome.readableS, facts.declaredS);
  return { facts, outcome, measures: meter.finish(), contour: contour.finish() };
}

interface MonoStream {
  push(samples: Float32Array): Float32Array;
  finish(): Float32Array;
}

/** Resamples left and right once; their mean is the middle. Only what is asked for is computed. */
class AnalysisStreams {
  private readonly left: MonoStream | null;
  private readonly right: MonoStream | null;
  private readonly wide: ReturnType<typeof createResampler> | null;
  private readonly mono: boolean;

  constructor(
    facts: ContainerFacts,
    private readonly options: MeasureOptions,
  ) {
    const { onMid, onLeft, onRight } = options;
    this.mono = facts.channels === 1;
    const stereoMid = onMid !== undefined && facts.channels === 2;
    const rate = facts.sampleRateHz;
    this.left = onLeft || stereoMid || (this.mono && (onMid || onRight)) ? createMonoResampler(rate) : null;
    this.right = !this.mono && (onRight || stereoMid) ? createMonoResampler(rate) : null;
    this.wide = onMid && facts.channels > 2 ? createResampler(rate, "mid") : null;
  }

  async push(channels: readonly Float32Array[]): Promise<void> {
    await this.give(
      this.left?.push(channels[0]!) ?? null,
      this.right?.push(channels[1]!) ?? null,
      this.wide?.push(channels) ?? null,
    );
  }

  async finish(): Promise<void> {
    await this.give(this.left?.finish() ?? null, this.right?.finish() ?? null, this.wide?.finish() ?? null);
  }

  private async give(
    left: Float32Array | null,
    right: Float32Array | null,
    wide: Float32Array | null,
  ): Promise<void> {
    const { onMid, onLeft, onRight } = this.options;
    if (onMid) await onMid(wide ?? (this.mono ? left!.slice() : mean(left!, right!)));
    if (onRight) await onRight(this.mono ? left!.slice() : right!);
    if (onLeft) await onLeft(left!);
  }
}

function mean(a: Float32Array, b: Float32Array): Float32Array {
  const out = new Float32Array(a.length);
  for (let i = 0; i < out.length; i++) out[i] = 0.5 * (a[i]! + b[i]!);
  return out;
}
