import { type AffineMap, matchPeaks, type Span, type Tolerance } from "./alignment";
import type { Prepared } from "./prepared";
import { FRAMES_PER_S } from "./settings";

/** A passage ends where its running score has fallen this far: some 35 misses in a row of a clear copy. */
const DROP_NATS = 30;
/**
 * A passage must coincide at this many moments (cells of six frames, 0.14 s) and last this long: the peaks of one chord
 * are one event, and one chord shared with another piece, or played backwards, is no passage.
 */
const MOMENT_FRAMES = 6;
const MOMENTS_MIN = 7;
const PASSAGE_FRAMES_MIN = 1.5 * FRAMES_PER_S;

/**
 * Stretches of the query that agree with the reference under a map: maximal-scoring segments over the query's peaks
 * with weight ln(p1/p0) for a coinciding peak and ln((1−p1)/(1−p0)) for one that does not.
 *
 * Source:  Kadane's scan (J. Bentley, CACM 27(9), 1984), cut where the running score drops by 30 nats below its best, so
 *          that two long passages do not swallow what was replaced between them
 * Input:   rate p1 expected of a copy, chance p0; least score of a passage in nats
 * Output:  spans of query peaks, each beginning and ending with a coinciding peak
 */
export function matchingSpans(
  query: Prepared,
  reference: Prepared,
  map: AffineMap,
  rate: number,
  chance: number,
  leastNats: number,
  tolerance: Tolerance,
): Span[] {
  const matched = new Int32Array(query.count);
  matchPeaks(query, reference, map, 0, query.count, tolerance, matched);
  const hit = Math.log(rate / chance);
  const miss = Math.log((1 - rate) / (1 - chance));
  return maximalSpans(matched, hit, miss, leastNats).filter(([from, to]) =>
    lasts(query.timeFrames, matched, from, to),
  );
}

function lasts(timeFrames: Float64Array, matched: Int32Array, from: number, to: number): boolean {
  if (timeFrames[to - 1]! - timeFrames[from]! < PASSAGE_FRAMES_MIN) return false;
  let moments = 0;
  let last = Number.NEGATIVE_INFINITY;
  for (let i = from; i < to; i++) {
    if (matched[i]! < 0 || timeFrames[i]! - last < MOMENT_FRAMES) continue;
    moments++;
    last = timeFrames[i]!;
  }
  return moments >= MOMENTS_MIN;
}

/** The scan itself over −2 (outside), −1 (miss) and hits. */
export function maximalSpans(matched: Int32Array, hit: number, miss: number, leastNats: number): Span[] {
  const spans: Span[] = [];
  let i = 0;
  while (i < matched.length) {
    if (matched[i]! < 0) {
      i++;
      continue;
    }
    const from = i;
    let score = 0;
    let best = 0;
    let bestEnd = i;
    for (; i < matched.length && matched[i] !== -2; i++) {
      score += matched[i]! >= 0 ? hit : miss;
      if (score > best) {
        best = score;
        bestEnd = i + 1;
      }
      if (score <= 0 || score < best - DROP_NATS) break;
    }
    // A scan that sank to zero holds no better start; one that was cut may hold another after its best end.
    if (best >= leastNats) {
      spans.push([from, bestEnd]);
      i = bestEnd;
    } else i++;
  }
  return spans;
}
