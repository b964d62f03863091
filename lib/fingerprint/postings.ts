import type { References } from "./pairs";

/** Positions on a segment's time line are quarter frames: 32 bits hold 6 900 hours. */
export const POSITION_UNITS_PER_FRAME = 4;

/**
 * Postings in order of hash. The high bits of a hash choose a bucket through `directory`, the low bits are kept
 * beside the posting, so a hash is always known in full and segments merge without the fingerprints.
 */
export interface Postings {
  bits: number;
  directory: Uint32Array;
  rest: Uint8Array | Uint16Array | Uint32Array;
  position: Uint32Array;
  aux: Uint16Array | null;
}

/** References of several recordings, laid end to end. */
export interface Unsorted {
  hash: Uint32Array;
  position: Uint32Array;
  aux: Uint16Array | null;
}

function bitsFor(count: number): number {
  if (count < 20_000) return 10;
  if (count < 500_000) return 16;
  return count < 8_000_000 ? 20 : 24;
}

function restFor(bits: number, count: number): Uint8Array | Uint16Array | Uint32Array {
  if (bits < 16) return new Uint32Array(count);
  return bits < 24 ? new Uint16Array(count) : new Uint8Array(count);
}

export function joinReferences(parts: References[], starts: number[]): Unsorted {
  let count = 0;
  for (const part of parts) count += part.count;
  const hash = new Uint32Array(count);
  const position = new Uint32Array(count);
  const aux = parts.some((part) => part.aux !== null) ? new Uint16Array(count) : null;
  let at = 0;
  for (let i = 0; i < parts.length; i++) {
    const part = parts[i]!;
    for (let j = 0; j < part.count; j++, at++) {
      hash[at] = part.hash[j]!;
      position[at] = starts[i]! + Math.round(part.timeFrames[j]! * POSITION_UNITS_PER_FRAME);
      if (aux !== null) aux[at] = part.aux![j]!;
    }
  }
  return { hash, position, aux };
}

/** Sorts by hash: three stable passes of 11 bits. Equal hashes stay in the order given. */
export function buildPostings(unsorted: Unsorted): Postings {
  const count = unsorted.hash.length;
  let from = new Uint32Array(count);
  let to = new Uint32Array(count);
  for (let i = 0; i < count; i++) from[i] = i;
  for (const shift of [0, 11, 22]) {
    const starts = new Uint32Array(2049);
    for (let i = 0; i < count; i++) starts[((unsorted.hash[i]! >>> shift) & 2047) + 1]!++;
    for (let i = 0; i < 2048; i++) starts[i + 1]! += starts[i]!;
    for (let i = 0; i < count; i++) {
      const entry = from[i]!;
      to[starts[(unsorted.hash[entry]! >>> shift) & 2047]!++] = entry;
    }
    [from, to] = [to, from];
  }
  const writer = new PostingWriter(count, unsorted.aux !== null);
  for (let i = 0; i < count; i++) {
    const entry = from[i]!;
    writer.add(
      unsorted.hash[entry]!,
      unsorted.position[entry]!,
      unsorted.aux === null ? 0 : unsorted.aux[entry]!,
    );
  }
  return writer.finish();
}

/** Takes postings in order of hash. */
export class PostingWriter {
  readonly #bits: number;
  readonly #directory: Uint32Array;
  readonly #rest: Uint8Array | Uint16Array | Uint32Array;
  readonly #position: Uint32Array;
  readonly #aux: Uint16Array | null;
  #count = 0;
  #bucket = 0;

  constructor(capacity: number, withAux: boolean) {
    this.#bits = bitsFor(capacity);
    this.#directory = new Uint32Array(2 ** this.#bits + 1);
    this.#rest = restFor(this.#bits, capacity);
    this.#position = new Uint32Array(capacity);
    this.#aux = withAux ? new Uint16Array(capacity) : null;
  }

  add(hash: number, position: number, aux: number): void {
    const bucket = hash >>> (32 - this.#bits);
    while (this.#bucket < bucket) this.#directory[++this.#bucket] = this.#count;
    this.#rest[this.#count] = hash & (2 ** (32 - this.#bits) - 1);
    this.#position[this.#count] = position;
    if (this.#aux !== null) this.#aux[this.#count] = aux;
    this.#count++;
  }

  finish(): Postings {
    while (this.#bucket < 2 ** this.#bits) this.#directory[++this.#bucket] = this.#count;
    const full = this.#count === this.#position.length;
    return {
      bits: this.#bits,
      directory: this.#directory,
      rest: full ? this.#rest : this.#rest.slice(0, this.#count),
      position: full ? this.#position : this.#position.slice(0, this.#count),
      aux: full || this.#aux === null ? this.#aux : this.#aux.slice(0, this.#count),
    };
  }
}

/** Index of the first posting with this hash; the run's end is `findEnd`. */
export function findStart(postings: Postings, hash: number): number {
  const shift = 32 - postings.bits;
  const bucket = hash >>> shift;
  const wanted = hash & (2 ** shift - 1);
  const rest = postings.rest;
  let low = postings.directory[bucket]!;
  let high = postings.directory[bucket + 1]!;
  while (low < high) {
    const middle = (low + high) >>> 1;
    if (rest[middle]! < wanted) low = middle + 1;
    else high = middle;
  }
  return low;
}

export function findEnd(postings: Postings, hash: number, start: number): number {
  const shift = 32 - postings.bits;
  const wanted = hash & (2 ** shift - 1);
  const rest = postings.rest;
  const stop = postings.directory[(hash >>> shift) + 1]!;
  let end = start;
  // Short runs are walked, long ones halved.
  while (end < stop && end < start + 16 && rest[end] === wanted) end++;
  if (end < start + 16) return end;
  let high = stop;
  while (end < high) {
    const middle = (end + high) >>> 1;
    if (rest[middle]! <= wanted) end = middle + 1;
    else high = middle;
  }
  return end;
}

export function postingBytes(postings: Postings): number {
  return (
    postings.directory.byteLength +
    postings.rest.byteLength +
    postings.position.byteLength +
    (postings.aux?.byteLength ?? 0)
  );
}

/** Walks postings in order of hash. */
export class PostingCursor {
  hash = 0;
  at = -1;
  readonly #postings: Postings;
  #bucket = 0;

  constructor(postings: Postings) {
    this.#postings = postings;
  }

  /** False at the end. */
  next(): boolean {
    const { directory, rest, position, bits } = this.#postings;
    this.at++;
    if (this.at >= position.length) return false;
    while (directory[this.#bucket + 1]! <= this.at) this.#bucket++;
    this.hash = ((this.#bucket << (32 - bits)) | rest[this.at]!) >>> 0;
    return true;
  }
}
