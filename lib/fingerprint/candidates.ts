import type { AffineMap } from "./alignment";
import { FRAMES_PER_S } from "./settings";

/** A place where a recording may agree with the query: to be verified. */
export interface Candidate {
  segment: number;
  recording: number;
  map: AffineMap;
  /** Part of the query that voted, in frames. */
  fromFrames: number;
  toFrames: number;
  votes: number;
}

/** Hits of one read, in columns that grow. */
export class HitColumns {
  count = 0;
  segment = new Uint16Array(1 << 14);
  recording = new Uint32Array(1 << 14);
  root = new Uint32Array(1 << 14);
  queryTime = new Float64Array(1 << 14);
  referenceTime = new Float64Array(1 << 14);
  speed = new Float32Array(1 << 14);
  pitch = new Float32Array(1 << 14);

  add(
    segment: number,
    recording: number,
    root: number,
    queryTime: number,
    referenceTime: number,
    speed: number,
    pitch: number,
  ): void {
    if (this.count === this.root.length) this.#grow();
    const i = this.count++;
    this.segment[i] = segment;
    this.recording[i] = recording;
    this.root[i] = root;
    this.queryTime[i] = queryTime;
    this.referenceTime[i] = referenceTime;
    this.speed[i] = speed;
    this.pitch[i] = pitch;
  }

  #grow(): void {
    const size = 2 * this.root.length;
    const grown = <T extends Uint16Array | Uint32Array | Float32Array | Float64Array>(old: T, next: T): T => {
      next.set(old as never);
      return next;
    };
    this.segment = grown(this.segment, new Uint16Array(size));
    this.recording = grown(this.recording, new Uint32Array(size));
    this.root = grown(this.root, new Uint32Array(size));
    this.queryTime = grown(this.queryTime, new Float64Array(size));
    this.referenceTime = grown(this.referenceTime, new Float64Array(size));
    this.speed = grown(this.speed, new Float32Array(size));
    this.pitch = grown(this.pitch, new Float32Array(size));
  }
}

/** Spreads a cell's coordinates over a table of 2^bits counters. */
export function cellSlot(
  segment: number,
  recording: number,
  x: number,
  y: number,
  z: number,
  bits: number,
): number {
  let h = Math.imul(recording + 1, 0x9e3779b1) ^ Math.imul(segment + 1, 0x85157af5);
  h = Math.imul(h ^ (h >>> 15), 0x9e3779b1) + Math.imul(x, 0x27d4eb2f);
  h = Math.imul(h ^ (h >>> 13), 0x9e3779b1) + Math.imul(y, 0x165667b1) + Math.imul(z, 0x1b873593);
  h = Math.imul(h ^ (h >>> 16), 0x9e3779b1);
  return (h ^ (h >>> 15)) >>> (32 - bits);
}

/** Part of the query that a candidate's hits cover, with a second to either side: what its first fit rests on. */
export function coveredFrames(times: number[]): [from: number, to: number] {
  times.sort((x, y) => x - y);
  const cut = Math.floor(times.length / 20);
  return [times[cut]! - FRAMES_PER_S, times[times.length - 1 - cut]! + 2 * FRAMES_PER_S];
}
