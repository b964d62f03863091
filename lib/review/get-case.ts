import { and, asc, eq, inArray, isNull, ne } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import {
  alignedListenings,
  caseMessages,
  cases,
  confirmations,
  conflictsDeclared,
  findings,
  upheldFindings,
} from "@/db/schema/review";
import { peopleByIds, peopleWithRole } from "@/lib/accounts";
import {
  familiesByIds,
  familyById,
  libraryById,
  recordingsByIds,
  recordingsOfFamily,
  splitsNow,
} from "@/lib/catalogue";
import { declarationsOf, deliveryOfFamily } from "@/lib/deliveries";
import { query } from "@/lib/kernel/verb";
import { certificateOf, hitsByIds, notComparableSpans } from "@/lib/screening";
import { groupsOfCase } from "./case-hits";
import { drawnContour, type Span } from "./drawn-contour";
import { type CaseRow, type Moderator, ownCase } from "./own-case";

/** Round a passage of another library's recording this much is drawn for the marketplace's moderators. */
const CONTEXT_S = 10;

/**
 * One case as its moderator may see it. People are roles until the papers are opened. Of a recording of another library
 * only the overlapping seconds are drawn, and a confidential holding has no title, writer or sound.
 */
export const getCase = query({
  name: "review.getCase",
  who: ["moderator"],
  input: z.object({ caseId: z.string() }),
  authorise: async ({ reader, actor, input }) => ownCase(reader, actor, input.caseId),
  run: async ({ reader, actor, subject: row }) => {
    const family = await familyById(reader, row.familyId);
    const recordings = await recordingsOfFamily(reader, row.familyId);
    const groups = await groupsOfCase(reader, row.id);
    const conflicts = await reader
      .select()
      .from(conflictsDeclared)
      .where(eq(conflictsDeclared.caseId, row.id));
    const messages = await reader
      .select()
      .from(caseMessages)
      .where(eq(caseMessages.caseId, row.id))
      .orderBy(asc(caseMessages.at));
    const given = await reader
      .select()
      .from(findings)
      .where(eq(findings.caseId, row.id))
      .orderBy(asc(findings.decidedAt));
    const seconds = given.length
      ? await reader
          .select()
          .from(confirmations)
          .where(
            inArray(
              confirmations.findingId,
              given.map((finding) => finding.id),
            ),
          )
      : [];
    const names = await peopleByIds(
      reader,
      [
        row.holderId,
        ...given.map((finding) => finding.deciderId),
        ...seconds.map((second) => second.confirmerId),
      ].filter((id) => id !== null),
    );
    const colleagues = await peopleWithRole(reader, "moderator", row.libraryId);
    return {
      id: row.id,
      number: row.number,
      state: row.state,
      dueAt: row.dueAt,
      openedAt: row.openedAt,
      closedAt: row.closedAt,
      holder: row.holderId
        ? { name: names.get(row.holderId)?.name ?? "", isYou: row.holderId === actor.personId }
        : null,
      youDeclaredConflict: conflicts.some((conflict) => conflict.personId === actor.personId),
      forMarketplace: row.libraryId === null,
      title: family?.title ?? "",
      colleagues: colleagues
        .filter((person) => person.id !== actor.personId)
        .map((person) => ({ id: person.id, name: person.name })),
      recordings: await Promise.all(
        recordings.map(async (recording) => ({
          id: recording.id,
          versionRole: recording.versionRole,
          durationS: recording.durationS,
          ending: recording.ending,
          contour: recording.contour ? recording.contour.toString("base64") : null,
          notComparable: (await notComparableSpans(reader, recording.id))?.notComparable ?? [],
          certificate: (await certificateOf(reader, recording.id))?.body ?? null,
        })),
      ),
      groups: await Promise.all(groups.map((group) => groupView(reader, actor, row, group))),
      explanations: await explanationFacts(reader, row),
      papers: row.papersOpenedAt ? await papersOf(reader, row, groups) : null,
      messages: messages
        .filter(
          (message) =>
            message.kind !== "note" || message.authorId === actor.personId || row.holderId === actor.personId,
        )
        .map((message) => ({
          id: message.id,
          kind: message.kind,
          words: message.words,
          at: message.at,
          answerUntil: message.answerUntil,
          hasFile: message.fileKey !== null,
        })),
      findings: given
        .filter((finding) => finding.supersededBy === null)
        .map((finding) => {
          const second = seconds.find((candidate) => candidate.findingId === finding.id);
          return {
            id: finding.id,
            groupId: finding.groupId,
            outcome: finding.outcome,
            explainedBy: finding.explainedBy,
            codes: finding.codes,
            reasons: finding.reasons,
            notDecided: finding.notDecided,
            knowing: finding.knowing,
            knowingBecause: finding.knowingBecause,
            decidedAt: finding.decidedAt,
            deciderName: names.get(finding.deciderId)?.name ?? "",
            isYours: finding.deciderId === actor.personId,
            needsSecond: finding.needsSecond,
            second: second
              ? {
                  confirmed: second.confirmed,
                  words: second.words,
                  at: second.at,
                  name: names.get(second.confirmerId)?.name ?? "",
                }
              : null,
          };
        }),
    };
  },
});

export type CaseView = Awaited<ReturnType<typeof getCase>>;
export type CaseGroupView = CaseView["groups"][number];

