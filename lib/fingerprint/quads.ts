import { prominenceRank } from "./landmarks";
import { beyondBorder, QuestionList, type Questions, type References } from "./pairs";
import type { Prepared } from "./prepared";

/** Members stand 12 to 100 frames (0.28 to 2.3 s) behind the root, within ±30 semitones. */
const ZONE_MIN_FRAMES = 12;
const ZONE_MAX_FRAMES = 100;
const DP_MAX_SEMITONES = 30;
/** The query's zone is wider by the largest tempo change. */
const ZONE_WIDENING = 1.27;
const MEMBER_GAP_FRAMES = 6;
const REFERENCE_RANKS = 9;
const REFERENCE_MEMBERS = 4;
const QUERY_RANKS = 20;

const PITCH_STEPS_PER_SEMITONE = 2;
const RATIO_STEP = 0.03;
const PITCH_BORDER = 0.1;
const RATIO_BORDER = 0.2;
const PITCH_VALUES = 2 * DP_MAX_SEMITONES * PITCH_STEPS_PER_SEMITONE + 1;
const RATIO_VALUES = 34;

/** What the posting keeps: pitch of the root in thirds of a semitone, span in 1/64 octaves above 8 frames. */
const AUX_PITCH_STEPS = 3;
const AUX_SPAN_STEPS = 64;
const AUX_SPAN_ZERO_FRAMES = 8;

/** How many members a query's root takes, and how many of them may stand within six frames. */
export interface QuadDensity {
  members: number;
  crowd: number;
}
export const LEAN: QuadDensity = { members: 7, crowd: 2 };
export const FAST: QuadDensity = { members: 9, crowd: 2 };
export const DENSE: QuadDensity = { members: 12, crowd: 3 };

/**
 * Quads of a reference: four peaks described by what neither transposition nor a change of tempo alters.
 *
 * Source:  R. Sonnleitner, G. Widmer, "Robust Quad-Based Audio Fingerprinting", IEEE/ACM TASLP 24(3), 2016 (the idea:
 *          four peaks, sparse in the reference and dense in the query); the hash here is our own, on a log axis
 * Output:  hash of three pitch steps (half semitones) and two time ratios (0.03), mixed one to one into 32 bits;
 *          aux = absolute pitch and time span of the root, from which each hit tells its own transposition and tempo
 *          about 34 a second
 */
export function referenceQuads(peaks: Prepared): References {
  const members = membersBelow(peaks, REFERENCE_RANKS);
  const capacity = members.length * 4;
  const hash = new Uint32Array(capacity);
  const timeFrames = new Float64Array(capacity);
  const aux = new Uint16Array(capacity);
  const chosen: number[] = [];
  let count = 0;
  for (let i = 0; i < members.length; i++) {
    const root = members[i]!;
    choose(peaks, members, i, 1, { members: REFERENCE_MEMBERS, crowd: 1 }, chosen);
    for (let a = 0; a < chosen.length; a++) {
      for (let b = a + 1; b < chosen.length; b++) {
        for (let c = b + 1; c < chosen.length; c++) {
          const quad = measureQuad(peaks, root, chosen[a]!, chosen[b]!, chosen[c]!);
          hash[count] = quadHash(
            Math.round(quad.dp2),
            Math.round(quad.dp3),
            Math.round(quad.dp4),
            Math.round(quad.ratio2),
            Math.round(quad.ratio3),
          );
          timeFrames[count] = peaks.timeFrames[root]!;
          aux[count] = packAux(peaks.pitchSemitones[root]!, quad.span);
          count++;
        }
      }
    }
  }
  return { count, hash, timeFrames, aux };
}

/** The quads a query asks for: more members to a root, a wider zone, and both sides of near borders. */
export function queryQuads(peaks: Prepared, density: QuadDensity): Questions {
  const members = membersBelow(peaks, QUERY_RANKS);
  const out = new QuestionList(members.length * 100);
  const chosen: number[] = [];
  for (let i = 0; i < members.length; i++) {
    const root = members[i]!;
    choose(peaks, members, i, ZONE_WIDENING, density, chosen);
    for (let a = 0; a < chosen.length; a++) {
      for (let b = a + 1; b < chosen.length; b++) {
        for (let c = b + 1; c < chosen.length; c++) {
          askQuad(out, peaks, root, measureQuad(peaks, root, chosen[a]!, chosen[b]!, chosen[c]!));
        }
      }
    }
  }
  return out.questions();
}

export function auxPitchSemitones(aux: number): number {
  return (aux >> 8) / AUX_PITCH_STEPS;
}
export function auxSpanFrames(aux: number): number {
  return AUX_SPAN_ZERO_FRAMES * 2 ** ((aux & 255) / AUX_SPAN_STEPS);
}

function packAux(pitch: number, span: number): number {
  const steps = Math.round(Math.log2(span / AUX_SPAN_ZERO_FRAMES) * AUX_SPAN_STEPS);
  return (Math.min(255, Math.round(pitch * AUX_PITCH_STEPS)) << 8) | Math.min(255, Math.max(0, steps));
}

