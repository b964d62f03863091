import { kaiser } from "./kaiser";

/** The rate at which fingerprints, tempo, key and features are computed. */
export const ANALYSIS_RATE_HZ = 11025;

/** Highest frequency kept by the half-band stages, and the edge above which the last stage lets nothing fold. */
const HALF_KEEP_HZ = 6500;
const LAST_STOP_HZ = 6500;
const LAST_PASS_HZ = 4500;
const STOP_DB = 86;

export interface Resampler {
  /** Samples that are ready; the array is new and the caller's. */
  push(samples: Float32Array): Float32Array;
  /** What is left. Call once. */
  finish(): Float32Array;
}

export type Take = "mid" | "left" | "right";

/**
 * One channel to 11,025 Hz, streaming: half-band filters while the rate allows, then one polyphase filter.
 *
 * Source:  Kaiser's window design (J. F. Kaiser 1974): taps ≈ (A − 8) / (2.285 Δω), A in dB, Δω in rad per sample.
 * Input:   blocks of any size at `fromHz`
 * Output:  out[n] is the signal at n / 11025 s (the filters' delay is taken out); ceil(N · 11025 / fromHz) samples
 * Edges:   zeros are assumed before the first and after the last sample; fromHz = 11025 passes through
 * Error:   ≤ 0.2 dB at 4 kHz; from 6.5 kHz up aliases lie ≤ −80 dB (tested); 5.5–6.5 kHz folds into 4.5–5.5 kHz
 * Throws:  RangeError if fromHz is not in [4000, 384000]
 */
export function createMonoResampler(fromHz: number): Resampler {
  if (!(fromHz >= 4000 && fromHz <= 384000)) {
    throw new RangeError(`fromHz must be in [4000, 384000], got ${fromHz}`);
  }
  const stages: Stage[] = [];
  let rateHz = fromHz;
  while (rateHz / 2 >= 2 * ANALYSIS_RATE_HZ) {
    stages.push(new Stage(1, 2, halfBandTaps(rateHz)));
    rateHz /= 2;
  }
  if (rateHz !== ANALYSIS_RATE_HZ) {
    const divisor = gcd(ANALYSIS_RATE_HZ * 2, rateHz * 2);
    const up = (ANALYSIS_RATE_HZ * 2) / divisor;
    stages.push(new Stage(up, (rateHz * 2) / divisor, lastTaps(rateHz, up)));
  }
  let taken = 0;
  let given = 0;
  return {
    push(samples) {
      taken += samples.length;
      const out = stages.reduce((block, stage) => stage.push(block), samples);
      given += out.length;
      return stages.length === 0 ? out.slice() : out;
    },
    finish() {
      const total = Math.ceil((taken * ANALYSIS_RATE_HZ) / fromHz - 1e-9);
      let tail: Float32Array = new Float32Array(0);
      for (const stage of stages) tail = stage.finish(tail);
      const missing = Math.max(0, total - given);
      if (tail.length >= missing) return tail.subarray(0, missing);
      const padded = new Float32Array(missing);
      padded.set(tail);
      return padded;
    },
  };
}

/**
 * The middle (L + R) / 2, left or right of a stream as mono 11,025 Hz. See createMonoResampler.
 *
 * Edges:   mono input gives itself for all three; with more than two channels the middle is their mean
 */
export function createResampler(
  fromHz: number,
  take: Take = "mid",
): { push(channels: readonly Float32Array[]): Float32Array; finish(): Float32Array } {
  const mono = createMonoResampler(fromHz);
  return {
    push: (channels) => mono.push(takeChannel(channels, take)),
    finish: () => mono.finish(),
  };
}

export function takeChannel(channels: readonly Float32Array[], take: Take): Float32Array {
  const first = channels[0] ?? new Float32Array(0);
  if (channels.length < 2 || take === "left") return first;
  if (take === "right") return channels[1]!;
  const mid = new Float32Array(first.length);
  const share = 1 / channels.length;
  for (const channel of channels) {
    for (let i = 0; i < mid.length; i++) mid[i] = mid[i]! + share * channel[i]!;
  }
  return mid;
}

