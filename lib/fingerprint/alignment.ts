import { lowerBound, type Prepared } from "./prepared";
import { FRAMES_PER_S, PITCH_SHIFT_MAX_SEMITONES, SPEED_MAX, SPEED_MIN } from "./settings";

/** t_r = a·t_q + b in frames, p_r = p_q + c in semitones; q the query, r the reference. */
export interface AffineMap {
  a: number;
  b: number;
  c: number;
}

/** Peaks coincide within ±1.6 frames (37 ms) and ±0.3 semitones. */
export const TIME_TOLERANCE_FRAMES = 1.6;
export const PITCH_TOLERANCE_SEMITONES = 0.3;
const FIT_TIME_TOLERANCES = [3, 2.4, 1.9, 1.6];
const FIT_PITCH_TOLERANCES = [0.6, 0.45, 0.35, 0.3];
const FIT_PEAKS_MIN = 6;

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
const CHANCE_MIN = 0.01;

export function inRange(map: AffineMap): boolean {
  return map.a >= SPEED_MIN && map.a <= SPEED_MAX && Math.abs(map.c) <= PITCH_SHIFT_MAX_SEMITONES;
}

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

/**
 * For each query peak in [from, to): index of the reference peak nearest to its image within the tolerances, −1 if
 * none, −2 if the image lies outside the reference.
 */
export function matchPeaks(
  query: Prepared,
  reference: Prepared,
  map: AffineMap,
  from: number,
  to: number,
  timeTolerance: number,
  pitchTolerance: number,
  out: Int32Array,
): void {
  const times = reference.timeFrames;
  const pitches = reference.pitchSemitones;
  let low = from < to ? lowerBound(times, map.a * query.timeFrames[from]! + map.b - timeTolerance) : 0;
  for (let i = from; i < to; i++) {
    const time = map.a * query.timeFrames[i]! + map.b;
    const pitch = query.pitchSemitones[i]! + map.c;
    if (time < 0 || time > reference.lengthFrames) {
      out[i - from] = -2;
      continue;
    }
    while (low < times.length && times[low]! < time - timeTolerance) low++;
    let best = -1;
    let bestDistance = 2;
    for (let j = low; j < times.length && times[j]! <= time + timeTolerance; j++) {
      const dp = (pitches[j]! - pitch) / pitchTolerance;
      if (dp > 1 || dp < -1) continue;
      const dt = (times[j]! - time) / timeTolerance;
      const distance = dt * dt + dp * dp;
      if (distance < bestDistance) {
        bestDistance = distance;
        best = j;
      }
    }
    out[i - from] = best;
  }
}

/** Spans of query peaks, half open. */
export type Span = [from: number, to: number];

/**
 * Refines a map on the query peaks of the spans: four rounds of nearest peaks, least squares in time and the median in
 * pitch, under shrinking tolerances. `rounds` < 4 starts with the tighter ones.
 *
 * Output:  the refined map, or null if fewer than six peaks hold on or the map leaves the range
 */
export function refine(
  query: Prepared,
  reference: Prepared,
  start: AffineMap,
  spans: Span[],
  rounds = 4,
): AffineMap | null {
  let map = start;
  const matched = spans.map(([from, to]) => new Int32Array(to - from));
  for (let round = FIT_TIME_TOLERANCES.length - rounds; round < FIT_TIME_TOLERANCES.length; round++) {
    for (let s = 0; s < spans.length; s++) {
      const [from, to] = spans[s]!;
      matchPeaks(
        query,
        reference,
        map,
        from,
        to,
        FIT_TIME_TOLERANCES[round]!,
        FIT_PITCH_TOLERANCES[round]!,
        matched[s]!,
      );
    }
    const next = leastSquares(query, reference, matched, spans, map);
    if (next === null || !inRange(next)) return null;
    map = next;
  }
  return map;
}

function leastSquares(
  query: Prepared,
  reference: Prepared,
  matched: Int32Array[],
  spans: Span[],
  before: AffineMap,
): AffineMap | null {
  const timeQ: number[] = [];
  const timeR: number[] = [];
  const pitchSteps: number[] = [];
  let sumQ = 0;
  let sumR = 0;
  for (let s = 0; s < spans.length; s++) {
    const [from, to] = spans[s]!;
    for (let i = from; i < to; i++) {
      const j = matched[s]![i - from]!;
      if (j < 0) continue;
      timeQ.push(query.timeFrames[i]!);
      timeR.push(reference.timeFrames[j]!);
      sumQ += query.timeFrames[i]!;
      sumR += reference.timeFrames[j]!;
      pitchSteps.push(reference.pitchSemitones[j]! - query.pitchSemitones[i]!);
    }
  }
  const n = timeQ.length;
  if (n < FIT_PEAKS_MIN) return null;
  const meanQ = sumQ / n;
  const meanR = sumR / n;
  let qq = 0;
  let qr = 0;
  for (let i = 0; i < n; i++) {
    const dq = timeQ[i]! - meanQ;
    qq += dq * dq;
    qr += dq * (timeR[i]! - meanR);
  }
  // All matches in one instant say nothing about speed; keep what is known and move the offset only.
  const a = qq > n ? qr / qq : before.a;
  pitchSteps.sort((x, y) => x - y);
  return { a, b: meanR - a * meanQ, c: pitchSteps[n >> 1]! };
}

export interface Score {
  hits: number;
  trials: number;
  /** Chance rate over the plain shifts; mean + 2.5 σ over all. */
  chance: number;
  chanceHigh: number;
  /** Largest rate over the shifts by multiples of half a second. */
  beatRate: number;
}

/** Counts coinciding peaks within the spans, and what chance gives at the shifted alignments (round the reference). */
export function scoreMap(query: Prepared, reference: Prepared, map: AffineMap, spans: Span[]): Score {
  let longest = 0;
  for (const [from, to] of spans) longest = Math.max(longest, to - from);
  const matched = new Int32Array(longest);
  let hits = 0;
  let trials = 0;
  for (const [from, to] of spans) {
    matchPeaks(query, reference, map, from, to, TIME_TOLERANCE_FRAMES, PITCH_TOLERANCE_SEMITONES, matched);
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
    const rate = shiftedRate(query, reference, map, spans, SHIFTS_S[s]! * FRAMES_PER_S);
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
      if (low < 0 || time < before) low = lowerBound(times, time - TIME_TOLERANCE_FRAMES);
      before = time;
      while (low < times.length && times[low]! < time - TIME_TOLERANCE_FRAMES) low++;
      const pitch = query.pitchSemitones[i]! + map.c;
      for (let j = low; j < times.length && times[j]! <= time + TIME_TOLERANCE_FRAMES; j++) {
        if (Math.abs(pitches[j]! - pitch) <= PITCH_TOLERANCE_SEMITONES) {
          hits++;
          break;
        }
      }
    }
  }
  return trials === 0 ? null : hits / trials;
}
