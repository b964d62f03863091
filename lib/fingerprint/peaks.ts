import { FRAME_SAMPLES, HIGHEST_PEAK_HZ, LOWEST_PEAK_HZ, PITCH_ZERO_HZ, SAMPLE_RATE_HZ } from "./settings";
import { BINS } from "./spectrum";

/** A dense peak is the largest value within ±3 frames… */
export const DENSE_FRAMES = 3;
/** …and ±0.7 semitones, at least two bins: Hann's main lobe is four bins wide. */
const DENSE_SEMITONES = 0.7;
const BINS_MIN = 2;

/** Below this a frame counts as silence: −80 dBFS is under the noise of 14 bits. */
const SILENCE_MEAN_SQUARE = 1e-8;
/** Peaks 70 dB under the strongest bin of their frame are leakage and dither. */
const FRAME_FLOOR_RATIO = 1e-7;
/** A peak must rise by 0.2 % over one end of its span: a steady tone has no moment of its own. */
const RISE_RATIO = 1.002;
/** A frame with this share of its power within ±3 bins of one bin is a tone. */
const TONE_SHARE = 0.97;

/** ln 2 / 12: one semitone as a difference of natural logarithms of frequency. */
const SEMITONE_LN = Math.LN2 / 12;

const LOWEST_BIN = Math.ceil((LOWEST_PEAK_HZ * FRAME_SAMPLES) / SAMPLE_RATE_HZ);
const HIGHEST_BIN = Math.floor((HIGHEST_PEAK_HZ * FRAME_SAMPLES) / SAMPLE_RATE_HZ);

/** Sum of |X_k|² over all bins to mean square: Parseval with Hann's mean square of 3/8. */
const POWER_TO_MEAN_SQUARE = 2 / (FRAME_SAMPLES * FRAME_SAMPLES * 0.375);

export const FRAME_SILENT = 1;
export const FRAME_TONE = 2;

export interface DensePeaks {
  count: number;
  /** Fractional frames. */
  timeFrames: Float64Array;
  /** Fractional semitones above 55 Hz. */
  pitchSemitones: Float32Array;
  /** ln of the peak's power. */
  level: Float32Array;
  frameCount: number;
  /** Per frame: FRAME_SILENT, FRAME_TONE or 0. */
  frameKind: Uint8Array;
}

/**
 * Picks the dense peaks out of a stream of power spectra; holds seven frames.
 *
 * Source:  constellation of spectral peaks (A. Wang, ISMIR 2003); the log-frequency axis as in S. Fenet et al. (ISMIR 2011)
 * Input:   power[k], k = 0..1024, frame by frame
 * Output:  peaks in order of frame: largest of ±3 frames × ±0.7 semitones (≥ 2 bins); time and frequency from
 *          parabolas through the logarithms of three neighbours on each axis
 * Edges:   the first and last three frames hold no peak; silent frames hold none
 * Error:   frequency of a steady tone within 0.02 bins, tested; level is only compared, never put out
 * Cost:    one comparison for most bins; a rectangle is read only for maxima of their own frame
 */
export class PeakPicker {
  readonly #ring: Float32Array[] = [];
  readonly #floor = new Float64Array(2 * DENSE_FRAMES + 1);
  readonly #halfBins = halfWidths();
  #frames = 0;
  #count = 0;
  #time = new Float64Array(4096);
  #pitch = new Float32Array(4096);
  #level = new Float32Array(4096);
  #kind = new Uint8Array(4096);

  constructor() {
    for (let i = 0; i < 2 * DENSE_FRAMES + 1; i++) this.#ring.push(new Float32Array(BINS));
  }

