import { and, asc, eq, isNull } from "drizzle-orm";
import { z } from "zod";
import type { Reader, Tx } from "@/db/client";
import { declarations, deliveries, deliveryVersions } from "@/db/schema/deliveries";
import { setRecordingState } from "@/lib/catalogue";
import { enqueue } from "@/lib/jobs";
import { NotFound } from "@/lib/kernel/errors";
import { command } from "@/lib/kernel/verb";
import { currentRun } from "@/lib/screening";
import { lockOwnDelivery, writeDeliveryEvent } from "./own-delivery";

/** A screening has ended: the version takes its outcome, and the delivery goes on to a person or to listing. */
export const afterScreening = command({
  name: "deliveries.afterScreening",
  who: ["system"],
  input: z.object({ recordingId: z.string() }),
  authorise: async ({ tx, actor, input }) => {
    const [found] = await tx
      .select({ deliveryId: deliveryVersions.deliveryId })
      .from(deliveryVersions)
      .where(eq(deliveryVersions.recordingId, input.recordingId));
    if (!found) throw new NotFound();
    const delivery = await lockOwnDelivery(tx, actor, found.deliveryId);
    const [version] = await tx
      .select()
      .from(deliveryVersions)
      .where(eq(deliveryVersions.recordingId, input.recordingId))
      .for("update");
    if (!version) throw new NotFound();
    return { delivery, version };
  },
  run: async ({ tx, input, subject: { delivery, version }, now }) => {
    const run = await currentRun(tx, input.recordingId);
    if (!run) return { state: version.state };
    const passed = run.outcome === "clear" || run.outcome === "explained";
    // Not comparable is never clear: a person listens.
    const state = passed ? "clear" : "held";
    if (version.state === "screening") {
      await tx
        .update(deliveryVersions)
        .set({ state, stateWords: run.outcomeWords })
        .where(eq(deliveryVersions.id, version.id));
      await setRecordingState(tx, input.recordingId, passed ? "clear" : "held", {
        words: run.outcomeWords,
        now,
      });
    }
    await writeDeliveryEvent(tx, {
      deliveryId: delivery.id,
      versionId: version.id,
      fromState: version.state,
      toState: version.state === "screening" ? state : version.state,
      words: run.outcomeWords,
      now,
    });
    await goOn(tx, delivery.id, delivery.familyId);
    return { state };
  },
  audit: ({ subject, input, result }) => ({
    subject: subject.delivery.id,
    libraryId: subject.delivery.libraryId,
    detail: { recordingId: input.recordingId, ...result },
  }),
});

/** When every version has an outcome: held ones become one case; then the delivery tries to list. */
async function goOn(tx: Tx, deliveryId: string, familyId: string | null): Promise<void> {
  const rows = await tx
    .select({ state: deliveryVersions.state, recordingId: deliveryVersions.recordingId })
    .from(deliveryVersions)
    .where(and(eq(deliveryVersions.deliveryId, deliveryId), isNull(deliveryVersions.replacedBy)));
  if (rows.some((row) => row.state === "screening")) return;
  if (familyId && (await anyHeld(tx, rows))) {
    await enqueue(tx, "review.openCase", { deliveryId, familyId }, { priority: 20 });
  }
  await enqueue(tx, "delivery.tryListing", { deliveryId }, { priority: 30 });
}

/** A technically returned version whose screening was held needs a person as well. */
async function anyHeld(
  tx: Tx,
  rows: readonly { state: string; recordingId: string | null }[],
): Promise<boolean> {
  for (const row of rows) {
    if (row.state === "held") return true;
    if (row.state !== "returned" || !row.recordingId) continue;
    const run = await currentRun(tx, row.recordingId);
    if (run?.outcome === "held") return true;
  }
  return false;
}

/** A family's delivery, for rooms above: the newest, or the one named. */
export async function deliveryOfFamily(reader: Reader, familyId: string, deliveryId?: string) {
  const rows = await reader.select().from(deliveries).where(eq(deliveries.familyId, familyId));
  const newest = rows.sort((a, b) => b.createdAt.getTime() - a.createdAt.getTime());
  return (deliveryId ? newest.find((row) => row.id === deliveryId) : newest[0]) ?? null;
}

/** Signed declarations of a delivery, oldest first. */
export async function declarationsOf(reader: Reader, deliveryId: string) {
  return reader
    .select({
      version: declarations.version,
      textVersion: declarations.textVersion,
      answers: declarations.answers,
      sha256: declarations.sha256,
      signedName: declarations.signedName,
      signedAt: declarations.signedAt,
    })
    .from(declarations)
    .where(eq(declarations.deliveryId, deliveryId))
    .orderBy(asc(declarations.version));
}
