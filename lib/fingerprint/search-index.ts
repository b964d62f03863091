import type { Candidate } from "./candidates";
import { oneWayEach } from "./decision";
import { comparability, type Fingerprint } from "./fingerprint";
import { type Hit, makeHit } from "./hits";
import { mirrorFingerprint } from "./mirror";
import { searchPairs } from "./pair-search";
import { queryPairs } from "./pairs";
import { prepare } from "./prepared";
import { searchQuads } from "./quad-search";
import { DENSE, FAST } from "./quads";
import { BLOCK_FRAMES, type ReadCounts } from "./reading";
import { addRepeats } from "./repeats";
import { buildSegment, mergeSegments, type Segment, segmentBytes } from "./segment";
import { type Alignment, explains, verifyCandidate } from "./verify";

export interface IndexOptions {
  /** Gives the fingerprint of an indexed recording; called only for those worth verifying. */
  getFingerprint(id: string): Fingerprint;
}

export interface SearchOptions {
  /** Also look for copies whose tempo or pitch was changed. */
  altered: boolean;
  /** Spend more on the altered search: slower, finds shorter and more hidden copies. */
  dense?: boolean;
  /** Look for the query played backwards as well. */
  reversed?: boolean;
  /** Postings read per ten seconds of query, for each of the two searches. */
  budget?: { pairs?: number; quads?: number };
  /** Votes from which a place becomes a candidate; the acceptance is another threshold (`band`). */
  candidateVotes?: number;
  exclude?: Iterable<string>;
  /** At most this many hits. */
  limit?: number;
  onProgress?(done: number, total: number): void;
}

export interface SearchStats extends ReadCounts {
  candidates: number;
  verified: number;
}

export interface IndexStats {
  recordings: number;
  segments: number;
  pairs: number;
  quads: number;
  bytes: number;
}

export interface SearchIndex {
  /** Adds a recording; an id already held is replaced. */
  add(id: string, fp: Fingerprint): void;
  remove(id: string): boolean;
  has(id: string): boolean;
  readonly size: number;
  stats(): IndexStats;
  search(fp: Fingerprint, options: SearchOptions): Hit[];
  /** The same, for callers that must fetch fingerprints: gives the event loop a turn between recordings. */
  searchAsync(
    fp: Fingerprint,
    options: SearchOptions,
    load: (id: string) => Promise<Fingerprint>,
  ): Promise<Hit[]>;
}

/** Fewer landmarks that agree within ten seconds are chance. */
const CANDIDATE_VOTES = 4;
const PAIR_BUDGET = 400_000;
const QUAD_BUDGET_FAST = 80_000;
const QUAD_BUDGET_DENSE = 400_000;
/** Recordings gathered before they become a segment of their own. */
const PENDING_MAX = 64;
const PENDING_MAX_S = 4 * 3600;
/** So many segments of one size are merged into the next. */
const MERGE_FAN = 4;
/** Candidates verified in one search: so many, and so many more for each ten seconds of query. */
const VERIFY_PER_BLOCK = 14;
const VERIFY_MIN = 60;

export function createIndex(options: IndexOptions): SearchIndex {
  return new MemoryIndex(options);
}

class MemoryIndex implements SearchIndex {
  readonly #options: IndexOptions;
  readonly #pending = new Map<string, Fingerprint>();
  #pendingS = 0;
  #segments: Segment[] = [];
  readonly #place = new Map<string, { segment: Segment; recording: number }>();

  constructor(options: IndexOptions) {
    this.#options = options;
  }

  get size(): number {
    return this.#pending.size + this.#place.size;
  }

  has(id: string): boolean {
    return this.#pending.has(id) || this.#place.has(id);
  }

