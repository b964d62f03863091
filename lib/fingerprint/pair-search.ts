import { type Candidate, cellSlot, coveredFrames, HitColumns } from "./candidates";
import type { Questions } from "./pairs";
import { POSITION_UNITS_PER_FRAME } from "./postings";
import { blockBorders, type ReadCounts, readRarest } from "./reading";
import { recordingAt, type Segment } from "./segment";

/** Offsets are counted in cells of two frames, each with its right neighbour. */
const CELL_FRAMES = 2;
const TABLE_BITS = 18;
const EXACT_HITS_MAX = 20_000;
const CANDIDATES_PER_BLOCK = 12;

/**
 * Candidates of the unaltered search: pairs that agree on one offset within ten seconds of query.
 *
 * Source:  A. Wang (ISMIR 2003), histogram of time differences
 * Output:  per block the cells with most votes; the recording is read from the posting, so that an excerpt standing
 *          later in the query than in its source is never credited to the neighbour on the time line
 */
export function searchPairs(
  segments: Segment[],
  questions: Questions,
  lengthFrames: number,
  options: { budget: number; votesMin: number },
  counts: ReadCounts,
  onBlock: (done: number, total: number) => void,
): Candidate[] {
  const borders = blockBorders(questions, lengthFrames);
  const table = new Uint16Array(1 << TABLE_BITS);
  const hits = new HitColumns();
  const out: Candidate[] = [];
  for (let block = 0; block + 1 < borders.length; block++) {
    hits.count = 0;
    readRarest(
      segments,
      (segment) => segment.pairs,
      questions,
      borders[block]!,
      borders[block + 1]!,
      options.budget,
      counts,
      (s, question, posting) => {
        const segment = segments[s]!;
        const position = segment.pairs.position[posting]!;
        const recording = recordingAt(segment, position);
        if (segment.dead[recording] === 1) return;
        const time = (position - segment.starts[recording]!) / POSITION_UNITS_PER_FRAME;
        hits.add(s, recording, questions.root[question]!, questions.timeFrames[question]!, time, 1, 0);
      },
    );
    vote(hits, table, options.votesMin, out);
    onBlock(block + 1, borders.length - 1);
  }
  return out;
}

function cellOf(hits: HitColumns, i: number): number {
  return Math.floor((hits.referenceTime[i]! - hits.queryTime[i]!) / CELL_FRAMES);
}

function vote(hits: HitColumns, table: Uint16Array, votesMin: number, out: Candidate[]): void {
  table.fill(0);
  for (let i = 0; i < hits.count; i++) {
    const slot = cellSlot(hits.segment[i]!, hits.recording[i]!, cellOf(hits, i), 0, 0, TABLE_BITS);
    if (table[slot]! < 0xffff) table[slot]!++;
  }
  const sums = new Uint16Array(hits.count);
  const histogram = new Uint32Array(1024);
  for (let i = 0; i < hits.count; i++) {
    const cell = cellOf(hits, i);
    const own = table[cellSlot(hits.segment[i]!, hits.recording[i]!, cell, 0, 0, TABLE_BITS)]!;
    const right = table[cellSlot(hits.segment[i]!, hits.recording[i]!, cell + 1, 0, 0, TABLE_BITS)]!;
    sums[i] = Math.min(1023, own + right);
    histogram[sums[i]!]!++;
  }
  let least = 1023;
  for (let kept = 0; least > votesMin; least--) {
    kept += histogram[least]!;
    if (kept + histogram[least - 1]! > EXACT_HITS_MAX) break;
  }
  countExactly(hits, sums, least, votesMin, out);
}

/** Counts the cells that survived, now by their full address, and keeps the best. */
function countExactly(
  hits: HitColumns,
  sums: Uint16Array,
  least: number,
  votesMin: number,
  out: Candidate[],
): void {
  const cells = new Map<string, Candidate & { offsets: number[]; times: number[] }>();
  for (let i = 0; i < hits.count; i++) {
    if (sums[i]! < least) continue;
    const own = cellOf(hits, i);
    for (const cell of [own, own - 1]) {
      const key = `${hits.segment[i]}:${hits.recording[i]}:${cell}`;
      let found = cells.get(key);
      if (found === undefined) {
        found = {
          segment: hits.segment[i]!,
          recording: hits.recording[i]!,
          map: { a: 1, b: 0, c: 0 },
          fromFrames: 0,
          toFrames: 0,
          votes: 0,
          offsets: [],
          times: [],
        };
        cells.set(key, found);
      }
      found.votes++;
      found.times.push(hits.queryTime[i]!);
      found.offsets.push(hits.referenceTime[i]! - hits.queryTime[i]!);
    }
  }
  const ranked = [...cells.values()]
    .filter((cell) => cell.votes >= votesMin)
    .sort((x, y) => y.votes - x.votes);
  const kept: Candidate[] = [];
  for (const { offsets, times, ...candidate } of ranked) {
    if (kept.length === CANDIDATES_PER_BLOCK) break;
    offsets.sort((x, y) => x - y);
    candidate.map.b = offsets[offsets.length >> 1]!;
    const known = kept.some(
      (other) =>
        other.segment === candidate.segment &&
        other.recording === candidate.recording &&
        Math.abs(other.map.b - candidate.map.b) < 2 * CELL_FRAMES,
    );
    if (known) continue;
    [candidate.fromFrames, candidate.toFrames] = coveredFrames(times);
    kept.push(candidate);
  }
  out.push(...kept);
}
