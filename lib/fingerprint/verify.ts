import { type AffineMap, inRange, refine, type Span } from "./alignment";
import type { Candidate } from "./candidates";
import { matchingSpans } from "./passages";
import { lowerBound, type Prepared } from "./prepared";
import { bestScore, evidenceNats, type Score } from "./score";

/** A verified map with the spans of query peaks that follow it. */
export interface Alignment {
  map: AffineMap;
  spans: Span[];
  score: Score;
  evidence: number;
  evidence2: number;
}

/** A first fit weaker than this is not followed up. */
const WINDOW_NATS_MIN = 10;
/** A passage weaker than this is not reported. */
export const PASSAGE_NATS_MIN = 18;
/** The rate a passage is expected to show, as a share of the rate seen; less than all, so that its worse parts stay. */
const RATE_SHARE = 0.7;
const RATE_MIN = 0.2;
const RATE_MAX = 0.6;
const GROWTH_ROUNDS = 4;
/** Two maps this near at the middle of the window are one. */
const SAME_MAP_FRAMES = 8;
const SAME_MAP_SEMITONES = 0.5;

/**
 * Turns a candidate into an alignment: fit on the part that voted, find every stretch of the query that follows the map,
 * fit again on all of them, until nothing changes.
 */
export function verifyCandidate(
  query: Prepared,
  reference: Prepared,
  candidate: Candidate,
): Alignment | null {
  const from = lowerBound(query.timeFrames, candidate.fromFrames);
  const to = lowerBound(query.timeFrames, candidate.toFrames);
  if (to - from < 8) return null;
  const first = refine(query, reference, candidate.map, [[from, to]]);
  if (first === null) return null;
  const score = bestScore(query, reference, first, [[from, to]]);
  if (evidenceNats(score.hits, score.trials, score.chance) < WINDOW_NATS_MIN) return null;
  return grow(query, reference, first, score);
}

function grow(query: Prepared, reference: Prepared, start: AffineMap, startScore: Score): Alignment | null {
  let map = start;
  let score = startScore;
  let spans: Span[] = [];
  for (let round = 0; round < GROWTH_ROUNDS; round++) {
    const { rate, chance } = expectedRates(score);
    const found = matchingSpans(query, reference, map, rate, chance, PASSAGE_NATS_MIN, score.tolerance);
    if (found.length === 0) return null;
    const next = refine(query, reference, map, found, 2);
    if (next === null) return null;
    const unchanged = round > 0 && sameSpans(found, spans);
    spans = found;
    map = next;
    score = bestScore(query, reference, map, spans);
    if (score.trials === 0) return null;
    if (unchanged) break;
  }
  if (!inRange(map)) return null;
  return {
    map,
    spans,
    score,
    evidence: evidenceNats(score.hits, score.trials, score.chance),
    evidence2: evidenceNats(score.hits, score.trials, score.chanceHigh),
  };
}

/** The rates of coincidence by which a passage is told from its surroundings. */
export function expectedRates(score: Score): { rate: number; chance: number } {
  const rate = Math.max(RATE_MIN, Math.min(RATE_MAX, RATE_SHARE * (score.hits / score.trials)));
  return { rate, chance: Math.min(score.chance, rate / 2) };
}

function sameSpans(one: Span[], other: Span[]): boolean {
  return (
    one.length === other.length && one.every(([from, to], i) => from === other[i]![0] && to === other[i]![1])
  );
}

/** Whether an alignment already says what the candidate proposes. */
export function explains(query: Prepared, alignment: Alignment, candidate: Candidate): boolean {
  const middle = (candidate.fromFrames + candidate.toFrames) / 2;
  const { map } = alignment;
  const near =
    Math.abs(map.a * middle + map.b - (candidate.map.a * middle + candidate.map.b)) < SAME_MAP_FRAMES &&
    Math.abs(map.c - candidate.map.c) < SAME_MAP_SEMITONES;
  if (!near) return false;
  return alignment.spans.some(
    ([from, to]) => query.timeFrames[from]! <= middle && query.timeFrames[to - 1]! >= middle,
  );
}
