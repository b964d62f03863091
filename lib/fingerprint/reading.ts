import type { Questions } from "./pairs";
import { findEnd, findStart, type Postings } from "./postings";
import type { Segment } from "./segment";
import { FRAMES_PER_S } from "./settings";

/** Each ten seconds of the query read no more postings than their budget: an excerpt keeps its share. */
export const BLOCK_FRAMES = 10 * FRAMES_PER_S;

export interface ReadCounts {
  questions: number;
  found: number;
  read: number;
}

/** Called for each posting read; `question` ascends within a block. */
export type PostingSink = (segment: number, question: number, posting: number) => void;

/**
 * Asks the questions [from, to) and reads the postings of the rarest hashes first, until the budget is spent; the
 * postings themselves are handed on in order of question.
 */
export function readRarest(
  segments: Segment[],
  of: (segment: Segment) => Postings,
  questions: Questions,
  from: number,
  to: number,
  budget: number,
  counts: ReadCounts,
  sink: PostingSink,
): void {
  const asked = to - from;
  if (asked === 0 || segments.length === 0) return;
  const postings = segments.map(of);
  const starts = new Uint32Array(asked * segments.length);
  const sizes = new Uint32Array(asked);
  let total = 0;
  for (let s = 0; s < postings.length; s++) {
    const part = postings[s]!;
    for (let i = 0; i < asked; i++) {
      const hash = questions.hash[from + i]!;
      const start = findStart(part, hash);
      const size = findEnd(part, hash, start) - start;
      starts[s * asked + i] = start;
      sizes[i]! += size;
      total += size;
    }
  }
  counts.questions += asked;
  counts.found += total;
  const limit = sizeLimit(sizes, total, budget);
  for (let i = 0; i < asked; i++) {
    if (sizes[i] === 0 || sizes[i]! > limit) continue;
    counts.read += sizes[i]!;
    for (let s = 0; s < postings.length; s++) {
      const part = postings[s]!;
      const start = starts[s * asked + i]!;
      const end = findEnd(part, questions.hash[from + i]!, start);
      for (let p = start; p < end; p++) sink(s, from + i, p);
    }
  }
}

/** The largest size still read: all sizes up to it together stay within the budget. */
function sizeLimit(sizes: Uint32Array, total: number, budget: number): number {
  if (total <= budget) return 0xffffffff;
  const sorted = sizes.slice().sort();
  let spent = 0;
  for (let i = 0; i < sorted.length; ) {
    let end = i;
    while (end < sorted.length && sorted[end] === sorted[i]) end++;
    spent += (end - i) * sorted[i]!;
    if (spent > budget) return Math.max(0, sorted[i]! - 1);
    i = end;
  }
  return 0xffffffff;
}

/** Borders of the ten-second blocks in a list of questions ordered by time. */
export function blockBorders(questions: Questions, lengthFrames: number): Uint32Array {
  const blocks = Math.max(1, Math.ceil(lengthFrames / BLOCK_FRAMES));
  const borders = new Uint32Array(blocks + 1);
  let at = 0;
  for (let block = 0; block < blocks; block++) {
    borders[block] = at;
    while (at < questions.count && questions.timeFrames[at]! < (block + 1) * BLOCK_FRAMES) at++;
  }
  borders[blocks] = questions.count;
  return borders;
}
