import { BAND_RANK_MAX, bandRank, type Landmarks, selectLandmarks } from "./landmarks";
import { type DensePeaks, FRAME_SILENT, FRAME_TONE, PeakPicker } from "./peaks";
import {
  CONTENT_MIN_S,
  ENGINE_VERSION,
  framesToS,
  LANDMARKS_MIN,
  SAMPLE_RATE_HZ,
  TIME_UNITS_PER_FRAME,
} from "./settings";
import { SpectrumStream } from "./spectrum";

export type NotComparableReason = "silence" | "tone" | "low information";

export interface NotComparableSpan {
  startS: number;
  endS: number;
  reason: NotComparableReason;
}

export interface Fingerprint extends Landmarks {
  engineVersion: number;
  durationS: number;
  /** Seconds that carry enough landmarks to be compared. */
  contentS: number;
  notComparable: NotComparableSpan[];
}

export interface Fingerprinter {
  push(chunk: Float32Array): void;
  finish(): Fingerprint;
}

/** State is judged in cells of 11 frames, about a quarter of a second. */
const CELL_FRAMES = 11;
/** A cell is usable if the five cells around it (1.3 s) hold at least this many peaks of the index set. */
const CELL_REACH = 2;
const CELL_PEAKS_MIN = 5;
/** Gaps shorter than this are part of the music. */
const SPAN_CELLS_MIN = 4;

/**
 * Fingerprint of one channel of sound.
 *
 * Source:  spectral peaks after A. Wang (ISMIR 2003) with both axes interpolated
 * Input:   samples  Float32Array[n]   full scale ±1, mono, 11 025 Hz
 * Output:  landmarks in order of time, and what cannot be compared
 * Edges:   fewer than 2048 samples give no landmark; gain (above −80 dBFS) and polarity change nothing
 * Throws:  RangeError on a sample that is not finite
 */
export function fingerprint(samples: Float32Array): Fingerprint {
  const stream = createFingerprinter();
  stream.push(samples);
  return stream.finish();
}

/** The same, fed in chunks: memory grows by some 2 kB a second of sound, never with the samples. */
export function createFingerprinter(): Fingerprinter {
  const picker = new PeakPicker();
  const spectra = new SpectrumStream((power) => picker.push(power));
  let finished = false;
  return {
    push(chunk) {
      if (finished) throw new Error("push after finish: make a new fingerprinter for each recording");
      spectra.push(chunk);
    },
    finish() {
      if (finished) throw new Error("finish was called twice");
      finished = true;
      spectra.finish();
      const dense = picker.finish();
      const landmarks = selectLandmarks(dense);
      const durationS = spectra.seenSamples / SAMPLE_RATE_HZ;
      const notComparable = findNotComparable(dense, landmarks, durationS);
      let lostS = 0;
      for (const span of notComparable) lostS += span.endS - span.startS;
      const contentS = Math.max(0, durationS - lostS);
      return { engineVersion: ENGINE_VERSION, durationS, contentS, notComparable, ...landmarks };
    },
  };
}

export type Comparability =
  | { comparable: true }
  | { comparable: false; reason: NotComparableReason | "too short" };

/** Whether a recording can be screened at all; one that cannot is never called clear. */
export function comparability(fp: Fingerprint): Comparability {
  if (fp.contentS >= CONTENT_MIN_S && countIndexPeaks(fp) >= LANDMARKS_MIN) return { comparable: true };
  const lost = { silence: 0, tone: 0, "low information": 0 };
  for (const span of fp.notComparable) lost[span.reason] += span.endS - span.startS;
  if (fp.durationS < CONTENT_MIN_S && lost.silence < fp.durationS)
    return { comparable: false, reason: "too short" };
  if (lost.silence >= lost.tone && lost.silence >= lost["low information"] && lost.silence > 0) {
    return { comparable: false, reason: "silence" };
  }
  return { comparable: false, reason: lost.tone > lost["low information"] ? "tone" : "low information" };
}

/** Landmarks of the index set. */
export function countIndexPeaks(fp: Landmarks): number {
  let count = 0;
  for (let i = 0; i < fp.ranks.length; i++) if (bandRank(fp.ranks[i]!) < BAND_RANK_MAX) count++;
  return count;
}

function findNotComparable(dense: DensePeaks, landmarks: Landmarks, durationS: number): NotComparableSpan[] {
  const cellCount = Math.ceil(dense.frameCount / CELL_FRAMES);
  if (cellCount === 0)
    return durationS > 0 ? [{ startS: 0, endS: durationS, reason: "low information" }] : [];
  const states = cellStates(dense, landmarks, cellCount);
  const spans: NotComparableSpan[] = [];
  for (let from = 0; from < cellCount; ) {
    let to = from + 1;
    while (to < cellCount && (states[to] === "usable") === (states[from] === "usable")) to++;
    if (states[from] !== "usable" && to - from >= Math.min(SPAN_CELLS_MIN, cellCount)) {
      pushSpans(spans, states, from, to, cellCount, durationS);
    }
    from = to;
  }
  return spans;
}

type CellState = NotComparableReason | "usable";

function pushSpans(
  spans: NotComparableSpan[],
  states: CellState[],
  from: number,
  to: number,
  cellCount: number,
  durationS: number,
): void {
  const edgeS = (cell: number): number =>
    cell === 0
      ? 0
      : cell === cellCount
        ? durationS
        : Math.min(durationS, framesToS(cell * CELL_FRAMES - 0.5));
  for (let at = from; at < to; ) {
    let end = at + 1;
    while (end < to && states[end] === states[at]) end++;
    const reason = states[at]!;
    if (reason !== "usable") spans.push({ startS: edgeS(at), endS: edgeS(end), reason });
    at = end;
  }
}

function cellStates(dense: DensePeaks, landmarks: Landmarks, cellCount: number): CellState[] {
  const peaks = new Uint32Array(cellCount);
  for (let i = 0; i < landmarks.ranks.length; i++) {
    if (bandRank(landmarks.ranks[i]!) >= BAND_RANK_MAX) continue;
    const cell = Math.floor(landmarks.timeUnits[i]! / TIME_UNITS_PER_FRAME / CELL_FRAMES);
    peaks[Math.min(cellCount - 1, cell)]!++;
  }
  const states: CellState[] = [];
  for (let cell = 0; cell < cellCount; cell++) {
    const from = cell * CELL_FRAMES;
    const to = Math.min(dense.frameCount, from + CELL_FRAMES);
    let silent = 0;
    let tone = 0;
    for (let frame = from; frame < to; frame++) {
      if (dense.frameKind[frame] === FRAME_SILENT) silent++;
      if (dense.frameKind[frame] === FRAME_TONE) tone++;
    }
    let around = 0;
    for (let j = Math.max(0, cell - CELL_REACH); j <= Math.min(cellCount - 1, cell + CELL_REACH); j++) {
      around += peaks[j]!;
    }
    if (2 * silent > to - from) states.push("silence");
    else if (around >= CELL_PEAKS_MIN) states.push("usable");
    else states.push(2 * tone > to - from ? "tone" : "low information");
  }
  return states;
}
