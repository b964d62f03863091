import type { DensePeaks } from "./peaks";
import { FRAMES_PER_S, PITCH_UNITS_PER_SEMITONE, TIME_UNITS_PER_FRAME } from "./settings";

/** Verify set: no louder dense peak within ±4 frames and ±0.8 semitones, at most 15 a second in each band. */
const VERIFY_FRAMES = 4;
const VERIFY_SEMITONES = 0.8;
const VERIFY_PER_BAND = 15;
/** Index set: no louder peak of the verify set within ±6 frames and ±1.2 semitones. */
const INDEX_FRAMES = 6;
const INDEX_SEMITONES = 1.2;
/** Four bands of equal width on the logarithmic axis, 75 Hz to 5 kHz. */
const BANDS = 4;
const LOWEST_SEMITONES = 5.37;
const BAND_SEMITONES = 18.18;
/** Ranks count rivals within half a second to either side: no grid of seconds whose borders an excerpt would move. */
const RANK_FRAMES = FRAMES_PER_S / 2;
/** Prominence: level above the mean of all dense peaks within ±1 s and ±6 semitones. */
const PROMINENCE_FRAMES = FRAMES_PER_S;
const PROMINENCE_SEMITONES = 6;

/** Largest values the two ranks can hold; a band rank of 7 means that the peak is not in the index set. */
export const PROMINENCE_RANK_MAX = 31;
export const BAND_RANK_MAX = 7;

export interface Landmarks {
  /** 1/32 frames, ascending. */
  timeUnits: Uint32Array;
  /** 1/128 semitones above 55 Hz. */
  pitchUnits: Uint16Array;
  /** Low five bits: prominence rank. High three bits: loudness rank in the band. */
  ranks: Uint8Array;
}

export function prominenceRank(ranks: number): number {
  return ranks & 31;
}
export function bandRank(ranks: number): number {
  return ranks >> 5;
}

interface Peaks {
  time: Float64Array;
  pitch: Float32Array;
  level: Float32Array;
}

/**
 * Thins the dense peaks to the verify set and ranks them.
 *
 * Output:  the verify set (about 50 peaks a second), each with two ranks: how many peaks within ±0.5 s are more
 *          prominent (all bands), and how many of the index set in its own band are louder
 * Edges:   ranks are counts of neighbours, so a peak more than a second from a cut keeps its rank exactly
 */
export function selectLandmarks(dense: DensePeaks): Landmarks {
  const all: Peaks = { time: dense.timeFrames, pitch: dense.pitchSemitones, level: dense.level };
  const order = byTime(all.time);
  const sorted = pick(all, order);
  const candidates = localMaxima(sorted, VERIFY_FRAMES, VERIFY_SEMITONES);
  const thinned = pick(sorted, candidates);
  const thinnedRank = bandRanks(thinned, null);
  const kept = indicesWhere(thinnedRank, (rank) => rank < VERIFY_PER_BAND);
  const verify = pick(thinned, kept);

  const inIndex = new Uint8Array(verify.time.length);
  for (const i of localMaxima(verify, INDEX_FRAMES, INDEX_SEMITONES)) inIndex[i] = 1;
  const loudness = bandRanks(verify, inIndex);
  const prominence = prominenceRanks(verify, sorted);
  return quantise(verify, loudness, prominence);
}

function quantise(peaks: Peaks, loudness: Uint16Array, prominence: Uint16Array): Landmarks {
  const count = peaks.time.length;
  const key = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const time = Math.max(0, Math.round(peaks.time[i]! * TIME_UNITS_PER_FRAME));
    const pitch = Math.round(peaks.pitch[i]! * PITCH_UNITS_PER_SEMITONE);
    const ranks =
      (Math.min(BAND_RANK_MAX, loudness[i]!) << 5) | Math.min(PROMINENCE_RANK_MAX, prominence[i]!);
    // 22 bits of pitch and ranks below the time: exact in a double up to 2³¹ time units, 18 days.
    key[i] = time * 2 ** 22 + (pitch * 256 + ranks);
  }
  key.sort();
  const out: Landmarks = {
    timeUnits: new Uint32Array(count),
    pitchUnits: new Uint16Array(count),
    ranks: new Uint8Array(count),
  };
  for (let i = 0; i < count; i++) {
    const value = key[i]!;
    const time = Math.floor(value / 2 ** 22);
    const rest = value - time * 2 ** 22;
    out.timeUnits[i] = time;
    out.pitchUnits[i] = rest >> 8;
    out.ranks[i] = rest & 255;
  }
  return out;
}

