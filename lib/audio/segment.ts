import type { ContainerFacts } from "./container-facts";
import { decodeStream } from "./decode-stream";
import { Damaged } from "./errors";

/** A stretch of a recording held in memory, stereo, at its own rate. */
export interface Segment {
  sampleRateHz: number;
  /** Time in the recording of the first sample; may be negative, then zeros stand in front. */
  startS: number;
  left: Float32Array;
  right: Float32Array;
}

class EnoughRead extends Error {}

/**
 * Reads one stretch, with zeros where it reaches beyond the recording.
 *
 * Edges:   mono is given on both sides; of more channels the first two. Reading stops at the end of the stretch.
 * Throws:  as decodeStream; Damaged if the recording breaks off inside the stretch before its declared end
 */
export async function readSegment(
  path: string,
  facts: ContainerFacts,
  startS: number,
  endS: number,
): Promise<Segment> {
  const rate = facts.sampleRateHz;
  const first = Math.floor(startS * rate);
  const count = Math.max(0, Math.ceil(endS * rate) - first);
  const left = new Float32Array(count);
  const right = facts.channels > 1 ? new Float32Array(count) : left;
  const place = (target: Float32Array, source: Float32Array, offset: number): void => {
    const from = Math.max(0, first - offset);
    const to = Math.min(source.length, first + count - offset);
    if (to > from) target.set(source.subarray(from, to), offset + from - first);
  };
  try {
    const outcome = await decodeStream(
      path,
      (channels, offset) => {
        place(left, channels[0]!, offset);
        if (right !== left) place(right, channels[1]!, offset);
        if (offset + channels[0]!.length >= first + count) throw new EnoughRead();
      },
      { facts },
    );
    const wanted = Math.min(first + count, facts.declaredSamples ?? first + count);
    if (!outcome.complete && outcome.samples < wanted) {
      throw new Damaged(outcome.readableS, outcome.declaredS, outcome.what);
    }
  } catch (error) {
    if (!(error instanceof EnoughRead)) throw error;
  }
  return { sampleRateHz: rate, startS: first / rate, left, right };
}
