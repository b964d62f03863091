import { BAND_RANK_MAX, bandRank } from "./landmarks";
import type { Prepared } from "./prepared";

/** Pairs look 2 to 63 frames ahead (46 ms to 1.46 s) and an octave up and down. */
const DT_MIN_FRAMES = 2;
const DT_MAX_FRAMES = 63;
const DP_MAX_SEMITONES = 12;
const STEPS_PER_SEMITONE = 4;
/** Reference: four loudest a second in each of four bands, three partners. Query: all of the index set, eight. */
const REFERENCE_RANKS = 4;
const REFERENCE_FAN = 3;
const QUERY_FAN = 8;
/** A value this close to the border of its step (in steps) is also asked for beyond it. */
const PITCH_BORDER = 0.1;
const TIME_BORDER = 0.2;

/** Index entries of one recording: hash and time of the earlier peak. */
export interface References {
  count: number;
  hash: Uint32Array;
  timeFrames: Float64Array;
  /** What the posting keeps beside the time; null where nothing. */
  aux: Uint16Array | null;
}

/** Questions of one query. */
export interface Questions {
  count: number;
  hash: Uint32Array;
  timeFrames: Float64Array;
  /** Number of the peak that the question starts from. */
  root: Uint32Array;
  pitchSemitones: Float32Array;
  /** For quads: time from the first to the last peak; zero for pairs. */
  spanFrames: Float32Array;
}

/**
 * Landmark pairs of a reference: first pitch, pitch step, time step.
 *
 * Source:  A. Wang (ISMIR 2003), with the frequency axis in quarter semitones
 * Output:  22-bit keys in the high bits of a 32-bit hash: pitch 9, step 7, time 6; about 48 a second
 */
export function referencePairs(peaks: Prepared): References {
  const members = membersBelow(peaks, REFERENCE_RANKS);
  const hash = new Uint32Array(members.length * REFERENCE_FAN);
  const timeFrames = new Float64Array(hash.length);
  let count = 0;
  for (let i = 0; i < members.length; i++) {
    const first = members[i]!;
    let fan = 0;
    for (let j = i + 1; j < members.length && fan < REFERENCE_FAN; j++) {
      const second = members[j]!;
      const dt = peaks.timeFrames[second]! - peaks.timeFrames[first]!;
      if (dt > DT_MAX_FRAMES + 0.49) break;
      const dp = peaks.pitchSemitones[second]! - peaks.pitchSemitones[first]!;
      if (dt < DT_MIN_FRAMES || Math.abs(dp) > DP_MAX_SEMITONES) continue;
      hash[count] = pairHash(
        Math.floor(peaks.pitchSemitones[first]! * STEPS_PER_SEMITONE),
        Math.round(dp * STEPS_PER_SEMITONE),
        Math.round(dt),
      );
      timeFrames[count] = peaks.timeFrames[first]!;
      count++;
      fan++;
    }
  }
  return { count, hash, timeFrames, aux: null };
}

/** The pairs a query asks for: denser than the reference's, and on both sides of a near border. */
export function queryPairs(peaks: Prepared): Questions {
  const members = membersBelow(peaks, BAND_RANK_MAX);
  const out = new QuestionList(members.length * QUERY_FAN * 2);
  for (let i = 0; i < members.length; i++) {
    const first = members[i]!;
    const pitch = peaks.pitchSemitones[first]!;
    let fan = 0;
    for (let j = i + 1; j < members.length && fan < QUERY_FAN; j++) {
      const second = members[j]!;
      const dt = peaks.timeFrames[second]! - peaks.timeFrames[first]!;
      if (dt > DT_MAX_FRAMES + 0.49) break;
      const dp = peaks.pitchSemitones[second]! - pitch;
      if (dt < DT_MIN_FRAMES || Math.abs(dp) > DP_MAX_SEMITONES) continue;
      fan++;
      askPair(out, peaks.timeFrames[first]!, first, pitch, dp, dt);
    }
  }
  return out.questions();
}

