import type { FoundHit, FoundPassage } from "./found";
import type { Explanation, Outcome, Relation } from "./states";

/** What is known of a reference besides its sound. */
export interface ReferenceFacts {
  familyId: string | null;
  libraryId: string | null;
  /** Accepted writers of the reference's family. */
  writerIds: readonly string[];
  title: string;
}

export interface LoopFacts {
  id: string;
  code: string;
  title: string;
  lengthS: number;
  coverageMaxBps: number;
  conditionWords: string;
}

export interface DeliveryFacts {
  familyId: string;
  libraryId: string;
  delivererId: string;
  writerIds: readonly string[];
  declaredLoops: readonly string[];
  expectsFamilyMatch: boolean;
  durationS: number;
}

export interface OtherTitle {
  familyIds: readonly string[];
  personId: string | null;
  libraryId: string | null;
  words: string;
}

export interface ExplainedHit extends FoundHit {
  relation: Relation;
  explainedBy: Explanation | null;
  explanation: string | null;
}

const COVERED_BY_LOOP = 0.75;
/** Where this much of what is heard is the loop, it is the principal element; below, it stands among other music. */
const PRINCIPAL_SHARE = 0.75;
/** A recording that agrees by more than this against the loop shares something besides the loop. */
const BESIDES_LOOP = 1.25;

/**
 * Says what each hit looks like and whether something known explains it. A family link counts only for an accepted
 * writer of that family or its library; a loop only where this delivery declares it with a paper and its condition
 * holds. Everything else is for a person.
 */
export function explainHits(
  found: readonly FoundHit[],
  facts: {
    delivery: DeliveryFacts;
    references: ReadonlyMap<string, ReferenceFacts>;
    loops: ReadonlyMap<string, LoopFacts>;
    otherTitles: readonly OtherTitle[];
  },
): ExplainedHit[] {
  const { delivery } = facts;
  const loopHits = found.flatMap((hit) => {
    const loop = hit.subjectKind === "loop" ? facts.loops.get(hit.subjectId) : undefined;
    return loop ? [{ hit, loop, holds: loopHolds(hit, loop, delivery) }] : [];
  });
  return found.map((hit) => {
    const reference = facts.references.get(`${hit.subjectKind}:${hit.subjectId}`);
    const own = reference?.writerIds.includes(delivery.delivererId) ?? false;
    const inFamily = reference?.familyId === delivery.familyId;
    const relation: Relation = inFamily || own ? "own version" : hit.relationHint;
    if (hit.subjectKind === "loop") {
      const entry = loopHits.find((candidate) => candidate.hit === hit);
      return { ...hit, relation: "shared material", ...(entry ? loopExplanation(entry) : nothing) };
    }
    if (inFamily)
      return {
        ...hit,
        relation,
        explainedBy: "family",
        explanation: "It matches its own family, as a version should.",
      };
    const otherTitle =
      reference &&
      facts.otherTitles.find(
        (entry) => entry.familyIds.includes(reference.familyId ?? "") && covers(entry, delivery),
      );
    if (otherTitle) return { ...hit, relation, explainedBy: "other title", explanation: otherTitle.words };
    const loop =
      hit.subjectKind === "recording"
        ? loopHits.find(
            (entry) =>
              entry.holds &&
              liesWithin(hit.passages, entry.hit.passages) &&
              shareOf(hit.passages) <= BESIDES_LOOP * shareOf(entry.hit.passages),
          )
        : undefined;
    if (loop) return { ...hit, relation: "shared material", ...loopExplanation(loop) };
    return { ...hit, relation, ...nothing };
  });
}

const nothing = { explainedBy: null, explanation: null } as const;

const covers = (entry: OtherTitle, delivery: DeliveryFacts) =>
  entry.personId !== null &&
  (entry.personId === delivery.delivererId || delivery.writerIds.includes(entry.personId)) &&
  (entry.libraryId === null || entry.libraryId === delivery.libraryId);