function byTime(time: Float64Array): Uint32Array {
  const order = new Uint32Array(time.length);
  for (let i = 0; i < order.length; i++) order[i] = i;
  // Peaks arrive in order of frame and stray by half a frame at most, so insertion is linear.
  for (let i = 1; i < order.length; i++) {
    const moved = order[i]!;
    const at = time[moved]!;
    let j = i - 1;
    while (j >= 0 && time[order[j]!]! > at) {
      order[j + 1] = order[j]!;
      j--;
    }
    order[j + 1] = moved;
  }
  return order;
}

function pick(peaks: Peaks, indices: Uint32Array | number[]): Peaks {
  const count = indices.length;
  const out: Peaks = {
    time: new Float64Array(count),
    pitch: new Float32Array(count),
    level: new Float32Array(count),
  };
  for (let i = 0; i < count; i++) {
    const from = indices[i]!;
    out.time[i] = peaks.time[from]!;
    out.pitch[i] = peaks.pitch[from]!;
    out.level[i] = peaks.level[from]!;
  }
  return out;
}

function localMaxima(peaks: Peaks, frames: number, semitones: number): number[] {
  const { time, pitch, level } = peaks;
  const out: number[] = [];
  let from = 0;
  for (let i = 0; i < time.length; i++) {
    while (time[from]! < time[i]! - frames) from++;
    let largest = true;
    for (let j = from; j < time.length && time[j]! <= time[i]! + frames; j++) {
      if (j !== i && level[j]! > level[i]! && Math.abs(pitch[j]! - pitch[i]!) <= semitones) {
        largest = false;
        break;
      }
    }
    if (largest) out.push(i);
  }
  return out;
}

function bandOf(pitch: number): number {
  return Math.max(0, Math.min(BANDS - 1, Math.floor((pitch - LOWEST_SEMITONES) / BAND_SEMITONES)));
}

/** How many louder peaks of the same band stand within ±0.5 s; with `member`, only members count and rank. */
function bandRanks(peaks: Peaks, member: Uint8Array | null): Uint16Array {
  const { time, pitch, level } = peaks;
  const out = new Uint16Array(time.length);
  let from = 0;
  for (let i = 0; i < time.length; i++) {
    while (time[from]! < time[i]! - RANK_FRAMES) from++;
    if (member !== null && member[i] === 0) {
      out[i] = 0xffff;
      continue;
    }
    const band = bandOf(pitch[i]!);
    let louder = 0;
    for (let j = from; j < time.length && time[j]! <= time[i]! + RANK_FRAMES; j++) {
      if (level[j]! > level[i]! && bandOf(pitch[j]!) === band && (member === null || member[j] === 1))
        louder++;
    }
    out[i] = louder;
  }
  return out;
}

function prominenceRanks(peaks: Peaks, dense: Peaks): Uint16Array {
  const { time, pitch, level } = peaks;
  const prominence = new Float32Array(time.length);
  let from = 0;
  for (let i = 0; i < time.length; i++) {
    while (dense.time[from]! < time[i]! - PROMINENCE_FRAMES) from++;
    let sum = 0;
    let count = 0;
    for (let j = from; j < dense.time.length && dense.time[j]! <= time[i]! + PROMINENCE_FRAMES; j++) {
      if (Math.abs(dense.pitch[j]! - pitch[i]!) <= PROMINENCE_SEMITONES) {
        sum += dense.level[j]!;
        count++;
      }
    }
    prominence[i] = level[i]! - sum / Math.max(1, count);
  }
  const out = new Uint16Array(time.length);
  from = 0;
  for (let i = 0; i < time.length; i++) {
    while (time[from]! < time[i]! - RANK_FRAMES) from++;
    let more = 0;
    for (let j = from; j < time.length && time[j]! <= time[i]! + RANK_FRAMES; j++) {
      if (prominence[j]! > prominence[i]!) more++;
    }
    out[i] = more;
  }
  return out;
}

function indicesWhere(values: Uint16Array, test: (value: number) => boolean): number[] {
  const out: number[] = [];
  for (let i = 0; i < values.length; i++) if (test(values[i]!)) out.push(i);
  return out;
}