function askPair(out: QuestionList, time: number, root: number, pitch: number, dp: number, dt: number): void {
  const pitchValue = pitch * STEPS_PER_SEMITONE - 0.5;
  const stepValue = dp * STEPS_PER_SEMITONE;
  const p0 = Math.round(pitchValue);
  const s0 = Math.round(stepValue);
  const t0 = Math.round(dt);
  const p1 = beyondBorder(pitchValue, p0, PITCH_BORDER);
  const s1 = beyondBorder(stepValue, s0, PITCH_BORDER);
  const t1 = beyondBorder(dt, t0, TIME_BORDER);
  for (let mask = 0; mask < 8; mask++) {
    const p = mask & 1 ? p1 : p0;
    const s = mask & 2 ? s1 : s0;
    const t = mask & 4 ? t1 : t0;
    const repeated = (mask & 1 && p1 === p0) || (mask & 2 && s1 === s0) || (mask & 4 && t1 === t0);
    if (repeated || t < DT_MIN_FRAMES || t > DT_MAX_FRAMES || p < 0) continue;
    if (Math.abs(s) > DP_MAX_SEMITONES * STEPS_PER_SEMITONE) continue;
    out.add(pairHash(p, s, t), time, root, pitch, 0);
  }
}

/** The step on the other side of the border if `value` is within `border` of it, else `own`. */
export function beyondBorder(value: number, own: number, border: number): number {
  const inside = value - own;
  if (inside > 0.5 - border) return own + 1;
  if (inside < border - 0.5) return own - 1;
  return own;
}

function pairHash(pitchStep: number, dpSteps: number, dtFrames: number): number {
  const dp = dpSteps + DP_MAX_SEMITONES * STEPS_PER_SEMITONE;
  return (((pitchStep << 13) | (dp << 6) | dtFrames) << 10) >>> 0;
}

function membersBelow(peaks: Prepared, ranks: number): Uint32Array {
  const out = new Uint32Array(peaks.count);
  let count = 0;
  for (let i = 0; i < peaks.count; i++) if (bandRank(peaks.ranks[i]!) < ranks) out[count++] = i;
  return out.subarray(0, count);
}

/** Growing columns of questions. */
export class QuestionList {
  #count = 0;
  #hash: Uint32Array;
  #time: Float64Array;
  #root: Uint32Array;
  #pitch: Float32Array;
  #span: Float32Array;

  constructor(capacity: number) {
    const size = Math.max(64, capacity);
    this.#hash = new Uint32Array(size);
    this.#time = new Float64Array(size);
    this.#root = new Uint32Array(size);
    this.#pitch = new Float32Array(size);
    this.#span = new Float32Array(size);
  }

  add(hash: number, timeFrames: number, root: number, pitch: number, spanFrames: number): void {
    if (this.#count === this.#hash.length) this.#grow();
    const i = this.#count++;
    this.#hash[i] = hash;
    this.#time[i] = timeFrames;
    this.#root[i] = root;
    this.#pitch[i] = pitch;
    this.#span[i] = spanFrames;
  }

  questions(): Questions {
    return {
      count: this.#count,
      hash: this.#hash,
      timeFrames: this.#time,
      root: this.#root,
      pitchSemitones: this.#pitch,
      spanFrames: this.#span,
    };
  }

  #grow(): void {
    const size = 2 * this.#hash.length;
    const hash = new Uint32Array(size);
    hash.set(this.#hash);
    this.#hash = hash;
    const time = new Float64Array(size);
    time.set(this.#time);
    this.#time = time;
    const root = new Uint32Array(size);
    root.set(this.#root);
    this.#root = root;
    const pitch = new Float32Array(size);
    pitch.set(this.#pitch);
    this.#pitch = pitch;
    const span = new Float32Array(size);
    span.set(this.#span);
    this.#span = span;
  }
}
