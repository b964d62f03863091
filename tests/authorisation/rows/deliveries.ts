import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { deliveries, deliveryVersions, deliveryWriters } from "@/db/schema/deliveries";
import { storedFiles } from "@/db/schema/infrastructure";
import type { Actor } from "@/lib/kernel/actor";
import { newId } from "@/lib/kernel/ids";
import { DECLARATION, freshTitle, WHOLE_DRAFT } from "@/tests/support/make-delivery";
import { COLUMNS, type Column, type Rows, type World } from "../columns";

const SYSTEM: readonly Column[] = ["system"];
/** Whoever delivers for a library, each in their own. */
const DELIVERERS: readonly Column[] = ["composer", "otherComposer", "owner", "otherOwner", "staff"];
const SIGNED_IN = COLUMNS.filter((column) => !["anonymous", "guest", "system"].includes(column));

const person = (actor: Actor): string => ("personId" in actor ? actor.personId : "per_nobody");

interface Made {
  deliveryId: string;
  versionId: string;
}

/** A delivery of the world's composer, or of the column's own person; its one file is measured. */
async function delivery(
  world: World,
  values: { state?: string; by?: Column; familyId?: string | null } = {},
): Promise<Made> {
  const deliverer = world.actors[values.by ?? "composer"];
  const deliveryId = newId("del");
  const versionId = newId("ver");
  const title = freshTitle();
  const now = new Date();
  await db()
    .insert(deliveries)
    .values({
      id: deliveryId,
      libraryId: world.libraryId,
      delivererId: person(deliverer),
      delivererKind: deliverer.kind,
      title,
      draft: {
        ...WHOLE_DRAFT,
        title,
        writers: [{ name: "A writer", email: "", ipi: "", role: "C", share: "100.00" }],
        publishers: [],
      },
      state: values.state ?? "draft",
      createdAt: now,
      updatedAt: now,
    });
  await db()
    .insert(deliveryVersions)
    .values({
      id: versionId,
      deliveryId,
      position: 0,
      fileKey: `key-${versionId}`,
      fileName: "Work.wav",
      sizeBytes: 1,
      sha256: versionId.slice(4).padEnd(64, "0"),
      versionRole: "full",
      state: "measured",
      stateWords: "Measured; it passes the checks.",
      facts: { sampleRateHz: 48_000, bitDepth: 24, channels: 2 },
      measures: { durationS: 60 },
      checks: [],
      arrivedAt: now,
    });
  return { deliveryId, versionId };
}

async function writerOf(deliveryId: string, personId: string, state = "asked"): Promise<string> {
  const id = newId("wri");
  await db()
    .insert(deliveryWriters)
    .values({
      id,
      deliveryId,
      position: 0,
      personId,
      name: "A writer",
      role: "C",
      shareBps: 10_000,
      state,
      askedAt: new Date(),
      answerUntil: new Date(Date.now() + 86_400_000),
    });
  return id;
}

async function paper(deliveryId: string): Promise<string> {
  const key = `paper-${deliveryId}`;
  await db().insert(storedFiles).values({
    key,
    slug: "paper",
    name: "receipt.pdf",
    mime: "application/pdf",
    sizeBytes: 1,
    uploaderId: null,
    ownerKind: "delivery",
    ownerId: deliveryId,
    createdAt: new Date(),
  });
  return key;
}

const CHECKS = { sha256: "c".repeat(64), checks: [] };