  add(id: string, fp: Fingerprint): void {
    prepare(fp);
    this.remove(id);
    this.#pending.set(id, fp);
    this.#pendingS += fp.durationS;
    if (this.#pending.size >= PENDING_MAX || this.#pendingS >= PENDING_MAX_S) this.#flush();
  }

  remove(id: string): boolean {
    const waiting = this.#pending.get(id);
    if (waiting !== undefined) {
      this.#pendingS -= waiting.durationS;
      return this.#pending.delete(id);
    }
    const place = this.#place.get(id);
    if (place === undefined) return false;
    place.segment.dead[place.recording] = 1;
    place.segment.live--;
    this.#place.delete(id);
    if (place.segment.live === 0)
      this.#segments = this.#segments.filter((segment) => segment !== place.segment);
    return true;
  }

  stats(): IndexStats {
    this.#flush();
    const stats = { recordings: this.size, segments: this.#segments.length, pairs: 0, quads: 0, bytes: 0 };
    for (const segment of this.#segments) {
      stats.pairs += segment.pairs.position.length;
      stats.quads += segment.quads.position.length;
      stats.bytes += segmentBytes(segment);
    }
    return stats;
  }

  search(fp: Fingerprint, options: SearchOptions): Hit[] {
    const run = this.#run(fp, options);
    for (let step = run.next(); ; ) {
      if (step.done) return step.value;
      step = run.next(this.#options.getFingerprint(step.value));
    }
  }

  async searchAsync(
    fp: Fingerprint,
    options: SearchOptions,
    load: (id: string) => Promise<Fingerprint>,
  ): Promise<Hit[]> {
    const run = this.#run(fp, options);
    for (let step = run.next(); ; ) {
      if (step.done) return step.value;
      step = run.next(await load(step.value));
    }
  }

  /** Yields the ids whose fingerprints it needs. */
  *#run(fp: Fingerprint, options: SearchOptions): Generator<string, Hit[], Fingerprint> {
    if (!comparability(fp).comparable) return [];
    this.#flush();
    const hits = yield* this.#searchOneWay(fp, options, false);
    if (options.reversed) hits.push(...(yield* this.#searchOneWay(mirrorFingerprint(fp), options, true)));
    const surest = oneWayEach(hits);
    return options.limit === undefined ? surest : surest.slice(0, options.limit);
  }

  *#searchOneWay(
    fp: Fingerprint,
    options: SearchOptions,
    reversed: boolean,
  ): Generator<string, Hit[], Fingerprint> {
    const query = prepare(fp);
    const segments = this.#withoutExcluded(options.exclude);
    const counts: ReadCounts = { questions: 0, found: 0, read: 0 };
    const passes = (options.altered ? 2 : 1) * (options.reversed ? 2 : 1);
    let pass = reversed ? passes / 2 : 0;
    const onBlock = (done: number, total: number): void => options.onProgress?.(pass + done / total, passes);
    const votesMin = options.candidateVotes ?? CANDIDATE_VOTES;
    const pairs = { budget: options.budget?.pairs ?? PAIR_BUDGET, votesMin };
    const candidates = searchPairs(segments, queryPairs(query), query.lengthFrames, pairs, counts, onBlock);
    if (options.altered) {
      pass++;
      const budget = options.budget?.quads ?? (options.dense ? QUAD_BUDGET_DENSE : QUAD_BUDGET_FAST);
      const density = options.dense ? DENSE : FAST;
      candidates.push(...searchQuads(segments, query, density, { budget, votesMin }, counts, onBlock));
    }
    const hits: Hit[] = [];
    for (const [id, own] of groupByRecording(
      segments,
      candidates,
      Math.ceil(query.lengthFrames / BLOCK_FRAMES),
    )) {
      const referenceFp = yield id;
      const reference = prepare(referenceFp);
      const alignments = alignAll(query, reference, own);
      const hit = makeHit(id, fp, referenceFp, query, reference, alignments, reversed);
      if (hit !== null) hits.push(hit);
    }
    return hits;
  }

  #withoutExcluded(exclude: Iterable<string> | undefined): Segment[] {
    const dead = new Map<Segment, Uint8Array>();
    for (const id of exclude ?? []) {
      const place = this.#place.get(id);
      if (place === undefined) continue;
      const bits = dead.get(place.segment) ?? place.segment.dead.slice();
      bits[place.recording] = 1;
      dead.set(place.segment, bits);
    }
    return this.#segments.map((segment) => {
      const bits = dead.get(segment);
      return bits === undefined ? segment : { ...segment, dead: bits };
    });
  }

  #flush(): void {
    if (this.#pending.size === 0) return;
    this.#adopt(buildSegment([...this.#pending].map(([id, fp]) => ({ id, fp }))));
    this.#pending.clear();
    this.#pendingS = 0;
    this.#mergeWhereDue();
  }

  #adopt(segment: Segment): void {
    this.#segments.push(segment);
    for (let i = 0; i < segment.ids.length; i++) this.#place.set(segment.ids[i]!, { segment, recording: i });
  }

  /** Segments fall into sizes by powers of four of their recordings; four of one size become one of the next. */
  #mergeWhereDue(): void {
    for (;;) {
      const sizes = new Map<number, Segment[]>();
      for (const segment of this.#segments) {
        const size = Math.floor(Math.log2(Math.max(1, segment.live)) / 2);
        sizes.set(size, [...(sizes.get(size) ?? []), segment]);
      }
      const due = [...sizes.values()].find((segments) => segments.length >= MERGE_FAN);
      if (due === undefined) return;
      this.#segments = this.#segments.filter((segment) => !due.includes(segment));
      this.#adopt(mergeSegments(due));
    }
  }
}

/** Candidates of each recording, recordings with the most votes first; a bounded number in all. */
function groupByRecording(
  segments: Segment[],
  candidates: Candidate[],
  blocks: number,
): [string, Candidate[]][] {
  const groups = new Map<string, Candidate[]>();
  const most = VERIFY_MIN + VERIFY_PER_BLOCK * blocks;
  const ranked = [...candidates].sort((x, y) => y.votes - x.votes).slice(0, most);
  for (const candidate of ranked) {
    const id = segments[candidate.segment]!.ids[candidate.recording]!;
    const own = groups.get(id);
    if (own === undefined) groups.set(id, [candidate]);
    else own.push(candidate);
  }
  return [...groups];
}

function alignAll(
  query: ReturnType<typeof prepare>,
  reference: ReturnType<typeof prepare>,
  candidates: Candidate[],
): Alignment[] {
  const alignments: Alignment[] = [];
  for (const candidate of candidates) {
    if (alignments.some((alignment) => explains(query, alignment, candidate))) continue;
    const alignment = verifyCandidate(query, reference, candidate);
    if (alignment !== null) alignments.push(alignment);
  }
  addRepeats(query, reference, alignments);
  return alignments;
}

/** Compares two recordings directly: the same search over an index of one. */
export function matchFingerprints(
  query: Fingerprint,
  reference: Fingerprint,
  options: Omit<SearchOptions, "exclude" | "limit">,
): Hit | null {
  const index = createIndex({ getFingerprint: () => reference });
  index.add("reference", reference);
  return index.search(query, { ...options, limit: 1 })[0] ?? null;
}