  push(power: Float32Array): void {
    const span = this.#ring.length;
    const slot = this.#frames % span;
    this.#ring[slot]!.set(power);
    this.#describe(power, slot);
    this.#frames++;
    if (this.#frames >= span) this.#pick(this.#frames - 1 - DENSE_FRAMES);
  }

  finish(): DensePeaks {
    return {
      count: this.#count,
      timeFrames: this.#time.subarray(0, this.#count),
      pitchSemitones: this.#pitch.subarray(0, this.#count),
      level: this.#level.subarray(0, this.#count),
      frameCount: this.#frames,
      frameKind: this.#kind.subarray(0, this.#frames),
    };
  }

  #describe(power: Float32Array, slot: number): void {
    let sum = 0;
    let top = 0;
    let topBin = 0;
    for (let k = 1; k < BINS; k++) {
      const value = power[k]!;
      sum += value;
      if (value > top) {
        top = value;
        topBin = k;
      }
    }
    const silent = sum * POWER_TO_MEAN_SQUARE < SILENCE_MEAN_SQUARE;
    this.#floor[slot] = silent ? Number.POSITIVE_INFINITY : top * FRAME_FLOOR_RATIO;
    if (this.#frames === this.#kind.length) {
      const kind = new Uint8Array(2 * this.#kind.length);
      kind.set(this.#kind);
      this.#kind = kind;
    }
    let around = 0;
    for (let k = Math.max(1, topBin - 3); k <= Math.min(BINS - 1, topBin + 3); k++) around += power[k]!;
    this.#kind[this.#frames] = silent ? FRAME_SILENT : around >= TONE_SHARE * sum ? FRAME_TONE : 0;
  }

  #pick(frame: number): void {
    const span = this.#ring.length;
    const slot = frame % span;
    const power = this.#ring[slot]!;
    const floor = this.#floor[slot]!;
    if (floor === Number.POSITIVE_INFINITY) return;
    for (let k = LOWEST_BIN; k <= HIGHEST_BIN; k++) {
      const value = power[k]!;
      if (value <= power[k - 1]! || value < power[k + 1]! || value <= floor) continue;
      if (this.#isLargest(frame, k, value)) this.#keep(frame, k);
    }
  }

  #isLargest(frame: number, k: number, value: number): boolean {
    const span = this.#ring.length;
    const half = this.#halfBins[k]!;
    const from = k - half;
    const to = Math.min(BINS - 1, k + half);
    const own = this.#ring[frame % span]!;
    for (let j = 2; j <= half; j++) {
      if (own[k - j]! >= value || (k + j <= to && own[k + j]! > value)) return false;
    }
    for (let d = 1; d <= DENSE_FRAMES; d++) {
      const before = this.#ring[(frame - d) % span]!;
      const after = this.#ring[(frame + d) % span]!;
      if (before[k]! >= value || after[k]! > value) return false;
      for (let j = from; j <= to; j++) {
        if (before[j]! >= value || after[j]! > value) return false;
      }
    }
    const first = this.#ring[(frame - DENSE_FRAMES) % span]![k]!;
    const last = this.#ring[(frame + DENSE_FRAMES) % span]![k]!;
    return value > RISE_RATIO * Math.min(first, last);
  }

  #keep(frame: number, k: number): void {
    const span = this.#ring.length;
    const own = this.#ring[frame % span]!;
    const middle = Math.log(own[k]!);
    const timeShift = vertex(
      this.#ring[(frame - 1) % span]![k]!,
      middle,
      this.#ring[(frame + 1) % span]![k]!,
    );
    const binShift = vertex(own[k - 1]!, middle, own[k + 1]!);
    if (this.#count === this.#time.length) this.#grow();
    this.#time[this.#count] = frame + timeShift;
    const hz = ((k + binShift) * SAMPLE_RATE_HZ) / FRAME_SAMPLES;
    this.#pitch[this.#count] = Math.log(hz / PITCH_ZERO_HZ) / SEMITONE_LN;
    this.#level[this.#count] = middle;
    this.#count++;
  }

  #grow(): void {
    const time = new Float64Array(2 * this.#count);
    time.set(this.#time);
    this.#time = time;
    const pitch = new Float32Array(2 * this.#count);
    pitch.set(this.#pitch);
    this.#pitch = pitch;
    const level = new Float32Array(2 * this.#count);
    level.set(this.#level);
    this.#level = level;
  }
}

/** Vertex of the parabola through (−1, ln left), (0, middle), (1, ln right), in −0.5..0.5. */
function vertex(left: number, middle: number, right: number): number {
  // A neighbour of exactly zero (the edge of digital silence) says nothing about the slope.
  if (left <= 0 || right <= 0) return 0;
  const a = Math.log(left);
  const b = Math.log(right);
  const curvature = a - 2 * middle + b;
  if (curvature >= 0) return 0;
  return Math.max(-0.5, Math.min(0.5, (0.5 * (a - b)) / curvature));
}

function halfWidths(): Uint16Array {
  const ratio = 2 ** (DENSE_SEMITONES / 12) - 1;
  const widths = new Uint16Array(BINS);
  for (let k = 0; k < BINS; k++) widths[k] = Math.max(BINS_MIN, Math.round(k * ratio));
  return widths;
}
