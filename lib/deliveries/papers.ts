import { and, asc, eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { storedFiles } from "@/db/schema/infrastructure";
import { NotFound } from "@/lib/kernel/errors";
import { command, query } from "@/lib/kernel/verb";
import { DELIVERERS, lockOwnDelivery, ownDelivery } from "./own-delivery";

const OWNER_KIND = "delivery";

/** A licence, receipt or session file has arrived. Announced twice, it is kept once. */
export const paperArrived = command({
  name: "deliveries.paperArrived",
  who: ["system"],
  input: z.object({
    deliveryId: z.string(),
    personId: z.string(),
    key: z.string().max(120),
    name: z.string().max(255),
    mime: z.string().max(120),
    sizeBytes: z.int().min(0),
  }),
  authorise: async ({ tx, actor, input }) => lockOwnDelivery(tx, actor, input.deliveryId),
  run: async ({ tx, input, subject, now }) => {
    const known = await paperOfDelivery(tx, subject.id, input.key);
    if (known) return null;
    await tx.insert(storedFiles).values({
      key: input.key,
      slug: "paper",
      name: input.name,
      mime: input.mime,
      sizeBytes: input.sizeBytes,
      uploaderId: input.personId,
      ownerKind: OWNER_KIND,
      ownerId: subject.id,
      createdAt: now,
    });
    return null;
  },
  audit: ({ subject, input }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { paper: input.name },
  }),
});

/** Where a paper's bytes are, for its deliverer and the library it was handed to. */
export const readPaper = query({
  name: "deliveries.readPaper",
  who: DELIVERERS,
  input: z.object({ deliveryId: z.string(), key: z.string().max(120) }),
  authorise: async ({ reader, actor, input }) => {
    const delivery = await ownDelivery(reader, actor, input.deliveryId);
    const paper = await paperOfDelivery(reader, delivery.id, input.key);
    if (!paper) throw new NotFound();
    return paper;
  },
  run: async ({ subject }) => subject,
});

/** For rooms above, after they have decided who may read it. */
export async function paperOfDelivery(reader: Reader, deliveryId: string, key: string) {
  const [row] = await reader
    .select({
      key: storedFiles.key,
      name: storedFiles.name,
      mime: storedFiles.mime,
      sizeBytes: storedFiles.sizeBytes,
    })
    .from(storedFiles)
    .where(
      and(
        eq(storedFiles.key, key),
        eq(storedFiles.ownerKind, OWNER_KIND),
        eq(storedFiles.ownerId, deliveryId),
      ),
    );
  return row ?? null;
}

export async function papersOfDelivery(reader: Reader, deliveryId: string) {
  return reader
    .select({ key: storedFiles.key, name: storedFiles.name, sizeBytes: storedFiles.sizeBytes })
    .from(storedFiles)
    .where(and(eq(storedFiles.ownerKind, OWNER_KIND), eq(storedFiles.ownerId, deliveryId)))
    .orderBy(asc(storedFiles.createdAt));
}
