import { type Candidate, cellSlot, coveredFrames, HitColumns } from "./candidates";
import { POSITION_UNITS_PER_FRAME } from "./postings";
import type { Prepared } from "./prepared";
import { auxPitchSemitones, auxSpanFrames, type QuadDensity, queryQuads } from "./quads";
import { BLOCK_FRAMES, blockBorders, type ReadCounts, readRarest } from "./reading";
import { recordingAt, type Segment } from "./segment";

/** A hit counts only inside these bounds, a little wider than those of a verified map. */
const SPEED_LOW = 0.78;
const SPEED_HIGH = 1.28;
const PITCH_HIGH_SEMITONES = 4.4;
/** Cells of the vote: 48 frames at the window's middle, 5 % of tempo, 1.2 semitones; the two nearest on each axis. */
const CELL_FRAMES = 48;
const CELL_LN_SPEED = 0.05;
const CELL_SEMITONES = 1.2;
/** The second count, around the median of a cell's hits. */
const NEAR_FRAMES = 40;
const NEAR_LN_SPEED = 0.04;
const NEAR_SEMITONES = 0.8;
const TABLE_BITS = 19;
const EXACT_HITS_MAX = 20_000;
const CANDIDATES_PER_WINDOW = 10;

/**
 * Candidates of the altered search: each quad hit proposes its own tempo, transposition and offset; those that agree
 * within 20 s of query are counted by distinct roots.
 *
 * Source:  R. Sonnleitner, G. Widmer (2016) for the quads; R. Duda, P. Hart (CACM 15(1), 1972) for voting in the space
 *          of parameters
 * Output:  per window of 20 s (every 10 s) the cells with most distinct roots, with a first map through their hits
 */
export function searchQuads(
  segments: Segment[],
  query: Prepared,
  density: QuadDensity,
  options: { budget: number; votesMin: number },
  counts: ReadCounts,
  onBlock: (done: number, total: number) => void,
): Candidate[] {
  const questions = queryQuads(query, density);
  const borders = blockBorders(questions, query.lengthFrames);
  const roots = new Uint32Array(1 << TABLE_BITS);
  const votes = new Uint16Array(1 << TABLE_BITS);
  const out: Candidate[] = [];
  let before = new HitColumns();
  let current = new HitColumns();
  const blocks = borders.length - 1;
  for (let block = 0; block < blocks; block++) {
    [before, current] = [current, before];
    current.count = 0;
    readRarest(
      segments,
      (segment) => segment.quads,
      questions,
      borders[block]!,
      borders[block + 1]!,
      options.budget,
      counts,
      (s, question, posting) => {
        const segment = segments[s]!;
        const aux = segment.quads.aux![posting]!;
        const speed = auxSpanFrames(aux) / questions.spanFrames[question]!;
        const pitch = auxPitchSemitones(aux) - questions.pitchSemitones[question]!;
        if (speed < SPEED_LOW || speed > SPEED_HIGH || Math.abs(pitch) > PITCH_HIGH_SEMITONES) return;
        const position = segment.quads.position[posting]!;
        const recording = recordingAt(segment, position);
        if (segment.dead[recording] === 1) return;
        const time = (position - segment.starts[recording]!) / POSITION_UNITS_PER_FRAME;
        current.add(
          s,
          recording,
          questions.root[question]!,
          questions.timeFrames[question]!,
          time,
          speed,
          pitch,
        );
      },
    );
    if (block > 0 || blocks === 1) {
      const fromFrames = Math.max(0, block - 1) * BLOCK_FRAMES;
      const toFrames = (block + 1) * BLOCK_FRAMES;
      const hits = blocks === 1 ? [current] : [before, current];
      voteWindow(hits, roots, votes, fromFrames, toFrames, options.votesMin, out);
    }
    onBlock(block + 1, blocks);
  }
  return out;
}

interface CellPosition {
  x: number;
  y: number;
  z: number;
}
const cell: CellPosition = { x: 0, y: 0, z: 0 };

function locate(hits: HitColumns, i: number, middle: number): CellPosition {
  const speed = hits.speed[i]!;
  cell.x = (hits.referenceTime[i]! + speed * (middle - hits.queryTime[i]!)) / CELL_FRAMES;
  cell.y = Math.log(speed) / CELL_LN_SPEED;
  cell.z = hits.pitch[i]! / CELL_SEMITONES;
  return cell;
}

/** Corner `mask` of the two nearest cells on each axis. */
function corner(value: number, upper: boolean): number {
  return Math.floor(value - 0.5) + (upper ? 1 : 0);
}

function voteWindow(
  windows: HitColumns[],
  roots: Uint32Array,
  votes: Uint16Array,
  fromFrames: number,
  toFrames: number,
  votesMin: number,
  out: Candidate[],
): void {
  const middle = (fromFrames + toFrames) / 2;
  roots.fill(0);
  votes.fill(0);
  for (const hits of windows) {
    for (let i = 0; i < hits.count; i++) {
      const { x, y, z } = locate(hits, i, middle);
      const root = hits.root[i]! + 1;
      for (let mask = 0; mask < 8; mask++) {
        const slot = cellSlot(
          hits.segment[i]!,
          hits.recording[i]!,
          corner(x, (mask & 1) > 0),
          corner(y, (mask & 2) > 0),
          corner(z, (mask & 4) > 0),
          TABLE_BITS,
        );
        if (roots[slot] === root) continue;
        roots[slot] = root;
        votes[slot]!++;
      }
    }
  }
  const cells = strongCells(windows, votes, middle, votesMin);
  const ranked = [...cells.values()].sort((p, q) => q.length - p.length).slice(0, 3 * CANDIDATES_PER_WINDOW);
  const found: Candidate[] = [];
  for (const members of ranked) {
    const candidate = settle(members, middle, votesMin);
    if (candidate !== null) found.push(candidate);
  }
  found.sort((p, q) => q.votes - p.votes);
  keepDistinct(found, middle, out);
}

