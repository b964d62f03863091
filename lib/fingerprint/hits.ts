import { type AffineMap, matchPeaks, type Span, TOLERANCES } from "./alignment";
import type { Fingerprint } from "./fingerprint";
import type { Prepared } from "./prepared";
import { evidenceNats } from "./score";
import { FRAME_SAMPLES, framesToS, SAMPLE_RATE_HZ } from "./settings";
import { type Alignment, PASSAGE_NATS_MIN } from "./verify";

export type Channel = "mid" | "left" | "right";
export type RelationHint = "same recording" | "altered copy" | "excerpt" | "shared material";

/** How closely the peaks coincide: within 16 ms, 26 ms or 37 ms. Copies are close or fair; other takes are loose. */
export type Fit = "close" | "fair" | "loose";
const FITS: readonly Fit[] = ["close", "fair", "loose"];

/** A stretch of the query that follows the reference. `speed` and `pitchSemitones` describe the query against it. */
export interface Passage {
  startS: number;
  endS: number;
  refStartS: number;
  refEndS: number;
  speed: number;
  pitchSemitones: number;
  landmarksMatched: number;
  landmarksTotal: number;
  evidence: number;
}

export interface Hit {
  id: string;
  relationHint: RelationHint;
  /** Log-likelihood ratio of the best alignment, nats. */
  evidence: number;
  /** The same against mean + 2.5 σ of the shifted alignments, half of them on the beat. */
  evidence2: number;
  /** Share of the query's landmarks that coincide, on the best alignment's passages. */
  matchedShare: number;
  /** The share that shifted alignments reach: mean + 2.5 σ. */
  chanceShare: number;
  fit: Fit;
  /** Expected number of such hits in screening one honest recording; null until calibrated. */
  chance: number | null;
  speed: number;
  pitchSemitones: number;
  coverageQuery: number;
  coverageReference: number;
  /** The query runs backwards against the reference: a passage's start corresponds to its reference's end. */
  reversed: boolean;
  channel: Channel | null;
  passages: Passage[];
  /** The reference agrees with itself almost as well at other places: drones, one-bar loops. */
  lowDistinctiveness: boolean;
}

/** The first peak of a passage stands this far inside it and the last this far before its end: a quarter of a frame. */
const EDGE_S = FRAME_SAMPLES / 4 / SAMPLE_RATE_HZ;
/** A share of chance this near to the share seen is no distinction. */
const DISTINCT_SHARE = 0.5;
const SAME_SPEED = 0.003;
const SAME_PITCH_SEMITONES = 0.05;
const WHOLE = 0.9;
/** Passages whose offsets differ by more were cut and moved. */
const EDIT_MIN_S = 0.5;
/** Repeats of one stretch of the reference no longer than this are a loop. */
const LOOP_MAX_S = 20;
/** Less is found between any two recordings. */
const HIT_NATS_MIN = 25;
/** A further alignment of the same recording must stand by itself, or chance alignments would fill the gaps. */
const FURTHER_NATS_MIN = 35;
const FURTHER_NATS2_MIN = 15;
/** Share of landmarks from which an alignment of each fit is more than a shared pulse. */
export const SHARE_MIN: Readonly<Record<Fit, number>> = Object.freeze({
  close: 0.13,
  fair: 0.16,
  loose: 0.6,
});
/** Of a passage already explained by a surer one, this much must be new. */
const NEW_SHARE = 0.5;
const NEW_MIN_S = 1.5;

