import { ANALYSIS_RATE_HZ } from "./resample";
import { PowerSpectrum } from "./spectrum";

const SIZE = 1024;
export const ONSET_HOP = 128;
/** Onset strengths a second: 86.13. */
export const ONSET_RATE_HZ = ANALYSIS_RATE_HZ / ONSET_HOP;
const BANDS = 24;

/**
 * Onset strength: half-wave rectified rise of log band energies, local mean removed.
 *
 * Source:  spectral flux on a compressed scale, as in D. P. W. Ellis, "Beat tracking by dynamic programming", 2007.
 * Input:   mono at 11,025 Hz
 * Output:  Float32Array[frames]; out[t] belongs to (t · 128 + 512) / 11025 s; silence gives zeros
 */
export function onsetStrength(samples: Float32Array): Float32Array {
  const frames = Math.max(0, Math.floor((samples.length - SIZE) / ONSET_HOP) + 1);
  const spectrum = new PowerSpectrum(SIZE);
  const edges = bandEdges();
  let before = new Float64Array(BANDS);
  let now = new Float64Array(BANDS);
  const flux = new Float64Array(frames);
  for (let t = 0; t < frames; t++) {
    const power = spectrum.read(samples, t * ONSET_HOP);
    let rise = 0;
    for (let b = 0; b < BANDS; b++) {
      let energy = 0;
      for (let k = edges[b]!; k < edges[b + 1]!; k++) energy += power[k]!;
      // −70 dB of full scale is the floor: rises out of silence count, noise under it does not.
      now[b] = Math.log(energy + 1e-7);
      if (t > 0) rise += Math.max(0, now[b]! - before[b]!);
    }
    flux[t] = rise / BANDS;
    [before, now] = [now, before];
  }
  return centred(flux);
}

/** Band limits in bins, equal on a mel-like scale from 40 Hz to 5.4 kHz, at least one bin wide. */
function bandEdges(): number[] {
  const mel = (hz: number): number => Math.log(1 + hz / 700);
  const top = mel(5400);
  const edges: number[] = [];
  for (let b = 0; b <= BANDS; b++) {
    const hz = 700 * (Math.exp(mel(40) + ((top - mel(40)) * b) / BANDS) - 1);
    const bin = Math.round((hz * SIZE) / ANALYSIS_RATE_HZ);
    edges.push(Math.max(bin, (edges[b - 1] ?? 1) + 1));
  }
  return edges;
}

/** Subtracts the mean of one second around and keeps what is above it. */
function centred(flux: Float64Array): Float32Array {
  const half = Math.round(ONSET_RATE_HZ / 2);
  const sums = new Float64Array(flux.length + 1);
  for (let i = 0; i < flux.length; i++) sums[i + 1] = sums[i]! + flux[i]!;
  return Float32Array.from(flux, (value, i) => {
    const from = Math.max(0, i - half);
    const to = Math.min(flux.length, i + half + 1);
    return Math.max(0, value - (sums[to]! - sums[from]!) / (to - from));
  });
}

/** Frames that are local maxima and clearly above their surroundings. */
export function pickOnsets(strength: Float32Array): number[] {
  const reach = 4;
  const most = strength.reduce((max, value) => Math.max(max, value), 0);
  const floor = Math.max(0.08 * most, 0.02);
  const onsets: number[] = [];
  for (let t = 0; t < strength.length; t++) {
    const here = strength[t]!;
    if (here <= floor) continue;
    let top = true;
    for (let k = Math.max(0, t - reach); k <= Math.min(strength.length - 1, t + reach) && top; k++) {
      top = strength[k]! < here || k >= t;
      if (k > t && strength[k]! > here) top = false;
    }
    if (top) onsets.push(t);
  }
  return onsets;
}
