import { and, eq, inArray, isNull, max } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { deliveries, deliveryVersions } from "@/db/schema/deliveries";
import { confirmedName, peopleByIds } from "@/lib/accounts";
import { findVersionRole } from "@/lib/catalogue/version-roles";
import { enqueue } from "@/lib/jobs";
import { Invalid, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command, open } from "@/lib/kernel/verb";
import { guessRole } from "./guess-role";
import {
  DELIVERERS,
  type Deliverer,
  lockOwnDelivery,
  ownDelivery,
  requireDraft,
  writeDeliveryEvent,
} from "./own-delivery";
import { DeliveryDraft, IsrcField } from "./schemas";

export const startDelivery = command({
  name: "deliveries.startDelivery",
  who: DELIVERERS,
  input: z.object({ title: z.string().trim().max(200).default("") }),
  authorise: open("whoever delivers for a library may start a draft in it"),
  run: async ({ tx, actor, input, now }) => {
    const deliveryId = newId("del");
    const writers = await firstWriter(tx, actor);
    await tx.insert(deliveries).values({
      id: deliveryId,
      libraryId: actor.libraryId,
      delivererId: actor.personId,
      delivererKind: actor.kind,
      title: input.title,
      draft: { ...(input.title ? { title: input.title } : {}), ...(writers ? { writers } : {}) },
      state: "draft",
      createdAt: now,
      updatedAt: now,
    });
    return { deliveryId };
  },
  audit: ({ actor, result }) => ({ subject: result.deliveryId, libraryId: actor.libraryId }),
});

/** A composer stands in the table of writers from the start, with the name and IPI that the library has confirmed. */
async function firstWriter(tx: Tx, actor: Deliverer) {
  if (actor.kind !== "composer") return null;
  const person = (await peopleByIds(tx, [actor.personId])).get(actor.personId);
  const confirmed = await confirmedName(tx, actor.libraryId, actor.personId);
  return [
    {
      name: confirmed?.creditName ?? actor.name,
      email: person?.email ?? "",
      ipi: confirmed?.ipi ?? "",
      role: "C",
      share: "100.00",
    },
  ];
}

/** Keeps the form as far as it is filled in. Nothing is judged yet. */
export const saveDraft = command({
  name: "deliveries.saveDraft",
  who: DELIVERERS,
  input: z.object({ deliveryId: z.string(), draft: DeliveryDraft }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await lockOwnDelivery(tx, actor, input.deliveryId);
    requireDraft(actor, delivery);
    return delivery;
  },
  run: async ({ tx, input, subject, now }) => {
    const draft = { ...subject.draft, ...input.draft };
    const title = typeof draft.title === "string" ? draft.title.trim().slice(0, 200) : subject.title;
    await tx.update(deliveries).set({ draft, title, updatedAt: now }).where(eq(deliveries.id, subject.id));
    const judgedBy = ["ending", "genre"] as const;
    if (judgedBy.some((field) => draft[field] !== subject.draft[field])) await judgeAgain(tx, subject.id);
    return { savedAt: now };
  },
  audit: ({ subject, input }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { fields: Object.keys(input.draft) },
  }),
});

/** Some checks depend on what is declared of the ending and the genre; the files themselves are measured already. */
async function judgeAgain(tx: Tx, deliveryId: string): Promise<void> {
  const measured = await tx
    .select({ id: deliveryVersions.id })
    .from(deliveryVersions)
    .where(
      and(
        eq(deliveryVersions.deliveryId, deliveryId),
        isNull(deliveryVersions.replacedBy),
        inArray(deliveryVersions.state, ["measured", "returned"]),
      ),
    );
  for (const { id } of measured) await enqueue(tx, "delivery.measure", { versionId: id }, { priority: 10 });
}

/** Asked before an upload starts: is this delivery theirs to add files to? */
export const admitUpload = command({
  name: "deliveries.admitUpload",
  who: DELIVERERS,
  input: z.object({ deliveryId: z.string(), files: z.int().min(1).max(60) }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await ownDelivery(tx, actor, input.deliveryId);
    if (delivery.delivererId !== actor.personId) throw new NotFound();
    return delivery;
  },
  run: async ({ tx, input, subject }) => {
    if (!["draft", "delivered", "listed", "returned"].includes(subject.state))
      throw new Precondition("This delivery is closed; start a new one.");
    const rows = await tx
      .select({ id: deliveryVersions.id })
      .from(deliveryVersions)
      .where(and(eq(deliveryVersions.deliveryId, subject.id), isNull(deliveryVersions.replacedBy)));
    if (rows.length + input.files > 60) throw new Invalid("A family holds at most 60 files.");
    return null;
  },
  audit: ({ subject, input }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { files: input.files },
  }),
});

const FileArrived = z.object({
  deliveryId: z.string(),
  personId: z.string(),
  key: z.string().max(120),
  name: z.string().max(255),
  sizeBytes: z.int().min(0),
  /** The version whose file this one takes the place of. */
  replaces: z.string().nullable().default(null),
});

