import { LoudnessMeter } from "./loudness";
import { TruePeakMeter } from "./true-peak";

export interface AlignedPair {
  a: [Float32Array, Float32Array];
  b: [Float32Array, Float32Array];
}

const CEILING = 10 ** (-1 / 20);
/** A gain beyond this would bring up noise instead of music. */
const GAIN_DB_MAX = 30;

/**
 * Scales b in place to a's loudness and finds the gain that keeps all four channels under −1 dBTP.
 *
 * Source:  BS.1770-5 integrated loudness of the stretch itself; RMS where it is shorter than a gating block.
 */
export function matchLevels(pair: AlignedPair, rateHz: number): { gainDb: number; commonGain: number } {
  const difference = levelDb(pair.a, rateHz) - levelDb(pair.b, rateHz);
  const gainDb = Number.isFinite(difference) ? Math.max(-GAIN_DB_MAX, Math.min(GAIN_DB_MAX, difference)) : 0;
  const gain = 10 ** (gainDb / 20);
  for (const channel of pair.b) for (let i = 0; i < channel.length; i++) channel[i] = channel[i]! * gain;
  const meter = new TruePeakMeter(rateHz, 4, Number.POSITIVE_INFINITY);
  meter.push([...pair.a, ...pair.b]);
  const { peak } = meter.finish();
  return { gainDb, commonGain: peak > CEILING ? CEILING / peak : 1 };
}

function levelDb(channels: readonly Float32Array[], rateHz: number): number {
  const meter = new LoudnessMeter(rateHz, channels.length);
  meter.push(channels);
  const { integratedLufs } = meter.finish();
  if (integratedLufs !== null) return integratedLufs;
  let squares = 0;
  for (const channel of channels) for (const value of channel) squares += value * value;
  return 10 * Math.log10(squares / Math.max(1, channels[0]?.length ?? 0));
}

/** Least-squares gain of b against a, and the level of what is left. */
export function differenceOf({ a, b }: AlignedPair): { differenceGain: number; residualDb: number } {
  let aa = 0;
  let ab = 0;
  let bb = 0;
  for (const c of [0, 1] as const) {
    for (let i = 0; i < a[c].length; i++) {
      aa += a[c][i]! * a[c][i]!;
      ab += a[c][i]! * b[c][i]!;
      bb += b[c][i]! * b[c][i]!;
    }
  }
  if (aa === 0 || bb === 0) return { differenceGain: 0, residualDb: 0 };
  const differenceGain = ab / bb;
  let left = 0;
  for (const c of [0, 1] as const) {
    for (let i = 0; i < a[c].length; i++) left += (a[c][i]! - differenceGain * b[c][i]!) ** 2;
  }
  // Two equal files leave rounding noise only; −120 dB is under what 16 bit can hold.
  return { differenceGain, residualDb: Math.max(-120, 10 * Math.log10(left / aa + 1e-30)) };
}
