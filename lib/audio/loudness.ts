import { kWeighting } from "./k-weighting";

export interface LoudnessReading {
  /** Null where nothing passes the gate (silence, or less than 400 ms). */
  integratedLufs: number | null;
  maxMomentaryLufs: number | null;
  maxShortTermLufs: number | null;
  maxShortTermAtS: number | null;
  /** Null below 3 s. */
  rangeLu: number | null;
}

export interface LoudnessOptions {
  /** Called every 100 ms once the window is full; for tests of the live readings and for shapes. */
  onReading?: (atS: number, momentaryLufs: number, shortTermLufs: number | null) => void;
}

const BINS_PER_S = 100;
const MOMENTARY_BINS = 40;
const SHORT_TERM_BINS = 300;
/** Integrated blocks are 400 ms with 75 % overlap; the live windows move by 10 ms (a 100 ms hop fails EBU case 13). */
const HOP_BINS = 10;
const ABSOLUTE_GATE_LUFS = -70;
const OFFSET_LU = -0.691;
/** BS.1770-5 Table 3: left and right surround count 1.41, LFE nothing. Channel order as in WAV. */
const WEIGHTS: Record<number, readonly number[]> = {
  4: [1, 1, 1.41, 1.41],
  5: [1, 1, 1, 1.41, 1.41],
  6: [1, 1, 1, 0, 1.41, 1.41],
};

export function toLufs(power: number): number {
  return OFFSET_LU + 10 * Math.log10(power);
}

/**
 * Programme loudness, streaming.
 *
 * Source:  ITU-R BS.1770-5 Annex 1 eqs (1)–(7): K weighting, 400 ms blocks with 75 % overlap, the last part block
 *          dropped, gates at −70 LKFS and 10 LU under the level of what passed it. EBU Tech 3341: momentary 0.4 s and
 *          short-term 3 s, rectangular, ungated. EBU Tech 3342: range between the 10th and 95th percentile of
 *          short-term levels at 10 Hz, gates at −70 LUFS and 20 LU under, 1.5 s of silence appended for files.
 * Input:   planar blocks of any size, full scale ±1
 * Output:  finish() gives LUFS and LU; a mono file counts as one channel (no +3 dB for a second speaker)
 * Edges:   silence gives nulls, never −Infinity; rates whose 10 ms is no whole number of samples are cut to the
 *          nearest sample without drift
 * Error:   within 0.1 LU on EBU Tech 3341 cases 1–6 and 9–14
 */
export class LoudnessMeter {
  private readonly filters: Float64Array;
  private readonly state: Float64Array;
  private readonly weights: readonly number[];
  private readonly ring = new Float64Array(SHORT_TERM_BINS);
  private readonly blocks = new GrowingFloats();
  private readonly shortTerms = new GrowingFloats();
  private binEnergy = 0;
  private samples = 0;
  private bins = 0;
  private nextEdge: number;
  private binSamples = 0;
  private ended = false;
  private maxMomentary = 0;
  private maxShortTerm = 0;
  private maxShortTermBin = 0;

  constructor(
    private readonly sampleRateHz: number,
    private readonly channels: number,
    private readonly options: LoudnessOptions = {},
  ) {
    const [shelf, pass] = kWeighting(sampleRateHz);
    this.filters = Float64Array.of(shelf.b0, shelf.b1, shelf.b2, shelf.a1, shelf.a2, pass.a1, pass.a2);
    this.state = new Float64Array(4 * channels);
    this.weights = WEIGHTS[channels] ?? Array.from({ length: channels }, () => 1);
    this.nextEdge = Math.round(sampleRateHz / BINS_PER_S);
  }

  push(block: readonly Float32Array[]): void {
    const total = block[0]?.length ?? 0;
    for (let from = 0; from < total; ) {
      const to = Math.min(total, from + this.nextEdge - this.samples);
      for (let c = 0; c < this.channels; c++) {
        const weight = this.weights[c]!;
        if (weight > 0) this.binEnergy += weight * this.weigh(block[c]!, from, to, c);
      }
      this.samples += to - from;
      this.binSamples += to - from;
      from = to;
      if (this.samples === this.nextEdge) this.closeBin();
    }
  }

  finish(): LoudnessReading {
    const integratedLufs = this.integrated();
    const measuredBins = this.bins;
    const { maxMomentary, maxShortTerm } = this;
    let rangeLu: number | null = null;
    if (measuredBins >= SHORT_TERM_BINS) {
      this.ended = true;
      // Tech 3342 §5: a file is followed by silence before the last reading.
      for (let i = 0; i < 1.5 * BINS_PER_S; i++) this.enterBin(0);
      rangeLu = this.range();
    }
    return {
      integratedLufs,
      maxMomentaryLufs: maxMomentary > 0 ? toLufs(maxMomentary) : null,
      maxShortTermLufs: maxShortTerm > 0 ? toLufs(maxShortTerm) : null,
      maxShortTermAtS: maxShortTerm > 0 ? (this.maxShortTermBin - SHORT_TERM_BINS) / BINS_PER_S : null,
      rangeLu,
    };
  }

