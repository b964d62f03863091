import type { Fingerprint } from "./fingerprint";
import {
  ENGINE_VERSION,
  FRAME_CENTRE_FRAMES,
  FRAMES_PER_S,
  PITCH_UNITS_PER_SEMITONE,
  TIME_UNITS_PER_FRAME,
} from "./settings";

/** A fingerprint's landmarks as the arithmetic wants them. */
export interface Prepared {
  count: number;
  timeFrames: Float64Array;
  pitchSemitones: Float32Array;
  ranks: Uint8Array;
  /** Length of the recording, in frames; peaks lie within [0, lengthFrames]. */
  lengthFrames: number;
}

const cache = new WeakMap<Fingerprint, Prepared>();

export function prepare(fp: Fingerprint): Prepared {
  const known = cache.get(fp);
  if (known !== undefined) return known;
  if (fp.engineVersion !== ENGINE_VERSION) {
    throw new RangeError(
      `fingerprint is of engine version ${fp.engineVersion}, this engine compares ${ENGINE_VERSION}`,
    );
  }
  const count = fp.timeUnits.length;
  const timeFrames = new Float64Array(count);
  const pitchSemitones = new Float32Array(count);
  for (let i = 0; i < count; i++) {
    timeFrames[i] = fp.timeUnits[i]! / TIME_UNITS_PER_FRAME;
    pitchSemitones[i] = fp.pitchUnits[i]! / PITCH_UNITS_PER_SEMITONE;
  }
  const last = count === 0 ? 0 : timeFrames[count - 1]!;
  const lengthFrames = Math.max(last, fp.durationS * FRAMES_PER_S - 2 * FRAME_CENTRE_FRAMES);
  const prepared = { count, timeFrames, pitchSemitones, ranks: fp.ranks, lengthFrames };
  cache.set(fp, prepared);
  return prepared;
}

/** First index whose value is at least `wanted`; `values` ascend. */
export function lowerBound(values: Float64Array, wanted: number): number {
  let low = 0;
  let high = values.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (values[middle]! < wanted) low = middle + 1;
    else high = middle;
  }
  return low;
}
