import { lowerBound, type Prepared } from "./prepared";
import { PITCH_SHIFT_MAX_SEMITONES, SPEED_MAX, SPEED_MIN } from "./settings";

/** t_r = a·t_q + b in frames, p_r = p_q + c in semitones; q the query, r the reference. */
export interface AffineMap {
  a: number;
  b: number;
  c: number;
}

/** How near two peaks must lie to coincide. */
export interface Tolerance {
  frames: number;
  semitones: number;
}

/**
 * The three at which a map is scored; the one that speaks loudest is kept. Plain copies line up within a fraction of a
 * frame, so the tight one leaves chance an eighth of the room; time stretching smears peaks over the wide one.
 */
export const TOLERANCES: readonly Tolerance[] = [
  { frames: 0.7, semitones: 0.15 },
  { frames: 1.1, semitones: 0.2 },
  { frames: 1.6, semitones: 0.3 },
];
const FIT_TOLERANCES: readonly Tolerance[] = [
  { frames: 3, semitones: 0.6 },
  { frames: 2.4, semitones: 0.45 },
  { frames: 1.9, semitones: 0.35 },
  { frames: 1.6, semitones: 0.3 },
];
const FIT_PEAKS_MIN = 6;

export function inRange(map: AffineMap): boolean {
  return map.a >= SPEED_MIN && map.a <= SPEED_MAX && Math.abs(map.c) <= PITCH_SHIFT_MAX_SEMITONES;
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
  tolerance: Tolerance,
  out: Int32Array,
): void {
  const { frames: timeTolerance, semitones: pitchTolerance } = tolerance;
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
  for (let round = FIT_TOLERANCES.length - rounds; round < FIT_TOLERANCES.length; round++) {
    for (let s = 0; s < spans.length; s++) {
      const [from, to] = spans[s]!;
      matchPeaks(query, reference, map, from, to, FIT_TOLERANCES[round]!, matched[s]!);
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
