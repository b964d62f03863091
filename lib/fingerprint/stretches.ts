import { matchPeaks } from "./alignment";
import type { Prepared } from "./prepared";
import { type Alignment, expectedRates } from "./verify";

/** A run of query peaks that one alignment explains better than any other, half open. */
export interface Stretch {
  alignment: Alignment;
  from: number;
  to: number;
}

/** Taking up an alignment costs this much, so that no few peaks of a repeated bar win a stretch from its neighbour. */
const CHANGE_NATS = 20;
const OUTSIDE = -1e9;

/**
 * Shares the query out among the alignments of one recording: the cheapest path through "none" and each of them, peak by
 * peak, where a peak that coincides earns ln(p1/p0), one that does not ln((1−p1)/(1−p0)), and none earns nothing.
 *
 * Source:  A. Viterbi, IEEE Trans. Information Theory 13(2), 1967
 * Output:  stretches in order of time, each beginning and ending with a coinciding peak; they do not overlap
 * Cost:    O(peaks · alignments) time; one byte of memory for each
 */
export function shareOut(query: Prepared, reference: Prepared, alignments: Alignment[]): Stretch[] {
  const count = query.count;
  const states = alignments.length;
  const gains = alignments.map((alignment) => gainsOf(query, reference, alignment));
  // cameFrom[i·states + s]: 1 where state s at peak i was taken up there, 0 where it went on.
  const takenUp = new Uint8Array(count * states);
  const bestBefore = new Int16Array(count);
  const score = new Float64Array(states).fill(OUTSIDE);
  let none = 0;
  let noneFrom = -1;
  for (let i = 0; i < count; i++) {
    bestBefore[i] = noneFrom;
    let best = none;
    let bestState = -1;
    for (let s = 0; s < states; s++) {
      const fresh = none - CHANGE_NATS;
      const before = score[s]!;
      if (fresh > before) takenUp[i * states + s] = 1;
      const next = Math.max(before, fresh) + gains[s]![i]!;
      score[s] = next;
      if (next > best) {
        best = next;
        bestState = s;
      }
    }
    if (bestState >= 0) noneFrom = bestState;
    else noneFrom = -1;
    none = best;
  }
  return walkBack(alignments, gains, takenUp, bestBefore, noneFrom);
}

/** Per query peak what the alignment earns there; far below nought outside its spans. */
function gainsOf(query: Prepared, reference: Prepared, alignment: Alignment): Float32Array {
  const { rate, chance } = expectedRates(alignment.score);
  const hit = Math.log(rate / chance);
  const miss = Math.log((1 - rate) / (1 - chance));
  const gains = new Float32Array(query.count).fill(OUTSIDE);
  for (const [from, to] of alignment.spans) {
    const matched = new Int32Array(to - from);
    matchPeaks(query, reference, alignment.map, from, to, alignment.score.tolerance, matched);
    for (let i = from; i < to; i++) gains[i] = matched[i - from]! >= 0 ? hit : miss;
  }
  return gains;
}

/** `bestBefore[i]`: the state that ends the best path up to peak i − 1; −1 where the path was already at "none". */
function walkBack(
  alignments: Alignment[],
  gains: Float32Array[],
  takenUp: Uint8Array,
  bestBefore: Int16Array,
  last: number,
): Stretch[] {
  const states = alignments.length;
  const out: Stretch[] = [];
  let i = bestBefore.length - 1;
  let state = last;
  while (i >= 0) {
    if (state < 0) {
      state = bestBefore[i]!;
      i--;
      continue;
    }
    let to = i + 1;
    while (i > 0 && takenUp[i * states + state] === 0) i--;
    let from = i;
    while (from < to && gains[state]![from]! <= 0) from++;
    while (to > from && gains[state]![to - 1]! <= 0) to--;
    if (to > from) out.push({ alignment: alignments[state]!, from, to });
    state = bestBefore[i]!;
    i--;
  }
  return out.reverse();
}