/** Rational polyphase stage: out[m] = Σ_k taps[k] · x_up[m·down + centre − k], x_up with `up − 1` zeros between. */
class Stage {
  private readonly phases: Float32Array[];
  private readonly phaseTaps: number;
  private history: Float32Array;
  private filled: number;
  /** Position of the next output in upsampled ticks, relative to history[phaseTaps − 1]. */
  private tick: number;

  constructor(
    private readonly up: number,
    private readonly down: number,
    taps: Float64Array,
  ) {
    this.phaseTaps = Math.ceil(taps.length / up);
    this.phases = Array.from({ length: up }, (_, phase) => {
      const row = new Float32Array(this.phaseTaps);
      // Stored reversed, so that the inner loop walks samples and taps in the same direction.
      for (let k = 0; k < this.phaseTaps; k++) row[this.phaseTaps - 1 - k] = taps[phase + k * up] ?? 0;
      return row;
    });
    this.history = new Float32Array(this.phaseTaps - 1 + 4096);
    this.filled = this.phaseTaps - 1;
    this.tick = (taps.length - 1) / 2;
  }

  push(samples: Float32Array): Float32Array {
    const need = this.filled + samples.length;
    if (need > this.history.length) {
      const grown = new Float32Array(need + 4096);
      grown.set(this.history.subarray(0, this.filled));
      this.history = grown;
    }
    this.history.set(samples, this.filled);
    this.filled = need;
    const { up, down, phaseTaps, history } = this;
    const ready = (this.filled - phaseTaps + 1) * up;
    const count = Math.max(0, Math.ceil((ready - this.tick) / down));
    const out = new Float32Array(count);
    for (let m = 0, tick = this.tick; m < count; m++, tick += down) {
      const start = Math.floor(tick / up);
      const row = this.phases[tick - start * up]!;
      let sum = 0;
      for (let k = 0; k < phaseTaps; k++) sum += row[k]! * history[start + k]!;
      out[m] = sum;
    }
    this.tick += count * down;
    const drop = Math.min(Math.floor(this.tick / up), this.filled - phaseTaps + 1);
    if (drop > 0) {
      history.copyWithin(0, drop, this.filled);
      this.filled -= drop;
      this.tick -= drop * up;
    }
    return out;
  }

  finish(last: Float32Array): Float32Array {
    const padded = new Float32Array(last.length + this.phaseTaps);
    padded.set(last);
    return this.push(padded);
  }
}

function halfBandTaps(rateHz: number): Float64Array {
  const transition = (2 * Math.PI * (rateHz / 2 - 2 * HALF_KEEP_HZ)) / rateHz;
  const half = Math.ceil((STOP_DB - 8) / (2.285 * transition) / 2) | 1;
  return windowedSinc(half, 0.25, STOP_DB);
}

function lastTaps(rateHz: number, up: number): Float64Array {
  const stopHz = Math.min(LAST_STOP_HZ, rateHz / 2 + (rateHz / 2 - Math.min(LAST_PASS_HZ, rateHz * 0.45)));
  const passHz = Math.min(LAST_PASS_HZ, rateHz * 0.45);
  const transition = (2 * Math.PI * (stopHz - passHz)) / (rateHz * up);
  const half = Math.ceil((STOP_DB - 8) / (2.285 * transition) / 2);
  const taps = windowedSinc(half, (stopHz + passHz) / 2 / (rateHz * up), STOP_DB);
  return taps.map((tap) => tap * up);
}

/** Low-pass of 2·half + 1 taps, cutoff in cycles per sample, gain 1 at 0 Hz. */
function windowedSinc(half: number, cutoff: number, stopDb: number): Float64Array {
  const window = kaiser(2 * half + 1, stopDb);
  const taps = new Float64Array(2 * half + 1);
  let sum = 0;
  for (let i = 0; i < taps.length; i++) {
    const t = i - half;
    const sinc = t === 0 ? 2 * cutoff : Math.sin(2 * Math.PI * cutoff * t) / (Math.PI * t);
    taps[i] = sinc * window[i]!;
    sum += taps[i]!;
  }
  return taps.map((tap) => tap / sum);
}

function gcd(a: number, b: number): number {
  return b === 0 ? a : gcd(b, a % b);
}
