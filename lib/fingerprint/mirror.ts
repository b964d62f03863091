import type { Fingerprint } from "./fingerprint";
import { FRAME_CENTRE_FRAMES, FRAMES_PER_S, TIME_UNITS_PER_FRAME } from "./settings";

/**
 * The fingerprint of the same sound played backwards, made from the landmarks alone.
 *
 * A frame centred on time t is centred on duration − t in the reversed sound and has the same spectrum, and the
 * ranks look equally far both ways; only the frame grid may lie up to half a hop aside, which interpolation absorbs.
 */
export function mirrorFingerprint(fp: Fingerprint): Fingerprint {
  const count = fp.timeUnits.length;
  const last = Math.round((fp.durationS * FRAMES_PER_S - 2 * FRAME_CENTRE_FRAMES) * TIME_UNITS_PER_FRAME);
  const timeUnits = new Uint32Array(count);
  const pitchUnits = new Uint16Array(count);
  const ranks = new Uint8Array(count);
  for (let i = 0; i < count; i++) {
    const from = count - 1 - i;
    timeUnits[i] = Math.max(0, last - fp.timeUnits[from]!);
    pitchUnits[i] = fp.pitchUnits[from]!;
    ranks[i] = fp.ranks[from]!;
  }
  const notComparable = fp.notComparable
    .map((span) => ({ ...span, startS: fp.durationS - span.endS, endS: fp.durationS - span.startS }))
    .reverse();
  return { ...fp, timeUnits, pitchUnits, ranks, notComparable };
}
