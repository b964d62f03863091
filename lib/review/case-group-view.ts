import { inArray } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { alignedListenings } from "@/db/schema/review";
import { familiesByIds, libraryById, recordingsByIds } from "@/lib/catalogue";
import { hitsByIds } from "@/lib/screening";
import type { groupsOfCase } from "./case-hits";
import { drawnContour, type Span } from "./drawn-contour";
import type { Moderator } from "./own-case";

/** Round a passage of another library's recording this much is drawn for the marketplace's moderators. */
const CONTEXT_S = 10;

type Group = Awaited<ReturnType<typeof groupsOfCase>>[number];
type Hit = Awaited<ReturnType<typeof hitsByIds>>[number];
type Recording = Awaited<ReturnType<typeof recordingsByIds>>[number];
type Listening = typeof alignedListenings.$inferSelect;

/** How much of a reference a moderator gets. */
interface Sight {
  isOwnLibrary: boolean;
  isMarketplace: boolean;
  isListed: boolean;
  /** Of another library and not listed: without title, writer, picture or sound for a library's moderator. */
  isConfidential: boolean;
}

export async function groupView(reader: Reader, actor: Moderator, group: Group) {
  const hits = await hitsByIds(reader, group.hitIds);
  const references = await recordingsByIds(
    reader,
    hits.filter((hit) => hit.referenceKind === "recording").map((hit) => hit.referenceId),
  );
  const [family] =
    group.referenceKind === "recording" ? await familiesByIds(reader, [group.referenceKey]) : [];
  const library = family ? await libraryById(reader, family.libraryId) : null;
  const isOwnLibrary = family !== undefined && family.libraryId === actor.libraryId;
  const isListed = family?.state === "listed";
  const sight: Sight = {
    isOwnLibrary,
    isMarketplace: actor.libraryId === null,
    isListed,
    isConfidential: family !== undefined && !isListed && !isOwnLibrary,
  };
  const passageIds = hits.flatMap((hit) => hit.passages.map((passage) => passage.id));
  const listenings = passageIds.length
    ? await reader.select().from(alignedListenings).where(inArray(alignedListenings.passageId, passageIds))
    : [];
  return {
    id: group.id,
    referenceKind: group.referenceKind,
    relation: group.relation,
    reference: {
      title:
        isOwnLibrary || sight.isMarketplace
          ? (family?.title ?? (group.referenceKind === "reported" ? "a reported work" : null))
          : null,
      words: referenceWords({
        kind: group.referenceKind,
        isOwnLibrary,
        isListed,
        libraryName: sight.isMarketplace ? (library?.name ?? null) : null,
      }),
      catalogueNumber: isListed ? (family?.catalogueNumber ?? null) : null,
      isListed,
      isConfidential: sight.isConfidential,
    },
    hits: hits.map((hit) => hitView(hit, { sight, references, listenings })),
  };
}

function hitView(
  hit: Hit,
  facts: { sight: Sight; references: readonly Recording[]; listenings: readonly Listening[] },
) {
  const { sight } = facts;
  const mayHear = sight.isMarketplace || !sight.isConfidential;
  const reference = mayHear
    ? facts.references.find((recording) => recording.id === hit.referenceId)
    : undefined;
  return {
    id: hit.id,
    recordingId: hit.recordingId,
    relation: hit.relation,
    evidence: hit.evidence,
    evidence2: hit.evidence2,
    chance: hit.chance,
    speed: hit.speed,
    pitchSemitones: hit.pitchSemitones,
    coverageRecording: hit.coverageRecording,
    coverageReference: hit.coverageReference,
    channel: hit.channel,
    reversed: hit.reversed,
    lowDistinctiveness: hit.lowDistinctiveness,
    reference: reference ? referenceView(hit, reference, sight) : null,
    passages: hit.passages.map((passage) => {
      const listening = mayHear
        ? facts.listenings.find((candidate) => candidate.passageId === passage.id)
        : undefined;
      return {
        ...passage,
        listening: listening?.state === "ready" ? (listening.render ?? {}) : null,
        listeningState: listening?.state ?? (mayHear ? "being rendered" : "confidential"),
      };
    }),
  };
}

function referenceView(hit: Hit, reference: Recording, sight: Sight) {
  const margin = sight.isMarketplace ? CONTEXT_S : 0;
  const spans: Span[] = hit.passages.map((passage) => ({
    fromS: passage.refStartS - margin,
    toS: passage.refEndS + margin,
  }));
  return {
    versionRole: reference.versionRole,
    durationS: reference.durationS,
    ending: reference.ending,
    wholeIsDrawn: sight.isOwnLibrary,
    contour: drawnContour(reference.contour, sight.isOwnLibrary ? null : spans),
  };
}

function referenceWords(facts: {
  kind: string;
  isOwnLibrary: boolean;
  isListed: boolean;
  libraryName: string | null;
}): string {
  if (facts.kind === "reported") return "a reported work";
  if (facts.kind === "own") return "no other recording";
  if (facts.kind === "loop") return "a registered loop";
  const held = facts.isListed ? "listed" : "held, not listed";
  if (facts.isOwnLibrary) return `${held} by this library`;
  if (facts.libraryName) return `${held} by ${facts.libraryName}`;
  return facts.isListed
    ? "listed by a library on this service; only the overlapping seconds are drawn and heard"
    : "a confidential holding";
}
