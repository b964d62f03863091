import { ONSET_RATE_HZ, onsetStrength } from "./onsets";
import { createMonoResampler } from "./resample";

export interface Lag {
  /** b is late by this: b(t + lagS) ≈ a(t). */
  lagS: number;
  /** Normalised correlation at the peak. */
  correlation: number;
}

export interface Drift {
  offsetS: number;
  /** Seconds of lag a second. */
  slope: number;
  correlation: number;
}

/** Windows that correlate less than this say nothing about where b lies. */
const CORRELATION_MIN = 0.25;
/** A fingerprint's speed is exact to 0.03 % in nine of ten cases; more than this is a wrong peak. */
const SLOPE_MAX = 0.003;

/**
 * Lag of b against a within one stretch.
 *
 * Source:  normalised cross-correlation with a parabola through the three values at the peak.
 * Input:   a, b the same stretch of time, reachS wider on each side than the window that is compared
 * Output:  null for silence, for a stretch too short, and where the peak lies at the edge of the reach
 */
export function waveformLag(a: Float32Array, b: Float32Array, rateHz: number, reachS: number): Lag | null {
  const reach = Math.round(reachS * rateHz);
  const size = Math.min(a.length, b.length) - 2 * reach;
  if (size < 64 || reach < 2) return null;
  const found = bestLag(a, b, reach, size, reach);
  return found ? { lagS: found.lag / rateHz, correlation: found.peak } : null;
}

function bestLag(
  a: Float32Array,
  b: Float32Array,
  from: number,
  size: number,
  reach: number,
): { lag: number; peak: number } | null {
  let energyA = 0;
  for (let i = from; i < from + size; i++) energyA += a[i]! * a[i]!;
  if (energyA < size * 1e-8) return null;
  let energyB = 0;
  for (let i = from - reach; i < from - reach + size; i++) energyB += b[i]! * b[i]!;
  const values = new Float64Array(2 * reach + 1);
  for (let lag = -reach; lag <= reach; lag++) {
    let sum = 0;
    for (let i = 0; i < size; i++) sum += a[from + i]! * b[from + lag + i]!;
    values[lag + reach] = energyB > 0 ? sum / Math.sqrt(energyA * energyB) : 0;
    const out = b[from + lag]!;
    const next = b[from + lag + size] ?? 0;
    energyB = Math.max(energyA * 1e-6, energyB - out * out + next * next);
  }
  return parabolicPeak(values, reach);
}

function parabolicPeak(values: Float64Array, reach: number): { lag: number; peak: number } | null {
  let best = 1;
  for (let i = 1; i < values.length - 1; i++) if (values[i]! > values[best]!) best = i;
  const [a, b, c] = [values[best - 1]!, values[best]!, values[best + 1]!];
  if (b < a || b < c) return null;
  const bend = a - 2 * b + c;
  const shift = bend === 0 ? 0 : (0.5 * (a - c)) / bend;
  return { lag: best - reach + shift, peak: b };
}

/** Line through the lags by medians (Theil–Sen), so that a window on a wrong peak does not turn it; null if none fit. */
export function fitDrift(lags: readonly (Lag & { atS: number })[]): Drift | null {
  const good = lags.filter((lag) => lag.correlation >= CORRELATION_MIN);
  if (good.length === 0) return null;
  const slopes: number[] = [];
  for (let i = 0; i < good.length; i++) {
    for (let j = i + 1; j < good.length; j++) {
      const apart = good[j]!.atS - good[i]!.atS;
      if (apart > 0.5) slopes.push((good[j]!.lagS - good[i]!.lagS) / apart);
    }
  }
  const steep = slopes.length >= 3 ? median(slopes) : 0;
  const slope = Math.abs(steep) <= SLOPE_MAX ? steep : 0;
  return {
    offsetS: median(good.map((lag) => lag.lagS - slope * lag.atS)),
    slope,
    correlation: median(good.map((lag) => lag.correlation)),
  };
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = Math.floor(sorted.length / 2);
  return sorted.length % 2 === 1 ? sorted[middle]! : 0.5 * (sorted[middle - 1]! + sorted[middle]!);
}

/**
 * Lag of b against a by their onsets, for copies whose waveform was re-made (tempo or pitch changed and undone).
 *
 * Error:   a few milliseconds on music with attacks; 0 with a correlation of 0 where there are none
 */
export function onsetLag(a: Float32Array, b: Float32Array, rateHz: number, reachS: number): Drift {
  const strengthA = onsetStrength(toAnalysis(a, rateHz));
  const strengthB = onsetStrength(toAnalysis(b, rateHz));
  const reach = Math.ceil(reachS * ONSET_RATE_HZ);
  const size = Math.min(strengthA.length, strengthB.length) - 2 * reach;
  const found = size > 2 * reach ? bestLag(strengthA, strengthB, reach, size, reach) : null;
  return { offsetS: found ? found.lag / ONSET_RATE_HZ : 0, slope: 0, correlation: found?.peak ?? 0 };
}

export function toAnalysis(samples: Float32Array, rateHz: number): Float32Array {
  const resampler = createMonoResampler(rateHz);
  const parts = [resampler.push(samples), resampler.finish()];
  const out = new Float32Array(parts[0]!.length + parts[1]!.length);
  out.set(parts[0]!);
  out.set(parts[1]!, parts[0]!.length);
  return out;
}
