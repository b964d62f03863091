import { type Channel, type Fit, type Hit, isAltered, SHARE_MIN } from "./hits";

export interface Thresholds {
  /** Nats of LLR and LLR2 from which a hit is held. */
  holdEvidence: number;
  holdEvidence2: number;
  /** An altered copy needs more: with speed and pitch free, far more places were tried. */
  holdEvidenceAltered: number;
  /** Share of landmarks that must coincide: the looser the fit, the more. Copies, however altered, fit close or fair on real
   *  music; another take of the same notes, or the same pattern by the same sampler, fits loosely. */
  holdShare: Readonly<Record<Fit, number>>;
  /** The share needed where the reference agrees with itself almost as well elsewhere. */
  holdShareIndistinct: number;
  /** From which it is shown to a person on request. */
  weakEvidence: number;
  weakEvidence2: number;
}

/** Chosen on wrong pairs of real music; the figures stand in the README. */
export const DEFAULT_THRESHOLDS: Readonly<Thresholds> = Object.freeze({
  holdEvidence: 100,
  holdEvidence2: 50,
  holdEvidenceAltered: 150,
  holdShare: SHARE_MIN,
  holdShareIndistinct: 0.5,
  weakEvidence: 50,
  weakEvidence2: 8,
});

export type Band = "hold" | "weak" | "ignore";

export function band(hit: Hit, thresholds: Readonly<Thresholds> = DEFAULT_THRESHOLDS): Band {
  const { evidence, evidence2, matchedShare, fit } = hit;
  const indistinctMin = hit.lowDistinctiveness ? thresholds.holdShareIndistinct : 0;
  if (
    evidence >= (isAltered(hit) ? thresholds.holdEvidenceAltered : thresholds.holdEvidence) &&
    evidence2 >= thresholds.holdEvidence2 &&
    matchedShare >= Math.max(indistinctMin, thresholds.holdShare[fit])
  ) {
    return "hold";
  }
  return evidence >= thresholds.weakEvidence && evidence2 >= thresholds.weakEvidence2 ? "weak" : "ignore";
}

/** One side must show this many times the evidence of the other to be named alone. */
const SIDE_RATIO = 2.5;

/**
 * Joins the hits of several searches of one recording (mid, left, right): one hit per reference, the surest, with the
 * channel it stands in. A side is named where it shows the reference much better than the other side, or, where only one
 * side was searched, than mid does.
 */
export function mergeChannelHits(byChannel: Partial<Record<Channel, Hit[]>>): Hit[] {
  const found = new Map<string, Partial<Record<Channel, Hit>>>();
  for (const channel of ["mid", "left", "right"] as const) {
    for (const hit of byChannel[channel] ?? []) {
      const key = `${hit.reversed ? "<" : ">"}${hit.id}`;
      const entry = found.get(key) ?? {};
      const known = entry[channel];
      if (known === undefined || hit.evidence > known.evidence) entry[channel] = hit;
      found.set(key, entry);
    }
  }
  const out: Hit[] = [];
  for (const entry of found.values()) {
    const channel = nameChannel(entry, byChannel.left !== undefined, byChannel.right !== undefined);
    const surest = entry[channel] ?? entry.mid ?? entry.left ?? entry.right;
    if (surest !== undefined) out.push({ ...surest, channel });
  }
  return oneWayEach(out);
}

function nameChannel(
  entry: Partial<Record<Channel, Hit>>,
  leftSearched: boolean,
  rightSearched: boolean,
): Channel {
  const mid = entry.mid?.evidence ?? 0;
  const left = entry.left?.evidence ?? 0;
  const right = entry.right?.evidence ?? 0;
  if (leftSearched && rightSearched) {
    if (left > mid && left >= SIDE_RATIO * right) return "left";
    if (right > mid && right >= SIDE_RATIO * left) return "right";
  } else if (left >= SIDE_RATIO * mid && left > 0) return "left";
  else if (right >= SIDE_RATIO * mid && right > 0) return "right";
  if (entry.mid !== undefined) return "mid";
  return left >= right ? "left" : "right";
}

/**
 * One hit per reference, the surest, surest first: whoever agrees forwards agrees a little backwards too, where chords and
 * drum beats mirror onto themselves.
 */
export function oneWayEach(hits: Hit[]): Hit[] {
  const seen = new Set<string>();
  return [...hits].sort(surestFirst).filter((hit) => {
    if (seen.has(hit.id)) return false;
    seen.add(hit.id);
    return true;
  });
}

/** Surest first; equal evidence in order of id, so that no result depends on the order of insertion. */
export function surestFirst(x: Hit, y: Hit): number {
  return y.evidence - x.evidence || (x.id < y.id ? -1 : x.id > y.id ? 1 : 0);
}
