import { and, count, eq, ne } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { caseGroups, cases } from "@/db/schema/review";
import { peopleWithRole } from "@/lib/accounts";
import { recordingsOfFamily } from "@/lib/catalogue";
import { deliveryOfFamily, lockOwnDelivery } from "@/lib/deliveries";
import { enqueue } from "@/lib/jobs";
import { addBusinessDays, civilDateIn, endOfDay } from "@/lib/kernel/calendar";
import { NotFound } from "@/lib/kernel/errors";
import { UK_HOLIDAYS } from "@/lib/kernel/holidays";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { currentRuns, type HitRow, hitsOf } from "@/lib/screening";
import { FIRST_LOOK_WORKING_DAYS } from "./states";

/**
 * Opens a case for the unexplained hits of a delivery, one group per reference family or reported work. A case with any
 * reference outside the delivering library goes whole to the marketplace.
 */
export const openCase = command({
  name: "review.openCase",
  who: ["system"],
  input: z.object({ deliveryId: z.string(), familyId: z.string() }),
  guard: async ({ tx, actor, input }) => void (await lockOwnDelivery(tx, actor, input.deliveryId)),
  authorise: async ({ tx, input }) => {
    const delivery = await deliveryOfFamily(tx, input.familyId, input.deliveryId);
    if (!delivery) throw new NotFound();
    return delivery;
  },
  run: async ({ tx, input, subject: delivery, now }): Promise<{ caseId: string | null }> => {
    const groups = await gatherGroups(tx, input.familyId, delivery.libraryId);
    if (groups.length === 0) return { caseId: null };
    const [open] = await tx
      .select()
      .from(cases)
      .where(and(eq(cases.deliveryId, delivery.id), ne(cases.state, "closed")))
      .for("update");
    const outside =
      groups.some((group) => group.outsideLibrary) ||
      (await peopleWithRole(tx, "moderator", delivery.libraryId)).length === 0;
    const caseId = open?.id ?? newId("cas");
    if (open) {
      await tx
        .update(cases)
        .set({ version: open.version + 1, libraryId: outside ? null : open.libraryId })
        .where(eq(cases.id, open.id));
    } else {
      const due = addBusinessDays(civilDateIn(now, "Europe/London"), FIRST_LOOK_WORKING_DAYS, UK_HOLIDAYS);
      const [total] = await tx.select({ count: count() }).from(cases);
      await tx.insert(cases).values({
        id: caseId,
        number: (total?.count ?? 0) + 1,
        deliveryId: delivery.id,
        familyId: input.familyId,
        libraryId: outside ? null : delivery.libraryId,
        deliveringLibraryId: delivery.libraryId,
        state: "open",
        dueAt: endOfDay(due, "Europe/London"),
        openedAt: now,
      });
    }
    for (const group of groups) {
      const { hits, ...columns } = group;
      const hitIds = hits.map((hit) => hit.id);
      await tx
        .insert(caseGroups)
        .values({ id: newId("grp"), caseId, ...columns, hitIds })
        .onDuplicateKeyUpdate({ set: { hitIds } });
      for (const hitId of hitIds)
        await enqueue(tx, "review.renderListening", { hitId }, { key: hitId, priority: 35 });
    }
    return { caseId };
  },
  audit: ({ subject, result }) => ({ subject: result.caseId ?? subject.id, libraryId: subject.libraryId }),
});

interface Group {
  referenceKind: string;
  referenceKey: string;
  relation: string;
  outsideLibrary: boolean;
  hits: HitRow[];
}

async function gatherGroups(tx: Tx, familyId: string, libraryId: string): Promise<Group[]> {
  const recordings = await recordingsOfFamily(tx, familyId);
  const ids = recordings.map((recording) => recording.id);
  const groups = new Map<string, Group>();
  for (const hit of await hitsOf(tx, ids)) {
    if (hit.band !== "hold" || hit.explainedBy) continue;
    const key =
      hit.referenceKind === "recording" ? (hit.referenceFamilyId ?? hit.referenceId) : hit.referenceId;
    const group = groups.get(`${hit.referenceKind}:${key}`);
    if (group) group.hits.push(hit);
    else {
      const outsideLibrary =
        hit.referenceKind === "reported" ||
        (hit.referenceKind === "recording" && hit.referenceLibraryId !== libraryId);
      groups.set(`${hit.referenceKind}:${key}`, {
        referenceKind: hit.referenceKind,
        referenceKey: key,
        relation: hit.relation,
        outsideLibrary,
        hits: [hit],
      });
    }
  }
  // Held without a hit: not comparable, or a cutdown that does not match its family. A person listens to the recording itself.
  for (const run of await currentRuns(tx, ids)) {
    const hasHit = [...groups.values()].some((group) =>
      group.hits.some((hit) => hit.recordingId === run.recordingId),
    );
    if (hasHit || (run.outcome !== "not comparable" && run.outcome !== "held")) continue;
    groups.set(`own:${run.recordingId}`, {
      referenceKind: "own",
      referenceKey: run.recordingId,
      relation: run.outcome === "not comparable" ? "not comparable" : "no family match",
      outsideLibrary: false,
      hits: [],
    });
  }
  return [...groups.values()];
}