export function makeHit(
  id: string,
  queryFp: Fingerprint,
  referenceFp: Fingerprint,
  query: Prepared,
  reference: Prepared,
  alignments: Alignment[],
  reversed: boolean,
): Hit | null {
  const ranked = [...alignments].sort((x, y) => y.evidence - x.evidence);
  const best = ranked[0];
  if (best === undefined || best.evidence < HIT_NATS_MIN) return null;
  const passages: Passage[] = [];
  const stretches = ranked
    .filter((one) => one === best || standsAlone(one))
    .flatMap((one) => stretchesOf(query, reference, one));
  stretches.sort((x, y) => y.evidence - x.evidence);
  for (const stretch of stretches) addPassages(passages, query, reference, stretch);
  if (passages.length === 0) return null;
  passages.sort((x, y) => x.startS - y.startS);
  widen(passages, queryFp.durationS, referenceFp.durationS);
  const coverageQuery = share(union(passages.map((p) => [p.startS, p.endS])), queryFp.contentS);
  const coverageReference = share(union(passages.map((p) => [p.refStartS, p.refEndS])), referenceFp.contentS);
  const rate = best.score.hits / best.score.trials;
  return {
    id,
    relationHint: hint(passages, best.map, coverageQuery, coverageReference),
    evidence: best.evidence,
    evidence2: best.evidence2,
    matchedShare: rate,
    chanceShare: best.score.chanceHigh,
    fit: fitOf(best),
    chance: null,
    speed: best.map.a,
    pitchSemitones: best.map.c === 0 ? 0 : -best.map.c,
    coverageQuery,
    coverageReference,
    reversed,
    channel: null,
    passages: reversed ? passages.map((p) => turnRound(p, queryFp.durationS)).reverse() : passages,
    lowDistinctiveness: best.score.chanceHigh >= DISTINCT_SHARE * rate,
  };
}

/** Gives passages the edges that the analysis frame took from them, as far as neighbours and both recordings leave room. */
function widen(passages: Passage[], durationS: number, referenceDurationS: number): void {
  for (let i = 0; i < passages.length; i++) {
    const passage = passages[i]!;
    const before = i === 0 ? 0 : passages[i - 1]!.endS;
    const after = i + 1 === passages.length ? durationS : passages[i + 1]!.startS;
    const atStart = Math.min(EDGE_S, Math.max(0, passage.startS - before), passage.refStartS / passage.speed);
    const room = Math.max(0, referenceDurationS - passage.refEndS) / passage.speed;
    const atEnd = Math.min(EDGE_S, Math.max(0, (after - passage.endS) / 2), room);
    passage.startS -= atStart;
    passage.refStartS -= atStart * passage.speed;
    passage.endS += atEnd;
    passage.refEndS += atEnd * passage.speed;
  }
}

function standsAlone(alignment: Alignment): boolean {
  const { evidence, evidence2, score } = alignment;
  return (
    evidence >= FURTHER_NATS_MIN &&
    evidence2 >= FURTHER_NATS2_MIN &&
    score.hits >= SHARE_MIN[fitOf(alignment)] * score.trials
  );
}

function fitOf(alignment: Alignment): Fit {
  return FITS[TOLERANCES.indexOf(alignment.score.tolerance)] ?? "loose";
}

function turnRound(passage: Passage, durationS: number): Passage {
  return { ...passage, startS: durationS - passage.endS, endS: durationS - passage.startS };
}

/** One span of one alignment, with the evidence of its own peaks. */
interface Stretch {
  alignment: Alignment;
  span: Span;
  evidence: number;
}

function stretchesOf(query: Prepared, reference: Prepared, alignment: Alignment): Stretch[] {
  return alignment.spans.map((span) => {
    const startS = framesToS(query.timeFrames[span[0]]!);
    const endS = framesToS(query.timeFrames[span[1] - 1]!);
    const { evidence } = describePassage(query, reference, alignment, span, startS, endS);
    return { alignment, span, evidence };
  });
}

/** Adds what of a stretch no surer one has explained: the surest stretch first, whichever alignment it belongs to. */
function addPassages(passages: Passage[], query: Prepared, reference: Prepared, stretch: Stretch): void {
  const { alignment, span } = stretch;
  const taken = passages.map((p): [number, number] => [p.startS, p.endS]);
  const startS = framesToS(query.timeFrames[span[0]]!);
  const endS = framesToS(query.timeFrames[span[1] - 1]!);
  const rest = subtract([startS, endS], taken);
  const restS = rest.reduce((sum, [from, to]) => sum + to - from, 0);
  if (restS < NEW_SHARE * (endS - startS)) return;
  for (const [from, to] of rest) {
    if (to - from < Math.min(NEW_MIN_S, endS - startS)) continue;
    const passage = describePassage(query, reference, alignment, span, from, to);
    if (passage.evidence >= PASSAGE_NATS_MIN) passages.push(passage);
  }
}