interface Quad {
  dp2: number;
  dp3: number;
  dp4: number;
  ratio2: number;
  ratio3: number;
  span: number;
}

/** Written over on every call: tens of thousands of quads a minute leave nothing to collect. */
const scratch: Quad = { dp2: 0, dp3: 0, dp4: 0, ratio2: 0, ratio3: 0, span: 0 };

function measureQuad(peaks: Prepared, first: number, second: number, third: number, fourth: number): Quad {
  const { timeFrames: t, pitchSemitones: p } = peaks;
  const span = t[fourth]! - t[first]!;
  scratch.dp2 = (p[second]! - p[first]!) * PITCH_STEPS_PER_SEMITONE;
  scratch.dp3 = (p[third]! - p[first]!) * PITCH_STEPS_PER_SEMITONE;
  scratch.dp4 = (p[fourth]! - p[first]!) * PITCH_STEPS_PER_SEMITONE;
  scratch.ratio2 = (t[second]! - t[first]!) / span / RATIO_STEP;
  scratch.ratio3 = (t[third]! - t[first]!) / span / RATIO_STEP;
  scratch.span = span;
  return scratch;
}

/** The most prominent members of the root's zone, put back into order of time. */
function choose(
  peaks: Prepared,
  members: Uint32Array,
  at: number,
  widening: number,
  density: QuadDensity,
  chosen: number[],
): void {
  const { timeFrames, pitchSemitones, ranks } = peaks;
  const root = members[at]!;
  const fromFrames = timeFrames[root]! + ZONE_MIN_FRAMES / widening;
  const toFrames = timeFrames[root]! + ZONE_MAX_FRAMES * widening;
  zone.length = 0;
  for (let j = at + 1; j < members.length; j++) {
    const member = members[j]!;
    if (timeFrames[member]! > toFrames) break;
    if (timeFrames[member]! < fromFrames) continue;
    if (Math.abs(pitchSemitones[member]! - pitchSemitones[root]!) <= DP_MAX_SEMITONES) zone.push(member);
  }
  zone.sort((x, y) => prominenceRank(ranks[x]!) - prominenceRank(ranks[y]!) || x - y);
  chosen.length = 0;
  for (let j = 0; j < zone.length && chosen.length < density.members; j++) {
    const member = zone[j]!;
    let crowd = 0;
    for (let k = 0; k < chosen.length; k++) {
      if (Math.abs(timeFrames[chosen[k]!]! - timeFrames[member]!) < MEMBER_GAP_FRAMES) crowd++;
    }
    if (crowd < density.crowd) chosen.push(member);
  }
  chosen.sort((x, y) => x - y);
}
const zone: number[] = [];

const own = new Int32Array(5);
const other = new Int32Array(5);

function askQuad(out: QuestionList, peaks: Prepared, root: number, quad: Quad): void {
  let open = 0;
  for (let i = 0; i < 5; i++) {
    const value =
      i === 0 ? quad.dp2 : i === 1 ? quad.dp3 : i === 2 ? quad.dp4 : i === 3 ? quad.ratio2 : quad.ratio3;
    own[i] = Math.round(value);
    other[i] = beyondBorder(value, own[i]!, i < 3 ? PITCH_BORDER : RATIO_BORDER);
    if (other[i] !== own[i]) open |= 1 << i;
  }
  const time = peaks.timeFrames[root]!;
  const pitch = peaks.pitchSemitones[root]!;
  for (let mask = open; ; mask = (mask - 1) & open) {
    const hash = quadHash(
      mask & 1 ? other[0]! : own[0]!,
      mask & 2 ? other[1]! : own[1]!,
      mask & 4 ? other[2]! : own[2]!,
      mask & 8 ? other[3]! : own[3]!,
      mask & 16 ? other[4]! : own[4]!,
    );
    out.add(hash, time, root, pitch, quad.span);
    if (mask === 0) break;
  }
}

/** Exact below 2³² (121³ · 34² = 2 047 924 516), then mixed one to one so that buckets fill evenly. */
function quadHash(dp2: number, dp3: number, dp4: number, ratio2: number, ratio3: number): number {
  const middle = DP_MAX_SEMITONES * PITCH_STEPS_PER_SEMITONE;
  const pitches = ((dp2 + middle) * PITCH_VALUES + dp3 + middle) * PITCH_VALUES + dp4 + middle;
  const key = (pitches * RATIO_VALUES + ratio2) * RATIO_VALUES + ratio3;
  // Xor-shifts and odd multipliers (2³² over the golden ratio, Knuth's choice) are one to one on 32 bits.
  let h = Math.imul(key ^ (key >>> 15), 0x9e3779b1);
  h = Math.imul(h ^ (h >>> 16), 0x9e3779b1);
  return (h ^ (h >>> 14)) >>> 0;
}

function membersBelow(peaks: Prepared, ranks: number): Uint32Array {
  const out = new Uint32Array(peaks.count);
  let count = 0;
  for (let i = 0; i < peaks.count; i++) if (prominenceRank(peaks.ranks[i]!) < ranks) out[count++] = i;
  return out.subarray(0, count);
}
