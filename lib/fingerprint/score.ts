import { type AffineMap, matchPeaks, type Span, TOLERANCES, type Tolerance } from "./alignment";
import { lowerBound, type Prepared } from "./prepared";
import { FRAMES_PER_S } from "./settings";

/**
 * Twenty-four shifts of the alignment at which only chance makes peaks coincide: twelve that share no beat, and twelve
 * whole multiples of half a second, where two pieces with a steady pulse coincide more often than chance.
 */
const SHIFTS_S = [
  -1.37, 2.23, -3.71, 5.31, -7.87, 11.29, 1.73, -2.89, 4.43, -6.13, 8.71, -9.59, 0.5, -0.5, 1, -1, 1.5, -1.5,
  2, -2, 3, -3, 4, -4,
];
const PLAIN_SHIFTS = 12;
/** A shift that comes back to within 0.4 s of the alignment itself (a short reference) measures no chance. */
const SHIFT_CLEARANCE_FRAMES = 0.4 * FRAMES_PER_S;
const CHANCE_DEVIATIONS = 2.5;
/** No chance rate is believed below this: a handful of shifts cannot show it. */
const CHANCE_MIN = 0.008;

/**
 * n · KL(k/n ‖ p0) in nats: how much likelier k of n is at the rate seen than at chance; 0 unless above chance.
 *
 * Source:  log-likelihood ratio of a binomial at its maximum against p0 (Wilks 1938)
 */
export function evidenceNats(hits: number, trials: number, chance: number): number {
  if (trials === 0 || hits <= trials * chance) return 0;
  const rate = hits / trials;
  const miss = rate >= 1 ? 0 : (1 - rate) * Math.log((1 - rate) / (1 - chance));
  return trials * (rate * Math.log(rate / chance) + miss);
}

export interface Score {
  tolerance: Tolerance;
  hits: number;
  trials: number;
  /** Chance rate over the plain shifts; mean + 2.5 σ over all. */
  chance: number;
  chanceHigh: number;
  /** Largest rate over the shifts by multiples of half a second. */
  beatRate: number;
}

/** The score at whichever tolerance gives most evidence; ties go to the tighter. */
export function bestScore(query: Prepared, reference: Prepared, map: AffineMap, spans: Span[]): Score {
  let best: Score | null = null;
  let bestNats = -1;
  for (const tolerance of TOLERANCES) {
    const score = scoreMap(query, reference, map, spans, tolerance);
    const nats = evidenceNats(score.hits, score.trials, score.chance);
    if (best === null || nats > bestNats) {
      best = score;
      bestNats = nats;
    }
  }
  return best!;
}

/** Counts coinciding peaks within the spans, and what chance gives at the shifted alignments (round the reference). */
export function scoreMap(
  query: Prepared,
  reference: Prepared,
  map: AffineMap,
  spans: Span[],
  tolerance: Tolerance,
): Score {
  let longest = 0;
  for (const [from, to] of spans) longest = Math.max(longest, to - from);
  const matched = new Int32Array(longest);
  let hits = 0;
  let trials = 0;
  for (const [from, to] of spans) {
    matchPeaks(query, reference, map, from, to, tolerance, matched);
    for (let i = 0; i < to - from; i++) {
      if (matched[i]! !== -2) trials++;
      if (matched[i]! >= 0) hits++;
    }
  }
  const rates: number[] = [];
  let plain = 0;
  let plainCount = 0;
  let beatRate = 0;
  for (let s = 0; s < SHIFTS_S.length; s++) {
    const rate = shiftedRate(query, reference, map, spans, SHIFTS_S[s]! * FRAMES_PER_S, tolerance);
    if (rate === null) continue;
    rates.push(rate);
    if (s < PLAIN_SHIFTS) {
      plain += rate;
      plainCount++;
    } else beatRate = Math.max(beatRate, rate);
  }
  let mean = 0;
  for (const rate of rates) mean += rate / rates.length;
  let variance = 0;
  for (const rate of rates) variance += ((rate - mean) * (rate - mean)) / rates.length;
  return {
    tolerance,
    hits,
    trials,
    chance: Math.max(CHANCE_MIN, plainCount === 0 ? mean : plain / plainCount),
    chanceHigh: Math.min(0.999, Math.max(CHANCE_MIN, mean + CHANCE_DEVIATIONS * Math.sqrt(variance))),
    beatRate,
  };
}

/** Rate of coincidence with the reference turned round by `shift`; null if that is no shift at all. */
function shiftedRate(
  query: Prepared,
  reference: Prepared,
  map: AffineMap,
  spans: Span[],
  shift: number,
  tolerance: Tolerance,
): number | null {
  const length = reference.lengthFrames;
  const turn = ((shift % length) + length) % length;
  if (Math.min(turn, length - turn) < SHIFT_CLEARANCE_FRAMES) return null;
  const times = reference.timeFrames;
  const pitches = reference.pitchSemitones;
  let hits = 0;
  let trials = 0;
  for (const [from, to] of spans) {
    let low = -1;
    let before = 0;
    for (let i = from; i < to; i++) {
      const image = map.a * query.timeFrames[i]! + map.b;
      if (image < 0 || image > length) continue;
      trials++;
      const time = image + turn >= length ? image + turn - length : image + turn;
      if (low < 0 || time < before) low = lowerBound(times, time - tolerance.frames);
      before = time;
      while (low < times.length && times[low]! < time - tolerance.frames) low++;
      const pitch = query.pitchSemitones[i]! + map.c;
      for (let j = low; j < times.length && times[j]! <= time + tolerance.frames; j++) {
        if (Math.abs(pitches[j]! - pitch) <= tolerance.semitones) {
          hits++;
          break;
        }
      }
    }
  }
  return trials === 0 ? null : hits / trials;
}
