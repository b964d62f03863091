import { and, eq, inArray, isNull } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { deliveries, deliveryVersions } from "@/db/schema/deliveries";
import { setFamilyState, setRecordingState } from "@/lib/catalogue";
import { enqueue } from "@/lib/jobs";
import { writeDeliveryEvent } from "./own-delivery";

export type FindingEffect = "clear" | "returned" | "held" | "refused";

/**
 * What a closed case does to a delivery: each version takes the worst answer of its groups. Called by review inside
 * the transaction that closes the case; refused recordings stay in the index as references.
 */
export async function applyFinding(
  tx: Tx,
  args: {
    deliveryId: string;
    effects: ReadonlyMap<string, FindingEffect>;
    words: string;
    codes: string[];
    personId: string | null;
    now: Date;
  },
): Promise<void> {
  const rows = await tx
    .select()
    .from(deliveryVersions)
    .where(
      and(
        eq(deliveryVersions.deliveryId, args.deliveryId),
        isNull(deliveryVersions.replacedBy),
        inArray(deliveryVersions.recordingId, [...args.effects.keys()]),
      ),
    );
  for (const version of rows) {
    const effect = version.recordingId ? args.effects.get(version.recordingId) : undefined;
    if (!effect || !version.recordingId || version.state === "listed") continue;
    const isTechnicalReturn = version.state === "returned" && effect === "clear";
    if (isTechnicalReturn) continue;
    await tx
      .update(deliveryVersions)
      .set({ state: effect, stateWords: args.words.slice(0, 500) })
      .where(eq(deliveryVersions.id, version.id));
    await setRecordingState(tx, version.recordingId, effect, {
      words: args.words,
      personId: args.personId,
      now: args.now,
    });
    await writeDeliveryEvent(tx, {
      deliveryId: args.deliveryId,
      versionId: version.id,
      fromState: version.state,
      toState: effect,
      words: args.words,
      personId: args.personId,
      codes: args.codes,
      now: args.now,
    });
  }
  const [delivery] = await tx
    .select()
    .from(deliveries)
    .where(eq(deliveries.id, args.deliveryId))
    .for("update");
  const all = await tx
    .select({ state: deliveryVersions.state })
    .from(deliveryVersions)
    .where(and(eq(deliveryVersions.deliveryId, args.deliveryId), isNull(deliveryVersions.replacedBy)));
  if (delivery && all.length > 0 && all.every((row) => row.state === "refused")) {
    await tx.update(deliveries).set({ state: "refused" }).where(eq(deliveries.id, args.deliveryId));
    if (delivery.familyId)
      await setFamilyState(tx, delivery.familyId, "refused", {
        words: args.words,
        personId: args.personId,
        now: args.now,
      });
  }
  await enqueue(tx, "delivery.tryListing", { deliveryId: args.deliveryId }, { priority: 30 });
}