interface QuadHit {
  segment: number;
  recording: number;
  root: number;
  queryTime: number;
  referenceTime: number;
  speed: number;
  pitch: number;
}

/** Members of the cells with most votes, by full address: the table's counters may be shared, these are not. */
function strongCells(
  windows: HitColumns[],
  votes: Uint16Array,
  middle: number,
  votesMin: number,
): Map<string, QuadHit[]> {
  const histogram = new Uint32Array(1024);
  const best = windows.map((hits) => new Uint16Array(hits.count));
  const bestMask = windows.map((hits) => new Uint8Array(hits.count));
  for (let w = 0; w < windows.length; w++) {
    const hits = windows[w]!;
    for (let i = 0; i < hits.count; i++) {
      const { x, y, z } = locate(hits, i, middle);
      for (let mask = 0; mask < 8; mask++) {
        const slot = cellSlot(
          hits.segment[i]!,
          hits.recording[i]!,
          corner(x, (mask & 1) > 0),
          corner(y, (mask & 2) > 0),
          corner(z, (mask & 4) > 0),
          TABLE_BITS,
        );
        if (votes[slot]! > best[w]![i]!) {
          best[w]![i] = Math.min(1023, votes[slot]!);
          bestMask[w]![i] = mask;
        }
      }
      histogram[best[w]![i]!]!++;
    }
  }
  let least = 1023;
  for (let kept = 0; least > votesMin; least--) {
    kept += histogram[least]!;
    if (kept + histogram[least - 1]! > EXACT_HITS_MAX) break;
  }
  const cells = new Map<string, QuadHit[]>();
  for (let w = 0; w < windows.length; w++) {
    const hits = windows[w]!;
    for (let i = 0; i < hits.count; i++) {
      if (best[w]![i]! < least) continue;
      const { x, y, z } = locate(hits, i, middle);
      const mask = bestMask[w]![i]!;
      const cx = corner(x, (mask & 1) > 0);
      const cy = corner(y, (mask & 2) > 0);
      const cz = corner(z, (mask & 4) > 0);
      const key = `${hits.segment[i]}:${hits.recording[i]}:${cx}:${cy}:${cz}`;
      const members = cells.get(key);
      const hit = {
        segment: hits.segment[i]!,
        recording: hits.recording[i]!,
        root: hits.root[i]!,
        queryTime: hits.queryTime[i]!,
        referenceTime: hits.referenceTime[i]!,
        speed: hits.speed[i]!,
        pitch: hits.pitch[i]!,
      };
      if (members === undefined) cells.set(key, [hit]);
      else members.push(hit);
    }
  }
  return cells;
}

function median(values: number[]): number {
  values.sort((x, y) => x - y);
  return values[values.length >> 1]!;
}

/** Gathers a cell's hits around their median, counts distinct roots and lays a line through them. */
function settle(members: QuadHit[], middle: number, votesMin: number): Candidate | null {
  const at = (hit: QuadHit): number => hit.referenceTime + hit.speed * (middle - hit.queryTime);
  const time = median(members.map(at));
  const lnSpeed = median(members.map((hit) => Math.log(hit.speed)));
  const pitch = median(members.map((hit) => hit.pitch));
  const near = members.filter(
    (hit) =>
      Math.abs(at(hit) - time) <= NEAR_FRAMES &&
      Math.abs(Math.log(hit.speed) - lnSpeed) <= NEAR_LN_SPEED &&
      Math.abs(hit.pitch - pitch) <= NEAR_SEMITONES,
  );
  const votes = new Set(near.map((hit) => hit.root)).size;
  if (votes < votesMin) return null;
  const a = theilSen(near, Math.exp(lnSpeed));
  const b = median(near.map((hit) => hit.referenceTime - a * hit.queryTime));
  const c = median(near.map((hit) => hit.pitch));
  const { segment, recording } = near[0]!;
  const [fromFrames, toFrames] = coveredFrames(near.map((hit) => hit.queryTime));
  return { segment, recording, map: { a, b, c }, fromFrames, toFrames, votes };
}

/** Slope: median over pairs of hits at least two seconds apart, if it does not stray from what the quads say. */
function theilSen(hits: QuadHit[], speed: number): number {
  const step = Math.max(1, Math.floor(hits.length / 60));
  const slopes: number[] = [];
  for (let i = 0; i < hits.length; i += step) {
    for (let j = i + step; j < hits.length; j += step) {
      const dq = hits[j]!.queryTime - hits[i]!.queryTime;
      if (Math.abs(dq) >= 86) slopes.push((hits[j]!.referenceTime - hits[i]!.referenceTime) / dq);
    }
  }
  if (slopes.length < 3) return speed;
  const slope = median(slopes);
  return Math.abs(Math.log(slope / speed)) <= NEAR_LN_SPEED ? slope : speed;
}

function keepDistinct(found: Candidate[], middle: number, out: Candidate[]): void {
  const kept: Candidate[] = [];
  for (const candidate of found) {
    if (kept.length === CANDIDATES_PER_WINDOW) break;
    const at = candidate.map.a * middle + candidate.map.b;
    const known = kept.some(
      (other) =>
        other.segment === candidate.segment &&
        other.recording === candidate.recording &&
        Math.abs(other.map.a * middle + other.map.b - at) < NEAR_FRAMES / 4 &&
        Math.abs(other.map.c - candidate.map.c) < NEAR_SEMITONES / 2,
    );
    if (!known) kept.push(candidate);
  }
  out.push(...kept);
}
