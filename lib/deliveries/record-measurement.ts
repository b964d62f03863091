import { and, eq, isNull, lt } from "drizzle-orm";
import { z } from "zod";
import { deliveries, deliveryVersions } from "@/db/schema/deliveries";
import { familiesByIds, recordingsBySha256, splitsNow } from "@/lib/catalogue";
import { NotFound } from "@/lib/kernel/errors";
import { command, query } from "@/lib/kernel/verb";
import { screenReplacement } from "./admit-versions";
import { lockOwnDelivery, writeDeliveryEvent } from "./own-delivery";

export const readVersionToMeasure = query({
  name: "deliveries.readVersionToMeasure",
  who: ["system"],
  input: z.object({ versionId: z.string() }),
  authorise: async ({ reader, input }) => {
    const [row] = await reader
      .select({ version: deliveryVersions, draft: deliveries.draft })
      .from(deliveryVersions)
      .innerJoin(deliveries, eq(deliveries.id, deliveryVersions.deliveryId))
      .where(eq(deliveryVersions.id, input.versionId));
    if (!row) throw new NotFound();
    return row;
  },
  run: async ({ subject: { version, draft } }) => ({
    fileKey: version.fileKey,
    fileName: version.fileName,
    versionRole: version.versionRole,
    sha256: version.sha256,
    facts: version.facts,
    measures: version.measures,
    ending: typeof draft.ending === "string" ? draft.ending : null,
    genre: typeof draft.genre === "string" ? draft.genre : null,
  }),
});

const CheckRow = z.looseObject({
  code: z.string(),
  verdict: z.enum(["pass", "warn", "return"]),
  what: z.string(),
});
const Bytes = z.custom<Uint8Array>((value) => value instanceof Uint8Array);

async function lockVersion({
  tx,
  actor,
  input,
}: {
  tx: Parameters<typeof lockOwnDelivery>[0];
  actor: Parameters<typeof lockOwnDelivery>[1];
  input: { versionId: string };
}) {
  const [found] = await tx
    .select({ deliveryId: deliveryVersions.deliveryId })
    .from(deliveryVersions)
    .where(eq(deliveryVersions.id, input.versionId));
  if (!found) throw new NotFound();
  const delivery = await lockOwnDelivery(tx, actor, found.deliveryId);
  const [version] = await tx
    .select()
    .from(deliveryVersions)
    .where(eq(deliveryVersions.id, input.versionId))
    .for("update");
  if (!version) throw new NotFound();
  return { delivery, version };
}

/** What was measured and how it was judged. A return names its codes and keeps everything that was right. */
export const recordMeasurement = command({
  name: "deliveries.recordMeasurement",
  who: ["system"],
  input: z.object({
    versionId: z.string(),
    sha256: z.string().length(64),
    facts: z.record(z.string(), z.unknown()).optional(),
    measures: z.record(z.string(), z.unknown()).optional(),
    contour: Bytes.optional(),
    features: Bytes.optional(),
    checks: z.array(CheckRow),
  }),
  authorise: lockVersion,
  run: async ({ tx, input, subject: { delivery, version }, now }) => {
    const earlier =
      (await deliveredBefore(tx, delivery.delivererId, input.sha256, version.recordingId)) ??
      (await besideItself(tx, delivery.id, version, input.sha256));
    const returns = input.checks.filter((check) => check.verdict === "return");
    const returned = earlier !== null || returns.length > 0;
    const words = earlier
      ? `You already delivered this as ${earlier}. One recording is held once; nothing else is needed.`
      : returns.length > 0
        ? returns
            .map((check) => `${check.code}: ${check.what}`)
            .join(" ")
            .slice(0, 500)
        : "Measured; it passes the checks.";
    const isNew = version.recordingId === null;
    const state = isNew ? (returned ? "returned" : "measured") : version.state;
    await tx
      .update(deliveryVersions)
      .set({
        sha256: input.sha256,
        ...(input.facts ? { facts: input.facts } : {}),
        ...(input.measures ? { measures: input.measures } : {}),
        ...(input.contour ? { contour: Buffer.from(input.contour) } : {}),
        ...(input.features ? { soundFeatures: Buffer.from(input.features) } : {}),
        checks: input.checks,
        ...(isNew ? { state, stateWords: words } : {}),
      })
      .where(eq(deliveryVersions.id, version.id));
    if (isNew && state !== version.state) {
      await writeDeliveryEvent(tx, {
        deliveryId: delivery.id,
        versionId: version.id,
        fromState: version.state,
        toState: state,
        words,
        codes: returns.map((check) => check.code),
        now,
      });
    }
    if (isNew && delivery.state !== "draft" && !earlier)
      await screenReplacement(tx, { delivery, versionId: version.id, now });
    return { state };
  },
  audit: ({ subject, input, result }) => ({
    subject: subject.delivery.id,
    libraryId: subject.delivery.libraryId,
    detail: { versionId: input.versionId, ...result },
  }),
});

export const recordUnreadable = command({
  name: "deliveries.recordUnreadable",
  who: ["system"],
  input: z.object({ versionId: z.string(), words: z.string() }),
  authorise: lockVersion,
  run: async ({ tx, input, subject: { delivery, version }, now }) => {
    await tx
      .update(deliveryVersions)
      .set({ state: "unreadable", stateWords: input.words.slice(0, 500) })
      .where(eq(deliveryVersions.id, version.id));
    await writeDeliveryEvent(tx, {
      deliveryId: delivery.id,
      versionId: version.id,
      fromState: version.state,
      toState: "unreadable",
      words: input.words,
      codes: ["T02"],
      now,
    });
    return null;
  },
  audit: ({ subject, input }) => ({
    subject: subject.delivery.id,
    libraryId: subject.delivery.libraryId,
    detail: { versionId: input.versionId },
  }),
});

/** The name of another file of this delivery with the same bytes. */
async function besideItself(
  tx: Parameters<typeof lockOwnDelivery>[0],
  deliveryId: string,
  version: { id: string; position: number },
  sha256: string,
): Promise<string | null> {
  const same = await tx
    .select({ id: deliveryVersions.id, fileName: deliveryVersions.fileName })
    .from(deliveryVersions)
    .where(
      and(
        eq(deliveryVersions.deliveryId, deliveryId),
        eq(deliveryVersions.sha256, sha256),
        isNull(deliveryVersions.replacedBy),
        lt(deliveryVersions.position, version.position),
      ),
    );
  return same[0]?.fileName ?? null;
}

/** Title under which the same writer already delivered exactly these bytes, in any library. */
async function deliveredBefore(
  tx: Parameters<typeof lockOwnDelivery>[0],
  delivererId: string,
  sha256: string,
  recordingId: string | null,
): Promise<string | null> {
  const same = (await recordingsBySha256(tx, sha256)).filter((recording) => recording.id !== recordingId);
  if (same.length === 0) return null;
  const writers = await splitsNow(
    tx,
    same.map((recording) => recording.familyId),
  );
  const own = same.find((recording) =>
    writers
      .get(recording.familyId)
      ?.some((writer) => writer.acceptedAt !== null && writer.personId === delivererId),
  );
  if (!own) return null;
  const [family] = await familiesByIds(tx, [own.familyId]);
  return family?.title ?? null;
}