  /** Runs one channel through both sections (transposed direct form II) and returns the sum of squares. */
  private weigh(x: Float32Array, from: number, to: number, channel: number): number {
    const f = this.filters;
    const b0 = f[0]!;
    const b1 = f[1]!;
    const b2 = f[2]!;
    const a1 = f[3]!;
    const a2 = f[4]!;
    const p1 = f[5]!;
    const p2 = f[6]!;
    const s = this.state;
    const at = channel * 4;
    let s1 = s[at]!;
    let s2 = s[at + 1]!;
    let s3 = s[at + 2]!;
    let s4 = s[at + 3]!;
    let sum = 0;
    for (let i = from; i < to; i++) {
      const input = x[i]!;
      const shelved = b0 * input + s1;
      s1 = b1 * input - a1 * shelved + s2;
      s2 = b2 * input - a2 * shelved;
      const out = shelved + s3;
      s3 = -2 * shelved - p1 * out + s4;
      s4 = shelved - p2 * out;
      sum += out * out;
    }
    // Decaying filter states would become subnormal in silence and slow every operation a hundredfold.
    s[at] = Math.abs(s1) < 1e-30 ? 0 : s1;
    s[at + 1] = Math.abs(s2) < 1e-30 ? 0 : s2;
    s[at + 2] = Math.abs(s3) < 1e-30 ? 0 : s3;
    s[at + 3] = Math.abs(s4) < 1e-30 ? 0 : s4;
    return sum;
  }

  private closeBin(): void {
    const power = this.binEnergy / this.binSamples;
    this.binEnergy = 0;
    this.binSamples = 0;
    this.enterBin(power);
    this.nextEdge = Math.round(((this.bins + 1) * this.sampleRateHz) / BINS_PER_S);
  }

  private enterBin(power: number): void {
    this.ring[this.bins % SHORT_TERM_BINS] = power;
    this.bins++;
    if (this.bins < MOMENTARY_BINS) return;
    const momentary = this.windowMean(MOMENTARY_BINS);
    if (momentary > this.maxMomentary) this.maxMomentary = momentary;
    const shortTerm = this.bins >= SHORT_TERM_BINS ? this.windowMean(SHORT_TERM_BINS) : null;
    if (shortTerm !== null && shortTerm > this.maxShortTerm) {
      this.maxShortTerm = shortTerm;
      this.maxShortTermBin = this.bins;
    }
    if (this.bins % HOP_BINS !== 0) return;
    this.blocks.add(momentary);
    if (shortTerm !== null) this.shortTerms.add(shortTerm);
    if (this.ended) return;
    this.options.onReading?.(
      this.bins / BINS_PER_S,
      toLufs(momentary),
      shortTerm === null ? null : toLufs(shortTerm),
    );
  }

  /** Summed afresh each time: a running sum would keep the rounding of loud passages through later silence. */
  private windowMean(count: number): number {
    let sum = 0;
    const { ring, bins } = this;
    for (let i = bins - count; i < bins; i++) sum += ring[i % SHORT_TERM_BINS]!;
    return sum / count;
  }

  private integrated(): number | null {
    const blocks = this.blocks.view();
    const absolute = gatedMean(blocks, ABSOLUTE_GATE_LUFS, false);
    if (absolute === null) return null;
    const relative = toLufs(absolute) - 10;
    const mean = gatedMean(blocks, Math.max(relative, ABSOLUTE_GATE_LUFS), false);
    return mean === null ? null : toLufs(mean);
  }

  private range(): number | null {
    const levels = this.shortTerms.view();
    const absolute = gatedMean(levels, ABSOLUTE_GATE_LUFS, true);
    if (absolute === null) return null;
    const gate = Math.max(ABSOLUTE_GATE_LUFS, toLufs(absolute) - 20);
    const kept = levels.filter((power) => power > 0 && toLufs(power) >= gate).sort();
    if (kept.length === 0) return null;
    const at = (percent: number): number => kept[Math.round(((kept.length - 1) * percent) / 100)]!;
    return toLufs(at(95)) - toLufs(at(10));
  }
}

function gatedMean(powers: Float64Array, gateLufs: number, inclusive: boolean): number | null {
  let sum = 0;
  let count = 0;
  for (const power of powers) {
    const level = power > 0 ? toLufs(power) : Number.NEGATIVE_INFINITY;
    if (inclusive ? level >= gateLufs : level > gateLufs) {
      sum += power;
      count++;
    }
  }
  return count === 0 ? null : sum / count;
}

/** Ten values a second: 1.2 MB for the longest file that is accepted. */
class GrowingFloats {
  private values = new Float64Array(4096);
  private count = 0;

  add(value: number): void {
    if (this.count === this.values.length) {
      const grown = new Float64Array(this.count * 2);
      grown.set(this.values);
      this.values = grown;
    }
    this.values[this.count++] = value;
  }

  view(): Float64Array {
    return this.values.subarray(0, this.count);
  }
}
