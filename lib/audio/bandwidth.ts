import { PowerSpectrum } from "./spectrum";

export interface BandwidthReading {
  /** Highest frequency that carries sound, Hz; null if nothing was loud enough to tell. */
  cutoffHz: number | null;
  /** How far the spectrum falls within 1 kHz above it, dB. */
  dropDb: number;
  /** The fall is as steep as a coder's low-pass, and lies where coders put theirs. */
  looksLossy: boolean;
}

const SIZE = 2048;
/** One frame in this many is looked at: the mean of a long-term spectrum needs no more. */
const EVERY = 6;
/** Frames under this level say nothing about the top of the spectrum. */
const FRAME_POWER_MIN = 1e-6;
/** A low-pass of a lossy coder falls by more than this within 1 kHz; instruments and rooms roll off far slower. */
const STEEP_DB = 22;
/** Between the low-pass of a telephone-grade coder and the highest one that still shows. */
const LOSSY_HZ: readonly [number, number] = [10_000, 17_500];

/**
 * Upper edge of the long-term spectrum of the middle signal: a hint at a lossy history, never a proof.
 *
 * Source:  common practice: perceptual coders at low rates remove everything above 15–16 kHz with a steep filter.
 * Output:  the frequency of the steepest fall over 1 kHz between 8 kHz and 0.45 of the sample rate, if what lies
 *          above stays down
 * Edges:   silence, short files and rates under 32 kHz give null
 */
export class BandwidthMeter {
  private readonly spectrum = new PowerSpectrum(SIZE);
  private readonly mean = new Float64Array(SIZE / 2 + 1);
  private readonly held = new Float32Array(SIZE);
  private filled = 0;
  private skip = 0;
  private frames = 0;

  constructor(private readonly sampleRateHz: number) {}

  push(block: readonly Float32Array[]): void {
    const left = block[0];
    if (!left || this.sampleRateHz < 32_000) return;
    const right = block[1] ?? left;
    for (let i = 0; i < left.length; ) {
      if (this.skip > 0) {
        const jump = Math.min(this.skip, left.length - i);
        this.skip -= jump;
        i += jump;
        continue;
      }
      const take = Math.min(SIZE - this.filled, left.length - i);
      for (let k = 0; k < take; k++) this.held[this.filled + k] = 0.5 * (left[i + k]! + right[i + k]!);
      this.filled += take;
      i += take;
      if (this.filled === SIZE) this.closeFrame();
    }
  }

  finish(): BandwidthReading {
    if (this.frames === 0) return { cutoffHz: null, dropDb: 0, looksLossy: false };
    const levels = Array.from(this.mean, (power) => 10 * Math.log10(power / this.frames + 1e-15));
    const perHz = SIZE / this.sampleRateHz;
    const bin = (hz: number): number => Math.min(levels.length - 1, Math.round(hz * perHz));
    const mean = (from: number, to: number): number =>
      levels.slice(from, to).reduce((sum, level) => sum + level, 0) / Math.max(1, to - from);
    let cutoffHz: number | null = null;
    let dropDb = 0;
    for (let k = bin(8000); k < bin(this.sampleRateHz * 0.45); k++) {
      const below = mean(k - bin(500), k);
      const above = mean(k + bin(500), k + bin(1000));
      const rest = mean(k + bin(500), levels.length);
      const drop = below - Math.max(above, rest);
      if (drop > dropDb) {
        dropDb = drop;
        cutoffHz = k / perHz;
      }
    }
    const looksLossy =
      cutoffHz !== null && dropDb >= STEEP_DB && cutoffHz >= LOSSY_HZ[0] && cutoffHz <= LOSSY_HZ[1];
    return { cutoffHz: dropDb >= STEEP_DB ? cutoffHz : null, dropDb, looksLossy };
  }

  private closeFrame(): void {
    this.filled = 0;
    this.skip = (EVERY - 1) * SIZE;
    const power = this.spectrum.read(this.held, 0);
    let total = 0;
    for (let k = 2; k < power.length; k++) total += power[k]!;
    if (total < FRAME_POWER_MIN) return;
    this.frames++;
    for (let k = 0; k < power.length; k++) this.mean[k] = this.mean[k]! + power[k]!;
  }
}
