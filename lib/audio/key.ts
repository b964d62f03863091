import { chromagram } from "./chroma";
import { ALBRECHT_SHANAHAN, type KeyProfile } from "./key-profiles";

export const PITCH_CLASSES = ["C", "D♭", "D", "E♭", "E", "F", "F♯", "G", "A♭", "A", "B♭", "B"] as const;
export type PitchClass = (typeof PITCH_CLASSES)[number];
export type Mode = "major" | "minor";

export interface KeyEstimate {
  key: PitchClass;
  mode: Mode;
  /** 0 to 1: how far the best key is ahead of the best one with another tonic or mode. */
  confidence: number;
}

/** A lead of this much in correlation is as sure as it gets on real chroma. */
const SURE_LEAD = 0.2;

/**
 * Key of a mono signal at 11,025 Hz.
 *
 * Source:  correlation of the mean chroma with rotated key profiles (Krumhansl 1990, ch. 4); profiles of
 *          Albrecht and Shanahan 2013, which tell relative keys apart better on a flat scale.
 * Output:  null for silence and for sound without pitch (a chroma that is flat)
 */
export function estimateKey(samples: Float32Array): KeyEstimate | null {
  return keyOfChroma(chromagram(samples).mean);
}

/** The best of 24 keys for twelve pitch-class weights, C first; null if they are all alike. */
export function keyOfChroma(
  chroma: ArrayLike<number>,
  profile: KeyProfile = ALBRECHT_SHANAHAN,
): KeyEstimate | null {
  const ranked = rankKeys(chroma, profile);
  const best = ranked[0]!;
  if (!(best.r > 0)) return null;
  const lead = best.r - ranked[1]!.r;
  return { key: best.key, mode: best.mode, confidence: Math.max(0, Math.min(1, lead / SURE_LEAD)) };
}

/** All 24 keys with their Pearson correlation, best first. */
export function rankKeys(
  chroma: ArrayLike<number>,
  profile: KeyProfile,
): { key: PitchClass; mode: Mode; r: number }[] {
  const ranked: { key: PitchClass; mode: Mode; r: number }[] = [];
  for (const mode of ["major", "minor"] as const) {
    for (let tonic = 0; tonic < 12; tonic++) {
      const rotated = Array.from({ length: 12 }, (_, pc) => profile[mode][(pc - tonic + 12) % 12]!);
      ranked.push({ key: PITCH_CLASSES[tonic]!, mode, r: pearson(chroma, rotated) });
    }
  }
  return ranked.sort((a, b) => b.r - a.r);
}

/** Pearson correlation; 0 where either side does not vary. */
export function pearson(a: ArrayLike<number>, b: ArrayLike<number>): number {
  const n = a.length;
  let meanA = 0;
  let meanB = 0;
  for (let i = 0; i < n; i++) {
    meanA += a[i]! / n;
    meanB += b[i]! / n;
  }
  let ab = 0;
  let aa = 0;
  let bb = 0;
  for (let i = 0; i < n; i++) {
    const da = a[i]! - meanA;
    const db = b[i]! - meanB;
    ab += da * db;
    aa += da * da;
    bb += db * db;
  }
  // Rounding alone gives a flat chroma a variance of about 1e-17 of its power.
  return aa > 1e-12 && bb > 1e-12 ? ab / Math.sqrt(aa * bb) : 0;
}

/**
 * Score of an estimated key.
 *
 * Source:  MIREX audio key detection since 2017: same 1; a fifth above or below 0.5; relative 0.3; parallel 0.2.
 */
export function mirexKeyScore(
  reference: { key: PitchClass; mode: Mode },
  estimate: { key: PitchClass; mode: Mode },
): number {
  const up = (PITCH_CLASSES.indexOf(estimate.key) - PITCH_CLASSES.indexOf(reference.key) + 12) % 12;
  if (reference.mode === estimate.mode) return up === 0 ? 1 : up === 7 || up === 5 ? 0.5 : 0;
  if (up === 0) return 0.2;
  return up === (reference.mode === "major" ? 9 : 3) ? 0.3 : 0;
}
