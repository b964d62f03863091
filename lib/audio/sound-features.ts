import { chromagram } from "./chroma";
import { ONSET_RATE_HZ, onsetStrength, pickOnsets } from "./onsets";
import { ANALYSIS_RATE_HZ } from "./resample";
import { PowerSpectrum } from "./spectrum";

const SIZE = 1024;
const HOP = 512;
const MEL_BANDS = 32;
const MFCC = 13;
const SHAPE_POINTS = 16;
const SILENCE_POWER = 1e-8;
/** Bands this far under their frame count as empty; relative, so that gain does not change the shape. */
const BAND_FLOOR = 1e-6;

/** Places of each part in the packed vector. Append only: stored vectors are read by these. */
export const FEATURE_LAYOUT = {
  chroma: [0, 12],
  mfccMean: [12, 25],
  mfccDeviation: [25, 38],
  centroidHz: [38, 39],
  centroidDeviationHz: [39, 40],
  onsetsPerS: [40, 41],
  loudnessShapeDb: [41, 57],
} as const satisfies Record<string, readonly [number, number]>;
export const FEATURE_COUNT = 57;

/**
 * What a recording sounds like, in 57 numbers for distances between recordings.
 *
 * Source:  mel-frequency cepstral coefficients after S. Davis and P. Mermelstein, IEEE TASSP 28(4), 1980 (HTK's mel
 *          scale 2595·log10(1 + f/700), DCT-II, orthonormal); spectral centroid of amplitudes; chroma.ts; onsets.ts.
 * Input:   mono at 11,025 Hz
 * Output:  Float32Array[57], parts as in FEATURE_LAYOUT. The loudness shape is the level of sixteen equal parts
 *          against the loudest, dB, at least −60. Silent frames are left out of means.
 * Edges:   silence gives zeros, and −60 dB for the shape; never NaN
 */
export function soundFeatures(samples: Float32Array): Float32Array {
  const out = new Float32Array(FEATURE_COUNT);
  out.set(chromagram(samples).mean, FEATURE_LAYOUT.chroma[0]);
  const timbre = timbreOf(samples);
  out.set(timbre.mean, FEATURE_LAYOUT.mfccMean[0]);
  out.set(timbre.deviation, FEATURE_LAYOUT.mfccDeviation[0]);
  out[FEATURE_LAYOUT.centroidHz[0]] = timbre.centroidHz;
  out[FEATURE_LAYOUT.centroidDeviationHz[0]] = timbre.centroidDeviationHz;
  const onsets = pickOnsets(onsetStrength(samples));
  const durationS = samples.length / ANALYSIS_RATE_HZ;
  out[FEATURE_LAYOUT.onsetsPerS[0]] = durationS > 1 / ONSET_RATE_HZ ? onsets.length / durationS : 0;
  out.set(loudnessShape(samples), FEATURE_LAYOUT.loudnessShapeDb[0]);
  return out;
}

function timbreOf(samples: Float32Array): {
  mean: Float64Array;
  deviation: Float64Array;
  centroidHz: number;
  centroidDeviationHz: number;
} {
  const spectrum = new PowerSpectrum(SIZE);
  const filters = melFilters();
  const cosines = dctRows();
  const sums = new Float64Array(MFCC + 1);
  const squares = new Float64Array(MFCC + 1);
  const values = new Float64Array(MFCC + 1);
  let frames = 0;
  for (let at = 0; at + SIZE <= samples.length; at += HOP) {
    const power = spectrum.read(samples, at);
    if (!frameValues(power, filters, cosines, values)) continue;
    frames++;
    for (let i = 0; i < values.length; i++) {
      sums[i] = sums[i]! + values[i]!;
      squares[i] = squares[i]! + values[i]! ** 2;
    }
  }
  const mean = sums.map((sum) => (frames > 0 ? sum / frames : 0));
  const deviation = squares.map((sum, i) =>
    frames > 0 ? Math.sqrt(Math.max(0, sum / frames - mean[i]! ** 2)) : 0,
  );
  return {
    mean: mean.subarray(0, MFCC),
    deviation: deviation.subarray(0, MFCC),
    centroidHz: mean[MFCC]!,
    centroidDeviationHz: deviation[MFCC]!,
  };
}

/** Writes 13 coefficients and the centroid of one frame; false for silence. */
function frameValues(
  power: Float64Array,
  filters: readonly MelFilter[],
  cosines: readonly Float64Array[],
  out: Float64Array,
): boolean {
  let total = 0;
  let weighted = 0;
  let amplitudes = 0;
  for (let k = 1; k < power.length; k++) {
    total += power[k]!;
    const amplitude = Math.sqrt(power[k]!);
    amplitudes += amplitude;
    weighted += amplitude * k;
  }
  if (total < SILENCE_POWER) return false;
  const logs = filters.map(({ first, weights }) => {
    let energy = 0;
    for (let i = 0; i < weights.length; i++) energy += weights[i]! * power[first + i]!;
    return Math.log(energy + BAND_FLOOR * total);
  });
  for (let c = 0; c < MFCC; c++) {
    let sum = 0;
    for (let b = 0; b < MEL_BANDS; b++) sum += cosines[c]![b]! * logs[b]!;
    out[c] = sum;
  }
  out[MFCC] = ((weighted / amplitudes) * ANALYSIS_RATE_HZ) / SIZE;
  return true;
}

interface MelFilter {
  first: number;
  weights: number[];
}

function melFilters(): MelFilter[] {
  const mel = (hz: number): number => 2595 * Math.log10(1 + hz / 700);
  const hz = (value: number): number => 700 * (10 ** (value / 2595) - 1);
  const [low, high] = [mel(60), mel(5200)];
  const edge = (i: number): number =>
    (hz(low + ((high - low) * i) / (MEL_BANDS + 1)) * SIZE) / ANALYSIS_RATE_HZ;
  return Array.from({ length: MEL_BANDS }, (_, b) => {
    const [left, centre, right] = [edge(b), edge(b + 1), edge(b + 2)];
    const first = Math.max(1, Math.floor(left));
    const weights: number[] = [];
    for (let k = first; k <= Math.ceil(right); k++) {
      weights.push(Math.max(0, Math.min((k - left) / (centre - left), (right - k) / (right - centre))));
    }
    return { first, weights };
  });
}

function dctRows(): Float64Array[] {
  return Array.from({ length: MFCC }, (_, c) =>
    Float64Array.from(
      { length: MEL_BANDS },
      (_, b) => Math.sqrt((c === 0 ? 1 : 2) / MEL_BANDS) * Math.cos((Math.PI * c * (b + 0.5)) / MEL_BANDS),
    ),
  );
}

function loudnessShape(samples: Float32Array): Float64Array {
  const powers = new Float64Array(SHAPE_POINTS);
  for (let p = 0; p < SHAPE_POINTS; p++) {
    const from = Math.floor((p * samples.length) / SHAPE_POINTS);
    const to = Math.floor(((p + 1) * samples.length) / SHAPE_POINTS);
    let sum = 0;
    for (let i = from; i < to; i++) sum += samples[i]! * samples[i]!;
    powers[p] = to > from ? sum / (to - from) : 0;
  }
  const most = powers.reduce((max, value) => Math.max(max, value), 0);
  return powers.map((power) => (power > 0 ? Math.max(-60, 10 * Math.log10(power / most)) : -60));
}
