import { and, eq, inArray, isNull } from "drizzle-orm";
import { z } from "zod";
import { deliveries, deliveryVersions } from "@/db/schema/deliveries";
import { peopleByIds } from "@/lib/accounts";
import { familyById, libraryById, listClearRecordings, openHolds, recordingById } from "@/lib/catalogue";
import { versionRoleLabel } from "@/lib/catalogue/version-roles";
import { enqueue } from "@/lib/jobs";
import { env } from "@/lib/kernel/env";
import { command } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { lockOwnDelivery, writeDeliveryEvent } from "./own-delivery";

/**
 * Lists a family when its head is clear and both gates are open, by itself if acceptance came first. Versions that clear
 * later join it by the same call.
 */
export const tryListing = command({
  name: "deliveries.tryListing",
  who: ["system"],
  input: z.object({ deliveryId: z.string() }),
  authorise: async ({ tx, actor, input }) => lockOwnDelivery(tx, actor, input.deliveryId),
  run: async ({ tx, subject, now }) => {
    const family = subject.familyId ? await familyById(tx, subject.familyId) : null;
    const gatesOpen = subject.writersAcceptedAt !== null && subject.editorialAcceptedAt !== null;
    if (!family || !gatesOpen || !["delivered", "listed"].includes(subject.state)) return { listed: [] };
    const head = family.headRecordingId ? await recordingById(tx, family.headRecordingId) : null;
    const headReady = head !== null && ["clear", "listed"].includes(head.state);
    if (!headReady || (await openHolds(tx, family.id)).length > 0) return { listed: [] };
    const listed = await listClearRecordings(tx, family.id, {
      words: "Listed: screened, accepted by every writer and by the library.",
      personId: subject.editorialAcceptedBy,
      now,
    });
    if (listed.length === 0) return { listed };
    await tx
      .update(deliveryVersions)
      .set({ state: "listed", stateWords: "Listed." })
      .where(inArray(deliveryVersions.recordingId, listed));
    await tx.update(deliveries).set({ state: "listed" }).where(eq(deliveries.id, subject.id));
    await writeDeliveryEvent(tx, {
      deliveryId: subject.id,
      fromState: subject.state,
      toState: "listed",
      words: listed.length === 1 ? "One version is listed." : `${listed.length} versions are listed.`,
      now,
    });
    for (const recordingId of listed) {
      await enqueue(tx, "catalogue.renderPreview", { recordingId }, { key: recordingId, priority: 25 });
      await enqueue(tx, "catalogue.renderMaster", { recordingId }, { key: recordingId, priority: 28 });
    }
    await tell(tx, {
      deliveryId: subject.id,
      delivererId: subject.delivererId,
      title: subject.title,
      libraryId: subject.libraryId,
      catalogueNumber: family.catalogueNumber,
      now,
    });
    return { listed };
  },
  audit: ({ subject, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { listed: result.listed.length },
  }),
});

async function tell(
  tx: Parameters<typeof lockOwnDelivery>[0],
  args: {
    deliveryId: string;
    delivererId: string;
    title: string;
    libraryId: string;
    catalogueNumber: string;
    now: Date;
  },
): Promise<void> {
  const person = (await peopleByIds(tx, [args.delivererId])).get(args.delivererId);
  const library = await libraryById(tx, args.libraryId);
  if (!person || !library) return;
  const rows = await tx
    .select({ state: deliveryVersions.state, versionRole: deliveryVersions.versionRole })
    .from(deliveryVersions)
    .where(and(eq(deliveryVersions.deliveryId, args.deliveryId), isNull(deliveryVersions.replacedBy)));
  const labels = (isListed: boolean) =>
    rows
      .filter((row) => (row.state === "listed") === isListed)
      .map((row) => versionRoleLabel(row.versionRole));
  await enqueueMail(tx, {
    toAddress: person.email,
    personId: person.id,
    template: "delivery-listed",
    subjectId: args.deliveryId,
    props: {
      title: args.title,
      libraryName: library.name,
      listedAt: args.now.toISOString(),
      versions: labels(true),
      waitingVersions: labels(false),
      url: `${env.SITE_URL}/cues/${args.catalogueNumber}`,
      zone: person.timeZone,
    },
  });
}
