import { and, asc, desc, eq, inArray, isNull } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { alignedListenings, caseMessages, cases, confirmations, findings } from "@/db/schema/review";
import { familiesByIds } from "@/lib/catalogue";
import { deliveryOfFamily } from "@/lib/deliveries";
import { NotFound } from "@/lib/kernel/errors";
import { query } from "@/lib/kernel/verb";
import { hitsByIds } from "@/lib/screening";
import { groupsOfCase } from "./case-hits";

/**
 * A case as the deliverer sees it: the question, the places in their own recording, and the finding with its evidence.
 * Of the other side only whether it is listed; a recording that is not is "a confidential holding".
 */
export const getCaseOfDelivery = query({
  name: "review.getCaseOfDelivery",
  who: ["composer", "owner", "staff"],
  input: z.object({ deliveryId: z.string() }),
  authorise: async ({ reader, actor, input }) => {
    const [row] = await reader
      .select()
      .from(cases)
      .where(eq(cases.deliveryId, input.deliveryId))
      .orderBy(desc(cases.openedAt))
      .limit(1);
    const delivery = row ? await deliveryOfFamily(reader, row.familyId, row.deliveryId) : null;
    const isTheirs =
      delivery &&
      (delivery.delivererId === actor.personId ||
        (actor.kind !== "composer" && delivery.libraryId === actor.libraryId));
    if (!isTheirs) throw new NotFound();
    return row ?? null;
  },
  run: async ({ reader, subject: row }) => {
    if (!row) return null;
    const groups = await groupsOfCase(reader, row.id);
    const families = await familiesByIds(
      reader,
      groups.filter((group) => group.referenceKind === "recording").map((group) => group.referenceKey),
    );
    const messages = await reader
      .select()
      .from(caseMessages)
      .where(and(eq(caseMessages.caseId, row.id), inArray(caseMessages.kind, ["question", "answer"])))
      .orderBy(asc(caseMessages.at));
    const given = await reader
      .select({ finding: findings, second: confirmations })
      .from(findings)
      .leftJoin(confirmations, eq(confirmations.findingId, findings.id))
      .where(and(eq(findings.caseId, row.id), isNull(findings.supersededBy)));
    const isClosed = row.state === "closed";
    return {
      number: row.number,
      state: row.state,
      dueAt: row.dueAt,
      closedAt: row.closedAt,
      messages: messages.map((message) => ({
        kind: message.kind,
        words: message.words,
        at: message.at,
        answerUntil: message.answerUntil,
        hasFile: message.fileKey !== null,
      })),
      groups: await Promise.all(
        groups.map(async (group) => ({
          ...(await groupForDeliverer(reader, group, families)),
          finding: isClosed ? findingForDeliverer(given, group.id) : null,
        })),
      ),
    };
  },
});
export type DelivererCase = Awaited<ReturnType<typeof getCaseOfDelivery>>;

type Group = Awaited<ReturnType<typeof groupsOfCase>>[number];

function referenceForDeliverer(group: Group, isListed: boolean): string {
  if (group.referenceKind === "own") return "no other recording";
  if (group.referenceKind === "reported") return "a reported work";
  return isListed ? "a recording that is listed on this service" : "a confidential holding";
}

async function groupForDeliverer(
  reader: Reader,
  group: Group,
  families: Awaited<ReturnType<typeof familiesByIds>>,
) {
  const isListed = families.find((family) => family.id === group.referenceKey)?.state === "listed";
  const hits = await hitsByIds(reader, group.hitIds);
  const passageIds = hits.flatMap((hit) => hit.passages.map((passage) => passage.id));
  const listenings =
    isListed && passageIds.length
      ? await reader
          .select({ passageId: alignedListenings.passageId, render: alignedListenings.render })
          .from(alignedListenings)
          .where(and(inArray(alignedListenings.passageId, passageIds), eq(alignedListenings.state, "ready")))
      : [];
  return {
    relation: group.relation,
    reference: referenceForDeliverer(group, isListed),
    passages: hits.flatMap((hit) =>
      hit.passages.map((passage) => ({
        id: passage.id,
        number: passage.number,
        mayHear: listenings.some((listening) => listening.passageId === passage.id),
        /** The deliverer's own recording, in which the times lie. */
        recordingId: hit.recordingId,
        startS: passage.startS,
        endS: passage.endS,
        speed: passage.speed,
        pitchSemitones: passage.pitchSemitones,
        /** Of a listed reference only: where the other side's seconds lie, and how the two were brought into step. */
        heard: heardSide(passage, listenings.find((listening) => listening.passageId === passage.id)?.render),
      })),
    ),
  };
}

function heardSide(
  passage: { refStartS: number; refEndS: number },
  render: Record<string, unknown> | null | undefined,
) {
  return render ? { refStartS: passage.refStartS, refEndS: passage.refEndS, render } : null;
}

function findingForDeliverer(
  given: readonly {
    finding: typeof findings.$inferSelect;
    second: typeof confirmations.$inferSelect | null;
  }[],
  groupId: string,
) {
  const entry = given.find((candidate) => candidate.finding.groupId === groupId);
  if (!entry) return null;
  const { finding, second } = entry;
  return {
    outcome: finding.outcome,
    explainedBy: finding.explainedBy,
    codes: finding.codes,
    reasons: finding.reasons,
    notDecided: finding.notDecided,
    decidedAt: finding.decidedAt,
    confirmed: second?.confirmed ?? false,
  };
}

/** The deliverer hears the overlapping seconds of a listed recording against their own; nothing else of it. */
export const hearOwnPassage = query({
  name: "review.hearOwnPassage",
  who: ["composer", "owner", "staff"],
  input: z.object({ passageId: z.string() }),
  authorise: async ({ reader, actor, input }) => {
    const [listening] = await reader
      .select()
      .from(alignedListenings)
      .where(eq(alignedListenings.passageId, input.passageId));
    const [hit] = listening ? await hitsByIds(reader, [listening.hitId]) : [];
    const [family] = hit?.referenceFamilyId ? await familiesByIds(reader, [hit.referenceFamilyId]) : [];
    if (!listening?.fileKey || !hit || family?.state !== "listed") throw new NotFound();
    const all = await reader
      .select({ deliveryId: cases.deliveryId, familyId: cases.familyId, id: cases.id })
      .from(cases);
    for (const row of all) {
      if (!(await groupsOfCase(reader, row.id)).some((group) => group.hitIds.includes(hit.id))) continue;
      const delivery = await deliveryOfFamily(reader, row.familyId, row.deliveryId);
      if (delivery?.delivererId === actor.personId) return listening;
    }
    throw new NotFound();
  },
  run: async ({ subject }) => ({ fileKey: subject.fileKey }),
});