/** The store says that a file is whole. The same file announced twice is one version. */
export const fileArrived = command({
  name: "deliveries.fileArrived",
  who: ["system"],
  input: FileArrived,
  authorise: async ({ tx, actor, input }) => lockOwnDelivery(tx, actor, input.deliveryId),
  run: async ({ tx, input, subject, now }) => {
    const [known] = await tx
      .select({ id: deliveryVersions.id })
      .from(deliveryVersions)
      .where(eq(deliveryVersions.fileKey, input.key));
    if (known) return { versionId: known.id };
    const present = await tx
      .select({
        id: deliveryVersions.id,
        versionRole: deliveryVersions.versionRole,
        position: deliveryVersions.position,
        isrc: deliveryVersions.isrc,
      })
      .from(deliveryVersions)
      .where(and(eq(deliveryVersions.deliveryId, subject.id), isNull(deliveryVersions.replacedBy)));
    const replaced = present.find((row) => row.id === input.replaces) ?? null;
    const [highest] = await tx
      .select({ position: max(deliveryVersions.position) })
      .from(deliveryVersions)
      .where(eq(deliveryVersions.deliveryId, subject.id));
    const versionId = newId("ver");
    await tx.insert(deliveryVersions).values({
      id: versionId,
      deliveryId: subject.id,
      position: replaced?.position ?? (highest?.position ?? -1) + 1,
      fileKey: input.key,
      fileName: input.name,
      sizeBytes: input.sizeBytes,
      versionRole:
        replaced?.versionRole ??
        guessRole(
          input.name,
          present.map((row) => row.versionRole),
        ),
      isrc: null,
      state: "arrived",
      stateWords: "Arrived; waiting to be measured.",
      arrivedAt: now,
    });
    if (replaced)
      await tx
        .update(deliveryVersions)
        .set({ replacedBy: versionId })
        .where(eq(deliveryVersions.id, replaced.id));
    await writeDeliveryEvent(tx, {
      deliveryId: subject.id,
      versionId,
      toState: "arrived",
      words: `${input.name} arrived.`,
      personId: input.personId,
      now,
    });
    await enqueue(tx, "delivery.measure", { versionId }, { key: versionId, priority: 10 });
    return { versionId };
  },
  audit: ({ subject, input, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { versionId: result.versionId, file: input.name },
  }),
});

export const setVersion = command({
  name: "deliveries.setVersion",
  who: DELIVERERS,
  input: z.object({
    deliveryId: z.string(),
    versionId: z.string(),
    versionRole: z.string().max(60),
    isrc: IsrcField.default(null),
  }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await lockOwnDelivery(tx, actor, input.deliveryId);
    requireDraft(actor, delivery);
    const [version] = await tx
      .select()
      .from(deliveryVersions)
      .where(and(eq(deliveryVersions.id, input.versionId), eq(deliveryVersions.deliveryId, delivery.id)));
    if (!version) throw new NotFound();
    return { delivery, version };
  },
  run: async ({ tx, input, subject }) => {
    if (!findVersionRole(input.versionRole))
      throw new Invalid("Choose one of the version roles; an open one needs a name.", {
        versionRole: "not a version role",
      });
    await tx
      .update(deliveryVersions)
      .set({ versionRole: input.versionRole, isrc: input.isrc })
      .where(eq(deliveryVersions.id, subject.version.id));
    // Only the checks that depend on the role run again; the file is measured already.
    if (subject.version.state === "measured" || subject.version.state === "returned")
      await enqueue(tx, "delivery.measure", { versionId: subject.version.id }, { priority: 10 });
    return null;
  },
  audit: ({ subject, input }) => ({
    subject: subject.delivery.id,
    libraryId: subject.delivery.libraryId,
    detail: { versionId: input.versionId, versionRole: input.versionRole },
  }),
});

export const removeVersion = command({
  name: "deliveries.removeVersion",
  who: DELIVERERS,
  input: z.object({ deliveryId: z.string(), versionId: z.string() }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await lockOwnDelivery(tx, actor, input.deliveryId);
    requireDraft(actor, delivery);
    const [version] = await tx
      .select({ id: deliveryVersions.id })
      .from(deliveryVersions)
      .where(and(eq(deliveryVersions.id, input.versionId), eq(deliveryVersions.deliveryId, delivery.id)));
    if (!version) throw new NotFound();
    return delivery;
  },
  run: async ({ tx, input, subject, actor, now }) => {
    await tx
      .update(deliveryVersions)
      .set({ replacedBy: "removed" })
      .where(eq(deliveryVersions.id, input.versionId));
    await writeDeliveryEvent(tx, {
      deliveryId: subject.id,
      versionId: input.versionId,
      words: "A file was taken out of the draft.",
      personId: actor.personId,
      now,
    });
    return null;
  },
  audit: ({ subject, input }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { removed: input.versionId },
  }),
});