async function groupView(
  reader: Reader,
  actor: Moderator,
  row: CaseRow,
  group: Awaited<ReturnType<typeof groupsOfCase>>[number],
) {
  const hits = await hitsByIds(reader, group.hitIds);
  const references = await recordingsByIds(
    reader,
    hits.filter((hit) => hit.referenceKind === "recording").map((hit) => hit.referenceId),
  );
  const [family] =
    group.referenceKind === "recording" ? await familiesByIds(reader, [group.referenceKey]) : [];
  const library = family ? await libraryById(reader, family.libraryId) : null;
  const isOwnLibrary = family !== undefined && family.libraryId === actor.libraryId;
  const isMarketplace = actor.libraryId === null;
  const isListed = family?.state === "listed";
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
        isOwnLibrary || isMarketplace
          ? (family?.title ?? (group.referenceKind === "reported" ? "a reported work" : null))
          : null,
      words: referenceWords({
        kind: group.referenceKind,
        isOwnLibrary,
        isListed,
        libraryName: isMarketplace ? (library?.name ?? null) : null,
      }),
      catalogueNumber: isListed ? (family?.catalogueNumber ?? null) : null,
      isListed,
      isConfidential: family !== undefined && !isListed && !isOwnLibrary,
    },
    hits: hits.map((hit) => {
      const reference = references.find((recording) => recording.id === hit.referenceId);
      const spans: Span[] = hit.passages.map((passage) => ({
        fromS: passage.refStartS,
        toS: passage.refEndS,
      }));
      const margin = isMarketplace ? CONTEXT_S : 0;
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
        reference: reference
          ? {
              versionRole: reference.versionRole,
              durationS: reference.durationS,
              ending: reference.ending,
              wholeIsDrawn: isOwnLibrary,
              contour: drawnContour(
                reference.contour,
                isOwnLibrary
                  ? null
                  : spans.map((span) => ({ fromS: span.fromS - margin, toS: span.toS + margin })),
              ),
            }
          : null,
        passages: hit.passages.map((passage) => {
          const listening = listenings.find((candidate) => candidate.passageId === passage.id);
          return {
            ...passage,
            listening: listening?.state === "ready" ? (listening.render ?? {}) : null,
            listeningState: listening?.state ?? "being rendered",
          };
        }),
      };
    }),
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

/** What is known for and against each innocent explanation, before any paper is opened. */
async function explanationFacts(reader: Reader, row: CaseRow) {
  const delivery = await deliveryOfFamily(reader, row.familyId, row.deliveryId);
  const signed = delivery ? (await declarationsOf(reader, delivery.id)).at(-1) : undefined;
  const answers = (signed?.answers ?? {}) as {
    samples?: { kind: string; what: string; loopCode: string | null; paperWords: string; where: string }[];
    preExisting?: string;
  };
  const samples = answers.samples ?? [];
  return [
    {
      explanation: "own version",
      words: delivery?.draft.linkedFamilyId ? "A family link is declared." : "No family link is declared.",
      declared: Boolean(delivery?.draft.linkedFamilyId),
    },
    {
      explanation: "shared material",
      words: samples.some((sample) => sample.loopCode)
        ? `Declared: ${samples
            .filter((sample) => sample.loopCode)
            .map((sample) => sample.loopCode)
            .join(", ")}.`
        : "No registered loop is declared.",
      declared: samples.some((sample) => sample.loopCode),
    },
    {
      explanation: "licensed sample",
      words:
        samples.length > 0
          ? samples.map((sample) => `${sample.what} (${sample.kind})`).join("; ")
          : "No sample is declared.",
      declared: samples.length > 0,
    },
    {
      explanation: "old tune",
      words:
        answers.preExisting && answers.preExisting !== "none"
          ? `Declared: ${answers.preExisting}.`
          : "No old tune is declared; this compares recordings, not tunes.",
      declared: answers.preExisting !== undefined && answers.preExisting !== "none",
    },
    { explanation: "other title", words: "Open the papers to know.", declared: false },
  ];
}

async function papersOf(reader: Reader, row: CaseRow, groups: Awaited<ReturnType<typeof groupsOfCase>>) {
  const delivery = await deliveryOfFamily(reader, row.familyId, row.deliveryId);
  const deliverer = delivery
    ? (await peopleByIds(reader, [delivery.delivererId])).get(delivery.delivererId)
    : undefined;
  const library = await libraryById(reader, row.deliveringLibraryId);
  const references = await familiesByIds(
    reader,
    groups.filter((group) => group.referenceKind === "recording").map((group) => group.referenceKey),
  );
  const writers = await splitsNow(reader, [row.familyId, ...references.map((family) => family.id)]);
  const earlier = delivery
    ? await reader
        .select({
          number: cases.number,
          openedAt: cases.openedAt,
          state: cases.state,
          outcome: findings.outcome,
        })
        .from(cases)
        .innerJoin(findings, eq(findings.caseId, cases.id))
        .where(and(eq(cases.familyId, row.familyId), ne(cases.id, row.id), isNull(findings.supersededBy)))
    : [];
  const upheld = delivery
    ? await reader
        .select({ fromAt: upheldFindings.fromAt, throughAt: upheldFindings.throughAt })
        .from(upheldFindings)
        .where(and(eq(upheldFindings.personId, delivery.delivererId), isNull(upheldFindings.removedAt)))
    : [];
  return {
    openedAt: row.papersOpenedAt,
    delivery: {
      delivererName: deliverer?.name ?? "",
      libraryName: library?.name ?? "",
      deliveredAt: delivery?.deliveredAt ?? null,
      writers: writers.get(row.familyId) ?? [],
      declarations: delivery ? await declarationsOf(reader, delivery.id) : [],
    },
    references: await Promise.all(
      references.map(async (family) => ({
        title: family.title,
        libraryName: (await libraryById(reader, family.libraryId))?.name ?? "",
        state: family.state,
        createdAt: family.createdAt,
        listedAt: family.listedAt,
        yearRecorded: family.yearRecorded,
        deal: family.deal,
        writers: writers.get(family.id) ?? [],
      })),
    ),
    earlierCases: earlier,
    upheldFindings: upheld,
  };
}