function describePassage(
  query: Prepared,
  reference: Prepared,
  alignment: Alignment,
  span: Span,
  startS: number,
  endS: number,
): Passage {
  let from = span[0];
  let to = span[1];
  while (from < to && framesToS(query.timeFrames[from]!) < startS) from++;
  while (to > from && framesToS(query.timeFrames[to - 1]!) > endS) to--;
  const matched = new Int32Array(to - from);
  const { map } = alignment;
  matchPeaks(query, reference, map, from, to, alignment.score.tolerance, matched);
  let hits = 0;
  for (const index of matched) if (index >= 0) hits++;
  const atFrames = (s: number): number => map.a * query.timeFrames[s]! + map.b;
  return {
    startS,
    endS,
    refStartS: framesToS(from < to ? atFrames(from) : 0),
    refEndS: framesToS(from < to ? atFrames(to - 1) : 0),
    speed: map.a,
    pitchSemitones: map.c === 0 ? 0 : -map.c,
    landmarksMatched: hits,
    landmarksTotal: to - from,
    evidence: evidenceNats(hits, to - from, alignment.score.chance),
  };
}

function hint(
  passages: Passage[],
  map: AffineMap,
  coverageQuery: number,
  coverageReference: number,
): RelationHint {
  const altered = Math.abs(map.a - 1) > SAME_SPEED || Math.abs(map.c) > SAME_PITCH_SEMITONES;
  if (coverageQuery >= WHOLE && coverageReference >= WHOLE) {
    const edited = passages.some(
      (passage) => Math.abs(offsetS(passage) - offsetS(passages[0]!)) > EDIT_MIN_S,
    );
    return altered || edited ? "altered copy" : "same recording";
  }
  if (repeats(passages)) return "shared material";
  return altered ? "altered copy" : "excerpt";
}

function offsetS(passage: Passage): number {
  return passage.refStartS - passage.speed * passage.startS;
}

/** At least two passages take the same short stretch of the reference. */
function repeats(passages: Passage[]): boolean {
  const short = passages.filter((p) => p.endS - p.startS <= LOOP_MAX_S);
  if (short.length < 2 || 2 * short.length < passages.length) return false;
  let repeated = 0;
  for (const one of short) {
    const same = short.some((other) => {
      if (other === one) return false;
      const overlap = Math.min(one.refEndS, other.refEndS) - Math.max(one.refStartS, other.refStartS);
      return overlap > 0.5 * Math.min(one.refEndS - one.refStartS, other.refEndS - other.refStartS);
    });
    if (same) repeated++;
  }
  return 2 * repeated > short.length;
}

function union(spans: [number, number][]): number {
  const sorted = [...spans].sort((x, y) => x[0] - y[0]);
  let total = 0;
  let end = Number.NEGATIVE_INFINITY;
  for (const [from, to] of sorted) {
    if (to <= end) continue;
    total += to - Math.max(from, end);
    end = to;
  }
  return total;
}

function subtract(span: [number, number], taken: [number, number][]): [number, number][] {
  let rest: [number, number][] = [span];
  for (const [from, to] of taken) {
    rest = rest.flatMap(([a, b]): [number, number][] => {
      if (to <= a || from >= b) return [[a, b]];
      const out: [number, number][] = [];
      if (from > a) out.push([a, from]);
      if (to < b) out.push([to, b]);
      return out;
    });
  }
  return rest;
}

function share(partS: number, wholeS: number): number {
  return wholeS <= 0 ? 0 : Math.min(1, partS / wholeS);
}
