import { and, eq, isNull } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { caseMessages, cases, confirmations, findings, upheldFindings } from "@/db/schema/review";
import { deliveryOfFamily } from "@/lib/deliveries";
import { addDays, civilDateIn, endOfDay, sameDayOrLast } from "@/lib/kernel/calendar";
import { Forbidden, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { groupsOfCase } from "./case-hits";
import { closeIfAnswered } from "./close-case";
import { lockCase, requireNoConflict } from "./own-case";
import {
  EXPLAINED_BY,
  FINDING_OUTCOMES,
  type FindingOutcome,
  RIGHTS_CODES,
  type RightsCode,
  UPHELD_MONTHS,
} from "./states";

const outcomes = Object.keys(FINDING_OUTCOMES) as [FindingOutcome, ...FindingOutcome[]];
const codes = Object.keys(RIGHTS_CODES) as [RightsCode, ...RightsCode[]];

/** Reasons are at least two sentences that a stranger understands. */
const Reasons = z
  .string()
  .trim()
  .max(6000)
  .refine(
    (text) => (text.match(/[.!?](\s|$)/g) ?? []).length >= 2 && text.length >= 60,
    "At least two sentences that a stranger understands.",
  );

export const RecordFinding = z
  .object({
    caseId: z.string(),
    groupId: z.string(),
    outcome: z.enum(outcomes),
    explainedBy: z.enum(EXPLAINED_BY).nullable().default(null),
    codes: z.array(z.enum(codes)).max(4).default([]),
    reasons: Reasons,
    notDecided: z.string().trim().max(1000).default(""),
    /** The separate answer that decides whether the finding goes on a person's record. */
    knowing: z.boolean().nullable().default(null),
    knowingBecause: z.string().trim().max(1000).default(""),
    alternatives: z.array(z.string().max(40)).max(10).default([]),
  })
  .superRefine((finding, context) => {
    if (finding.outcome === "explained" && !finding.explainedBy)
      context.addIssue({ code: "custom", path: ["explainedBy"], message: "Say what explains it." });
    if (finding.outcome === "cannot be listed" && finding.codes.length === 0)
      context.addIssue({ code: "custom", path: ["codes"], message: "A refusal names its code." });
    if (finding.outcome === "cannot be listed" && finding.knowing === null)
      context.addIssue({
        code: "custom",
        path: ["knowing"],
        message: "Say whether it was knowing or reckless; that is a question of its own.",
      });
    if (finding.knowing && finding.knowingBecause.length < 20)
      context.addIssue({
        code: "custom",
        path: ["knowingBecause"],
        message: "Knowing or reckless, because …",
      });
  });

/** REVIEW-3: every finding has a reason and a human author; a refusal for a rights reason takes effect with a second one. */
export const recordFinding = command({
  name: "review.recordFinding",
  who: ["moderator"],
  input: RecordFinding,
  authorise: async ({ tx, actor, input }) => {
    const row = await lockCase(tx, actor, input.caseId);
    await requireNoConflict(tx, actor, row.id);
    const group = (await groupsOfCase(tx, row.id)).find((candidate) => candidate.id === input.groupId);
    if (!group) throw new NotFound();
    return { row, group };
  },
  run: async ({ tx, actor, input, subject: { row, group }, now }) => {
    if (row.state !== "open")
      throw new Precondition(row.state === "closed" ? "This case is closed." : `This case is ${row.state}.`);
    if (row.holderId && row.holderId !== actor.personId)
      throw new Precondition("A colleague holds this case. They can hand it over.");
    const findingId = newId("fin");
    const needsSecond = input.outcome === "cannot be listed";
    await tx
      .update(findings)
      .set({ supersededBy: findingId })
      .where(and(eq(findings.groupId, group.id), isNull(findings.supersededBy)));
    await tx.insert(findings).values({
      id: findingId,
      caseId: row.id,
      groupId: group.id,
      outcome: input.outcome,
      explainedBy: input.explainedBy,
      codes: input.codes,
      reasons: input.reasons,
      notDecided: input.notDecided,
      knowing: input.knowing,
      knowingBecause: input.knowingBecause || null,
      alternatives: input.alternatives,
      deciderId: actor.personId,
      decidedAt: now,
      needsSecond,
    });
    await tx
      .update(cases)
      .set({ holderId: actor.personId, ...(needsSecond ? { state: "waiting on second person" } : {}) })
      .where(eq(cases.id, row.id));
    const closed = needsSecond ? false : await closeIfAnswered(tx, { caseId: row.id, now });
    return { findingId, closed };
  },
  audit: ({ subject, input, result }) => ({
    subject: subject.row.id,
    libraryId: subject.row.deliveringLibraryId,
    detail: { findingId: result.findingId, outcome: input.outcome, codes: input.codes },
  }),
});

const ConfirmFinding = z.object({
  findingId: z.string(),
  confirm: z.boolean(),
  words: z.string().trim().min(10, "A sentence: what you heard and read.").max(2000),
});

/** A second person, never the first and never one with a conflict: a colleague, or the marketplace's where there is none. */
export const confirmFinding = command({
  name: "review.confirmFinding",
  who: ["moderator"],
  input: ConfirmFinding,
  authorise: async ({ tx, actor, input }) => {
    const [finding] = await tx.select().from(findings).where(eq(findings.id, input.findingId));
    if (!finding) throw new NotFound();
    const row = await lockCase(tx, actor, finding.caseId);
    await requireNoConflict(tx, actor, row.id);
    return { finding, row };
  },
  run: async ({ tx, actor, input, subject: { finding, row }, now }) => {
    if (finding.deciderId === actor.personId)
      throw new Forbidden("The second person is somebody else than the first.");
    if (row.state !== "waiting on second person" || finding.supersededBy)
      throw new Precondition("Nothing waits for a second person here.");
    await tx.insert(confirmations).values({
      findingId: finding.id,
      confirmerId: actor.personId,
      confirmed: input.confirm,
      words: input.words,
      at: now,
    });
    await tx.update(cases).set({ state: "open" }).where(eq(cases.id, row.id));
    if (!input.confirm) {
      await tx.update(findings).set({ supersededBy: "not confirmed" }).where(eq(findings.id, finding.id));
      await tx.insert(caseMessages).values({
        id: newId("msg"),
        caseId: row.id,
        kind: "note",
        authorId: actor.personId,
        words: `Not confirmed: ${input.words}`,
        passageIds: [],
        at: now,
      });
      return { closed: false };
    }
    if (finding.knowing)
      await putOnRecord(tx, {
        findingId: finding.id,
        familyId: row.familyId,
        deliveryId: row.deliveryId,
        now,
      });
    return { closed: await closeIfAnswered(tx, { caseId: row.id, now }) };
  },
  audit: ({ subject, input }) => ({
    subject: subject.row.id,
    libraryId: subject.row.deliveringLibraryId,
    detail: { findingId: input.findingId, confirm: input.confirm },
  }),
});

/** Upheld findings attach to the person, count from confirmation and expire. */
async function putOnRecord(
  tx: Tx,
  args: { findingId: string; familyId: string; deliveryId: string; now: Date },
): Promise<void> {
  const delivery = await deliveryOfFamily(tx, args.familyId, args.deliveryId);
  if (!delivery) return;
  const from = civilDateIn(args.now, "Etc/UTC");
  const through = endOfDay(addDays(sameDayOrLast(from, UPHELD_MONTHS), -1), "Etc/UTC");
  await tx.insert(upheldFindings).values({
    id: newId("uph"),
    findingId: args.findingId,
    personId: delivery.delivererId,
    fromAt: args.now,
    throughAt: through,
  });
}
