import { type AffineMap, matchPeaks, TOLERANCES } from "./alignment";
import type { Fingerprint } from "./fingerprint";
import type { Prepared } from "./prepared";
import { evidenceNats } from "./score";
import { FRAME_SAMPLES, framesToS, SAMPLE_RATE_HZ } from "./settings";
import { type Stretch, shareOut } from "./stretches";
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
const PASSAGE_MIN_S = 1.5;

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
  const believed = ranked.filter((alignment) => alignment === best || standsAlone(alignment));
  const passages = shareOut(query, reference, believed)
    .map((stretch) => describePassage(query, reference, stretch))
    .filter((p) => p.evidence >= PASSAGE_NATS_MIN && p.endS - p.startS >= PASSAGE_MIN_S);
  if (passages.length === 0) return null;
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

function describePassage(query: Prepared, reference: Prepared, stretch: Stretch): Passage {
  const { alignment, from, to } = stretch;
  const { map } = alignment;
  const matched = new Int32Array(to - from);
  matchPeaks(query, reference, map, from, to, alignment.score.tolerance, matched);
  let hits = 0;
  for (const index of matched) if (index >= 0) hits++;
  const first = query.timeFrames[from]!;
  const last = query.timeFrames[to - 1]!;
  return {
    startS: framesToS(first),
    endS: framesToS(last),
    refStartS: framesToS(map.a * first + map.b),
    refEndS: framesToS(map.a * last + map.b),
    speed: map.a,
    pitchSemitones: map.c === 0 ? 0 : -map.c,
    landmarksMatched: hits,
    landmarksTotal: to - from,
    evidence: evidenceNats(hits, to - from, alignment.score.chance),
  };
}

export function isAltered({ speed, pitchSemitones }: Pick<Hit, "speed" | "pitchSemitones">): boolean {
  return Math.abs(speed - 1) > SAME_SPEED || Math.abs(pitchSemitones) > SAME_PITCH_SEMITONES;
}

function hint(
  passages: Passage[],
  map: AffineMap,
  coverageQuery: number,
  coverageReference: number,
): RelationHint {
  const altered = isAltered({ speed: map.a, pitchSemitones: -map.c });
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

function share(partS: number, wholeS: number): number {
  return wholeS <= 0 ? 0 : Math.min(1, partS / wholeS);
}
