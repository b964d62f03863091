/** A sample at or above this counts as full scale: 32,767/32,768 of a 16-bit file, less a rounding. */
export const FULL_SCALE = 0.99996;
export const CLIP_RUN_SAMPLES = 3;
/** Sound begins and ends where a sample passes these, dBFS peak; the end is lower so that a decay counts as sound. */
export const HEAD_SILENCE_DB = -60;
export const TAIL_SILENCE_DB = -72;
/** Clipping runs kept with their place; all are counted. */
const KEPT = 64;
const EDGE_S = 0.02;

export interface LevelsReading {
  samplePeak: number;
  samplePeakAtS: number;
  rms: number[];
  dcOffset: number[];
  clipRuns: { atS: number; samples: number; channel: number }[];
  clipRunCount: number;
  headSilenceS: number;
  tailSilenceS: number;
  /** Largest absolute value of the very first frame: far from zero means that the file begins inside a sound. */
  firstSamplePeak: number;
  /** RMS of the last 20 ms over all channels: far from zero means that the file ends inside a sound. */
  lastRms: number;
}

interface ChannelSums {
  sum: number;
  squares: number;
  run: number;
  runStart: number;
}

/**
 * What is read from single samples: peak, RMS, clipping, offset, silence at both ends.
 *
 * Source:  common practice for the limits named above; a clipping run is three or more samples at full scale.
 * Input:   planar blocks of any size
 * Edges:   a wholly silent programme has headSilenceS = its length and tailSilenceS = 0
 */
export class LevelsMeter {
  private readonly sums: ChannelSums[];
  private readonly clipRuns: LevelsReading["clipRuns"] = [];
  private readonly last: Float64Array;
  private clipRunCount = 0;
  private done = 0;
  private peak = 0;
  private peakAt = 0;
  private soundStart = -1;
  private soundEnd = 0;
  private firstSamplePeak = 0;
  private readonly headLevel = 10 ** (HEAD_SILENCE_DB / 20);
  private readonly tailLevel = 10 ** (TAIL_SILENCE_DB / 20);

  constructor(
    private readonly sampleRateHz: number,
    channels: number,
  ) {
    this.sums = Array.from({ length: channels }, () => ({ sum: 0, squares: 0, run: 0, runStart: 0 }));
    this.last = new Float64Array(Math.max(1, Math.round(EDGE_S * sampleRateHz)));
  }

  push(block: readonly Float32Array[]): void {
    const frames = block[0]?.length ?? 0;
    if (frames === 0) return;
    if (this.done === 0) this.firstSamplePeak = Math.max(...block.map((channel) => Math.abs(channel[0]!)));
    for (let c = 0; c < this.sums.length; c++) this.scan(block[c]!, c);
    for (let i = Math.max(0, frames - this.last.length); i < frames; i++) {
      let squares = 0;
      for (const channel of block) squares += channel[i]! * channel[i]!;
      this.last[(this.done + i) % this.last.length] = squares / block.length;
    }
    this.done += frames;
  }

  finish(): LevelsReading {
    for (let c = 0; c < this.sums.length; c++) this.closeRun(c);
    this.clipRuns.sort((a, b) => a.atS - b.atS);
    const { done, sampleRateHz } = this;
    const silent = this.soundStart < 0;
    return {
      samplePeak: this.peak,
      samplePeakAtS: this.peakAt / sampleRateHz,
      rms: this.sums.map(({ squares }) => (done === 0 ? 0 : Math.sqrt(squares / done))),
      dcOffset: this.sums.map(({ sum }) => (done === 0 ? 0 : sum / done)),
      clipRuns: this.clipRuns,
      clipRunCount: this.clipRunCount,
      headSilenceS: (silent ? done : this.soundStart) / sampleRateHz,
      tailSilenceS: silent ? 0 : (done - this.soundEnd) / sampleRateHz,
      firstSamplePeak: this.firstSamplePeak,
      lastRms: Math.sqrt(
        this.last.reduce((sum, value) => sum + value, 0) / Math.min(done || 1, this.last.length),
      ),
    };
  }

  private scan(x: Float32Array, channel: number): void {
    const sums = this.sums[channel]!;
    const { tailLevel, done } = this;
    let { sum, squares } = sums;
    let { peak } = this;
    let lastSound = -1;
    for (let i = 0; i < x.length; i++) {
      const value = x[i]!;
      sum += value;
      squares += value * value;
      const size = value < 0 ? -value : value;
      if (size > tailLevel) lastSound = i;
      if (size > peak) {
        peak = size;
        this.peakAt = done + i;
      }
      if (size >= FULL_SCALE) {
        if (sums.run === 0) sums.runStart = done + i;
        sums.run++;
      } else if (sums.run > 0) this.closeRun(channel);
    }
    this.peak = peak;
    sums.sum = sum;
    sums.squares = squares;
    if (lastSound >= 0) this.soundEnd = Math.max(this.soundEnd, done + lastSound + 1);
    this.findStart(x);
  }

  private findStart(x: Float32Array): void {
    const until = this.soundStart < 0 ? x.length : Math.min(x.length, this.soundStart - this.done);
    for (let i = 0; i < until; i++) {
      if (Math.abs(x[i]!) > this.headLevel) {
        this.soundStart = this.done + i;
        return;
      }
    }
  }

  private closeRun(channel: number): void {
    const sums = this.sums[channel]!;
    if (sums.run >= CLIP_RUN_SAMPLES) {
      this.clipRunCount++;
      if (this.clipRuns.length < KEPT) {
        this.clipRuns.push({ atS: sums.runStart / this.sampleRateHz, samples: sums.run, channel });
      }
    }
    sums.run = 0;
  }
}
