import type { Fingerprint } from "./fingerprint";
import { referencePairs } from "./pairs";
import {
  buildPostings,
  joinReferences,
  POSITION_UNITS_PER_FRAME,
  PostingCursor,
  type Postings,
  PostingWriter,
  postingBytes,
} from "./postings";
import { prepare } from "./prepared";
import { referenceQuads } from "./quads";

const BLOCK_SHIFT = 12;

/** An immutable part of the index: some recordings on one time line, and their pairs and quads. */
export interface Segment {
  ids: string[];
  /** Where each recording begins on the time line, and where the last ends. */
  starts: Uint32Array;
  /** For each block of 4096 units the first recording that reaches into it. */
  blocks: Uint32Array;
  /** 1 = removed: a dead bit until the next merge. */
  dead: Uint8Array;
  live: number;
  pairs: Postings;
  quads: Postings;
}

export function buildSegment(entries: { id: string; fp: Fingerprint }[]): Segment {
  const starts = [0];
  const pairs = [];
  const quads = [];
  for (const { fp } of entries) {
    const peaks = prepare(fp);
    starts.push(starts[starts.length - 1]! + Math.ceil(peaks.lengthFrames + 2) * POSITION_UNITS_PER_FRAME);
    pairs.push(referencePairs(peaks));
    quads.push(referenceQuads(peaks));
  }
  return {
    ...timeLine(
      entries.map((entry) => entry.id),
      starts,
    ),
    pairs: buildPostings(joinReferences(pairs, starts)),
    quads: buildPostings(joinReferences(quads, starts)),
  };
}

/** Merges segments in order of hash, leaving out what was removed; no fingerprint is read. */
export function mergeSegments(parts: Segment[]): Segment {
  const ids: string[] = [];
  const starts = [0];
  const shifts = parts.map((part) => {
    const shift = new Float64Array(part.ids.length);
    for (let i = 0; i < part.ids.length; i++) {
      if (part.dead[i] === 1) continue;
      const start = starts[starts.length - 1]!;
      shift[i] = start - part.starts[i]!;
      ids.push(part.ids[i]!);
      starts.push(start + part.starts[i + 1]! - part.starts[i]!);
    }
    return shift;
  });
  return {
    ...timeLine(ids, starts),
    pairs: mergePostings(parts, shifts, (part) => part.pairs),
    quads: mergePostings(parts, shifts, (part) => part.quads),
  };
}

function timeLine(ids: string[], startList: number[]) {
  const total = startList[startList.length - 1]!;
  if (total > 0xffffffff)
    throw new RangeError(`${total} quarter frames of sound exceed one segment's 32 bits`);
  const starts = Uint32Array.from(startList);
  const blocks = new Uint32Array((total >>> BLOCK_SHIFT) + 1);
  let recording = 0;
  for (let block = 0; block < blocks.length; block++) {
    while (recording < ids.length - 1 && starts[recording + 1]! <= block * 2 ** BLOCK_SHIFT) recording++;
    blocks[block] = recording;
  }
  return { ids, starts, blocks, dead: new Uint8Array(ids.length), live: ids.length };
}

/** Which recording a position belongs to: read from the posting itself, never from a query's offset. */
export function recordingAt(segment: Segment, position: number): number {
  let recording = segment.blocks[position >>> BLOCK_SHIFT]!;
  while (segment.starts[recording + 1]! <= position) recording++;
  return recording;
}

export function segmentBytes(segment: Segment): number {
  return (
    postingBytes(segment.pairs) +
    postingBytes(segment.quads) +
    segment.starts.byteLength +
    segment.blocks.byteLength
  );
}

function mergePostings(parts: Segment[], shifts: Float64Array[], of: (part: Segment) => Postings): Postings {
  let capacity = 0;
  const cursors = parts.map((part) => {
    capacity += of(part).position.length;
    return new PostingCursor(of(part));
  });
  const open = cursors.map((cursor) => cursor.next());
  const writer = new PostingWriter(capacity, of(parts[0]!).aux !== null);
  for (;;) {
    let lowest = -1;
    for (let i = 0; i < cursors.length; i++) {
      if (open[i] && (lowest < 0 || cursors[i]!.hash < cursors[lowest]!.hash)) lowest = i;
    }
    if (lowest < 0) return writer.finish();
    const cursor = cursors[lowest]!;
    const part = parts[lowest]!;
    const postings = of(part);
    const position = postings.position[cursor.at]!;
    const recording = recordingAt(part, position);
    if (part.dead[recording] === 0) {
      const aux = postings.aux === null ? 0 : postings.aux[cursor.at]!;
      writer.add(cursor.hash, position + shifts[lowest]![recording]!, aux);
    }
    open[lowest] = cursor.next();
  }
}
