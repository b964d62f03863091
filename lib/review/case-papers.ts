import { and, eq, isNull, ne } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { cases, findings, upheldFindings } from "@/db/schema/review";
import { peopleByIds } from "@/lib/accounts";
import { familiesByIds, libraryById, splitsNow } from "@/lib/catalogue";
import { declarationsOf, deliveryOfFamily } from "@/lib/deliveries";
import type { groupsOfCase } from "./case-hits";
import type { CaseRow, Moderator } from "./own-case";

/** What is known for and against each innocent explanation, before any paper is opened. */
export async function explanationFacts(reader: Reader, row: CaseRow) {
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

/** The papers of both sides, once opened. A library's moderator gets none of another library. */
export async function papersOf(
  reader: Reader,
  actor: Moderator,
  row: CaseRow,
  groups: Awaited<ReturnType<typeof groupsOfCase>>,
) {
  const delivery = await deliveryOfFamily(reader, row.familyId, row.deliveryId);
  const deliverer = delivery
    ? (await peopleByIds(reader, [delivery.delivererId])).get(delivery.delivererId)
    : undefined;
  const library = await libraryById(reader, row.deliveringLibraryId);
  const families = await familiesByIds(
    reader,
    groups.filter((group) => group.referenceKind === "recording").map((group) => group.referenceKey),
  );
  const references = families.filter(
    (family) => actor.libraryId === null || family.libraryId === actor.libraryId,
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