export const rows = {
  "deliveries.startDelivery": { input: async () => ({ title: freshTitle() }), may: DELIVERERS },
  "deliveries.listDeliveries": { input: async () => ({}), may: DELIVERERS },
  "deliveries.listSplitRequests": { input: async () => ({}), may: SIGNED_IN },
  "deliveries.getDelivery": {
    input: async (world) => ({ deliveryId: (await delivery(world)).deliveryId }),
    may: ["composer", "owner", "staff"],
  },
  "deliveries.saveDraft": {
    input: async (world) => ({ deliveryId: (await delivery(world)).deliveryId, draft: { bpm: 80 } }),
    may: ["composer"],
  },
  "deliveries.admitUpload": {
    input: async (world) => ({ deliveryId: (await delivery(world)).deliveryId, files: 1 }),
    may: ["composer"],
  },
  "deliveries.setVersion": {
    input: async (world) => ({ ...(await delivery(world)), versionRole: "bed", isrc: null }),
    may: ["composer"],
  },
  "deliveries.removeVersion": { input: (world) => delivery(world), may: ["composer"] },
  "deliveries.signDelivery": {
    input: async (world) => ({ deliveryId: (await delivery(world)).deliveryId, declaration: DECLARATION }),
    may: ["composer"],
  },
  "deliveries.askWriterAgain": {
    input: async (world) => {
      const { deliveryId } = await delivery(world, { state: "delivered" });
      return { deliveryId, writerId: await writerOf(deliveryId, "per_somebody", "declined") };
    },
    may: ["composer"],
  },
  "deliveries.handInAgain": {
    input: async (world) => ({
      deliveryId: (await delivery(world, { state: "returned" })).deliveryId,
      words: "It is mended now.",
    }),
    may: ["composer"],
  },
  "deliveries.answerSplit": {
    input: async (world) => {
      const { deliveryId } = await delivery(world, { state: "delivered" });
      await writerOf(deliveryId, person(world.actors.otherComposer));
      return { deliveryId, accept: true };
    },
    may: ["otherComposer"],
  },
  "deliveries.acceptEditorial": {
    input: async (world) => ({ deliveryId: (await delivery(world, { state: "delivered" })).deliveryId }),
    may: ["owner", "staff"],
  },
  "deliveries.returnEditorial": {
    input: async (world) => ({
      deliveryId: (await delivery(world, { state: "delivered" })).deliveryId,
      codes: ["Q02"],
      notes: ["Three cues of ours are like it already."],
    }),
    may: ["owner", "staff"],
  },
  "deliveries.readPaper": {
    input: async (world) => {
      const { deliveryId } = await delivery(world);
      return { deliveryId, key: await paper(deliveryId) };
    },
    may: ["composer", "owner", "staff"],
  },
  "deliveries.paperArrived": {
    input: async (world) => {
      const { deliveryId } = await delivery(world);
      return {
        deliveryId,
        personId: person(world.actors.composer),
        key: `new-${deliveryId}`,
        name: "receipt.pdf",
        mime: "application/pdf",
        sizeBytes: 1,
      };
    },
    may: SYSTEM,
  },
  "deliveries.fileArrived": {
    input: async (world) => {
      const { deliveryId } = await delivery(world);
      return {
        deliveryId,
        personId: person(world.actors.composer),
        key: `file-${deliveryId}`,
        name: "Work_bed.wav",
        sizeBytes: 1,
      };
    },
    may: SYSTEM,
  },
  "deliveries.readVersionToMeasure": {
    input: async (world) => ({ versionId: (await delivery(world)).versionId }),
    may: SYSTEM,
  },
  "deliveries.recordMeasurement": {
    input: async (world) => ({ versionId: (await delivery(world)).versionId, ...CHECKS }),
    may: SYSTEM,
  },
  "deliveries.recordUnreadable": {
    input: async (world) => ({ versionId: (await delivery(world)).versionId, words: "It ends early." }),
    may: SYSTEM,
  },
  "deliveries.findUnanswered": { input: async () => ({}), may: SYSTEM },
  "deliveries.remindWriters": {
    input: async (world) => {
      const { deliveryId } = await delivery(world, { state: "delivered" });
      await writerOf(deliveryId, person(world.actors.otherComposer));
      return { deliveryId };
    },
    may: SYSTEM,
  },
  "deliveries.tryListing": {
    input: async (world) => ({ deliveryId: (await delivery(world, { state: "delivered" })).deliveryId }),
    may: SYSTEM,
  },
  "deliveries.afterScreening": {
    input: async (world) => {
      const { versionId } = await delivery(world, { state: "delivered" });
      const recordingId = newId("rec");
      await db().update(deliveryVersions).set({ recordingId }).where(eq(deliveryVersions.id, versionId));
      return { recordingId };
    },
    may: SYSTEM,
  },
} satisfies Rows;