/** Share of what sounds in these passages that agrees with the reference. */
function shareOf(passages: readonly FoundPassage[]): number {
  const total = passages.reduce((sum, passage) => sum + passage.landmarksTotal, 0);
  return total === 0 ? 0 : passages.reduce((sum, passage) => sum + passage.landmarksMatched, 0) / total;
}

function loopHolds(hit: FoundHit, loop: LoopFacts, delivery: DeliveryFacts): boolean {
  const principal = hit.passages.filter((passage) => shareOf([passage]) >= PRINCIPAL_SHARE);
  return (
    delivery.declaredLoops.includes(loop.code) &&
    coveredS(principal) / delivery.durationS <= loop.coverageMaxBps / 10_000
  );
}

function loopExplanation(entry: { hit: FoundHit; loop: LoopFacts; holds: boolean }) {
  if (!entry.holds) return nothing;
  const places = placesOf(entry.hit.passages, entry.loop.lengthS);
  return {
    explainedBy: "registered loop" as const,
    explanation: `Match explained by registered loop ${entry.loop.code}, ${places} ${places === 1 ? "place" : "places"}. ${entry.loop.conditionWords}`,
  };
}

/** How often the loop plays: a passage that runs through several turns of it counts each of them. */
function placesOf(passages: readonly FoundPassage[], lengthS: number): number {
  return passages.reduce(
    (total, { startS, endS }) => total + Math.max(1, Math.round((endS - startS) / lengthS)),
    0,
  );
}

/** Seconds of a recording that its passages cover, overlaps counted once. */
export function coveredS(passages: readonly FoundPassage[]): number {
  const spans = passages
    .map((passage) => [passage.startS, passage.endS] as const)
    .sort((a, b) => a[0] - b[0]);
  let total = 0;
  let end = Number.NEGATIVE_INFINITY;
  for (const [from, to] of spans) {
    total += Math.max(0, to - Math.max(from, end));
    end = Math.max(end, to);
  }
  return total;
}

function liesWithin(inner: readonly FoundPassage[], outer: readonly FoundPassage[]): boolean {
  const inside = inner.map((passage) => {
    const overlaps = outer
      .map((other) => ({
        ...other,
        startS: Math.max(other.startS, passage.startS),
        endS: Math.min(other.endS, passage.endS),
      }))
      .filter((other) => other.endS > other.startS);
    return { length: passage.endS - passage.startS, covered: coveredS(overlaps) };
  });
  const length = inside.reduce((total, part) => total + part.length, 0);
  return length > 0 && inside.reduce((total, part) => total + part.covered, 0) / length >= COVERED_BY_LOOP;
}

/** What the hits of one recording add up to, as a state and a sentence. */
export function outcomeOf(
  hits: readonly ExplainedHit[],
  facts: { comparable: boolean; reason: string; recordingsCompared: number; familyMatchMissing: boolean },
): { outcome: Outcome; words: string } {
  const held = hits.filter((hit) => hit.band === "hold" && hit.explainedBy === null);
  const explained = hits.filter((hit) => hit.band === "hold" && hit.explainedBy !== null);
  if (held.length > 0) {
    return {
      outcome: "held",
      words:
        "Part of it lines up with another recording. A person will listen; this often has an ordinary reason.",
    };
  }
  if (!facts.comparable)
    return {
      outcome: "not comparable",
      words: `It could not be compared: ${facts.reason}. That says nothing for or against it.`,
    };
  if (facts.familyMatchMissing) {
    return {
      outcome: "held",
      words:
        "It does not match its own full mix, as a cutdown should. Is it the right file? A person will listen.",
    };
  }
  const registers = explained.filter((hit) => hit.explainedBy !== "family");
  const first = registers[0];
  if (first?.explanation) return { outcome: "explained", words: first.explanation };
  const compared = `${facts.recordingsCompared} ${facts.recordingsCompared === 1 ? "recording" : "recordings"}`;
  if (explained.length > 0)
    return {
      outcome: "clear",
      words: `It matches its own family, as a version should, and nothing else of ${compared} held.`,
    };
  return { outcome: "clear", words: `Nothing in common was found with ${compared} held.` };
}
