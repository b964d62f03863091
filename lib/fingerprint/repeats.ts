import type { AffineMap } from "./alignment";
import type { Candidate } from "./candidates";
import type { Prepared } from "./prepared";
import { FRAMES_PER_S } from "./settings";
import { type Alignment, explains, verifyCandidate } from "./verify";

/** The query is walked in stretches of 6 s, every 3 s. */
const STRETCH_FRAMES = 6 * FRAMES_PER_S;
const STEP_FRAMES = 3 * FRAMES_PER_S;
/** Only a recording already known this surely is searched again for more. */
const KNOWN_NATS_MIN = 40;
const PITCH_BIN_SEMITONES = 0.25;
const VOTES_MIN = 12;
const DEVIATIONS = 6;
const OFFSETS_PER_STRETCH = 3;
const ALIGNMENTS_MAX = 40;

/**
 * Further places of a recording already found: with speed and transposition known only the offset is open, so every
 * peak of a stretch votes with every reference peak of its pitch. Finds the repeats of a loop and the pieces of an edit
 * that were too short or too hidden for the index. Adds to `alignments`.
 *
 * Cost:    stretches that an alignment covers already are skipped, so a whole copy costs nothing
 */
export function addRepeats(query: Prepared, reference: Prepared, alignments: Alignment[]): void {
  const best = alignments.reduce<Alignment | null>(
    (known, one) => (known === null || one.evidence > known.evidence ? one : known),
    null,
  );
  if (best === null || best.evidence < KNOWN_NATS_MIN) return;
  const byPitch = groupByPitch(reference);
  for (let from = 0; from < query.lengthFrames; from += STEP_FRAMES) {
    const to = from + STRETCH_FRAMES;
    if (alignments.length >= ALIGNMENTS_MAX) return;
    if (isCovered(query, alignments, (from + to) / 2)) continue;
    for (const candidate of offsetCandidates(query, reference, byPitch, best.map, from, to)) {
      if (alignments.some((alignment) => explains(query, alignment, candidate))) continue;
      const alignment = verifyCandidate(query, reference, candidate);
      if (alignment !== null) alignments.push(alignment);
    }
  }
}

function isCovered(query: Prepared, alignments: Alignment[], at: number): boolean {
  return alignments.some((alignment) =>
    alignment.spans.some(([from, to]) => query.timeFrames[from]! <= at && query.timeFrames[to - 1]! >= at),
  );
}

function groupByPitch(peaks: Prepared): number[][] {
  const groups: number[][] = [];
  for (let i = 0; i < peaks.count; i++) {
    const bin = Math.floor(peaks.pitchSemitones[i]! / PITCH_BIN_SEMITONES);
    while (groups.length <= bin) groups.push([]);
    groups[bin]!.push(peaks.timeFrames[i]!);
  }
  return groups;
}

function offsetCandidates(
  query: Prepared,
  reference: Prepared,
  byPitch: number[][],
  map: AffineMap,
  from: number,
  to: number,
): Candidate[] {
  const zero = Math.ceil(map.a * to) + 2;
  const counts = new Uint16Array(zero + Math.ceil(reference.lengthFrames) + 4);
  let votes = 0;
  for (let i = 0; i < query.count; i++) {
    const time = query.timeFrames[i]!;
    if (time < from || time >= to) continue;
    const value = (query.pitchSemitones[i]! + map.c) / PITCH_BIN_SEMITONES - 0.5;
    for (let bin = Math.floor(value); bin <= Math.floor(value) + 1; bin++) {
      for (const referenceTime of byPitch[bin] ?? []) {
        counts[zero + Math.round(referenceTime - map.a * time)]!++;
        votes++;
      }
    }
  }
  const mean = (3 * votes) / (reference.lengthFrames + map.a * STRETCH_FRAMES);
  const least = Math.max(VOTES_MIN, mean + DEVIATIONS * Math.sqrt(mean));
  const out: Candidate[] = [];
  for (let cell = 1; cell + 1 < counts.length; cell++) {
    const sum = counts[cell - 1]! + counts[cell]! + counts[cell + 1]!;
    if (sum < least) continue;
    const candidate: Candidate = {
      segment: 0,
      recording: 0,
      map: { a: map.a, b: cell - zero, c: map.c },
      fromFrames: from,
      toFrames: to,
      votes: sum,
    };
    const last = out[out.length - 1];
    if (last === undefined || candidate.map.b - last.map.b > 3) out.push(candidate);
    else if (last.votes < sum) out[out.length - 1] = candidate;
  }
  return out.sort((x, y) => y.votes - x.votes).slice(0, OFFSETS_PER_STRETCH);
}
