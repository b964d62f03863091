import { seededRandom, seedOf } from "./random";

/** Two soft tones, the second higher, that say "this is a preview". Hertz, seconds. */
export const MARK_TONES_HZ = [932, 1245] as const;
export const MARK_TONE_S = 0.28;
export const MARK_GAP_S = 0.06;
export const MARK_S = 2 * MARK_TONE_S + MARK_GAP_S;
const FADE_S = 0.05;
/** Trade practice: none in the first 5 s, then irregular, 15 to 25 s apart. */
export const MARK_FREE_S = 5;
const APART_S: readonly [number, number] = [15, 25];
const FIRST_S: readonly [number, number] = [5, 15];

/**
 * Start times of the marks of one recording, the same for every preview of it.
 *
 * Input:   seed  the recording's id
 * Output:  ascending; none that would not fit whole. A file with less than 0.62 s after the first five has none.
 */
export function markTimes(durationS: number, seed: string): number[] {
  const random = seededRandom(seedOf(seed));
  const between = ([low, high]: readonly [number, number]): number => low + (high - low) * random();
  const last = durationS - MARK_S;
  // A short cutdown still gets its one mark.
  let at = Math.min(between(FIRST_S), Math.max(MARK_FREE_S, last - 0.5));
  const times: number[] = [];
  while (at <= last) {
    times.push(at);
    at += between(APART_S);
  }
  return times;
}

/** One mark as samples, peak 1. */
export function markSamples(sampleRateHz: number): Float32Array {
  const tone = Math.round(MARK_TONE_S * sampleRateHz);
  const gap = Math.round(MARK_GAP_S * sampleRateHz);
  const out = new Float32Array(2 * tone + gap);
  MARK_TONES_HZ.forEach((hz, t) => {
    for (let i = 0; i < tone; i++) {
      const edge = Math.min(1, i / (FADE_S * sampleRateHz), (tone - i) / (FADE_S * sampleRateHz));
      const envelope = 0.5 - 0.5 * Math.cos(Math.PI * edge);
      out[t * (tone + gap) + i] = envelope * Math.sin((2 * Math.PI * hz * i) / sampleRateHz);
    }
  });
  return out;
}

/** Adds marks to blocks that pass by in order. */
export class MarkMixer {
  private readonly starts: number[];
  private readonly mark: Float32Array;
  private done = 0;

  constructor(
    timesS: readonly number[],
    sampleRateHz: number,
    private readonly amplitude: number,
  ) {
    this.starts = timesS.map((atS) => Math.round(atS * sampleRateHz));
    this.mark = markSamples(sampleRateHz);
  }

  /** Changes `channels` in place. */
  mix(channels: readonly Float32Array[]): void {
    const frames = channels[0]?.length ?? 0;
    for (const start of this.starts) {
      const from = Math.max(start, this.done);
      const to = Math.min(start + this.mark.length, this.done + frames);
      for (const channel of channels) {
        for (let i = from; i < to; i++) {
          channel[i - this.done] = channel[i - this.done]! + this.amplitude * this.mark[i - start]!;
        }
      }
    }
    this.done += frames;
  }
}
