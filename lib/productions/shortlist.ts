import { and, eq, max } from "drizzle-orm";
import { z } from "zod";
import type { Reader, Tx } from "@/db/client";
import { shortlistItems } from "@/db/schema/productions";
import { familyById, openHolds, recordingById } from "@/lib/catalogue";
import { Invalid, Limit, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { lockOwnItem, lockOwnProduction } from "./own-production";
import { AddToShortlist, SetShortlistItem } from "./schemas";

const ITEMS_MAX = 200;

async function recordingOnSale(reader: Reader, recordingId: string) {
  const recording = await recordingById(reader, recordingId);
  if (recording?.state !== "listed") throw new NotFound();
  const family = await familyById(reader, recording.familyId);
  if (family?.state !== "listed") throw new NotFound();
  if ((await openHolds(reader, family.id)).length > 0)
    throw new Precondition("This cue is held and cannot be shortlisted at present.");
  return recording;
}

/** PRODUCTIONS-2: a cue stands on a shortlist once; adding it again only chooses the version. */
export const addToShortlist = command({
  name: "productions.addToShortlist",
  who: ["buyer"],
  input: AddToShortlist,
  authorise: async ({ tx, actor, input }) => ({
    production: await lockOwnProduction(tx, actor, input.productionId),
    recording: await recordingOnSale(tx, input.recordingId),
  }),
  run: async ({ tx, input, actor, subject: { production, recording }, now }) => {
    const [there] = await tx
      .select({ id: shortlistItems.id })
      .from(shortlistItems)
      .where(
        and(eq(shortlistItems.productionId, production.id), eq(shortlistItems.familyId, recording.familyId)),
      );
    if (there) {
      await tx
        .update(shortlistItems)
        .set({ recordingId: recording.id, ...(input.note ? { note: input.note } : {}) })
        .where(eq(shortlistItems.id, there.id));
      return { itemId: there.id, added: false };
    }
    const itemId = newId("sho");
    await tx.insert(shortlistItems).values({
      id: itemId,
      productionId: production.id,
      familyId: recording.familyId,
      recordingId: recording.id,
      position: await nextPosition(tx, production.id),
      state: "considering",
      note: input.note,
      priceSnapshot: null,
      addedBy: actor.personId,
      addedAt: now,
    });
    return { itemId, added: true };
  },
  audit: ({ input, subject, result }) => ({
    subject: input.productionId,
    detail: { itemId: result.itemId, familyId: subject.recording.familyId, added: result.added },
  }),
});

async function nextPosition(tx: Tx, productionId: string): Promise<number> {
  const [last] = await tx
    .select({ position: max(shortlistItems.position) })
    .from(shortlistItems)
    .where(eq(shortlistItems.productionId, productionId));
  const position = (last?.position ?? -1) + 1;
  if (position >= ITEMS_MAX)
    throw new Limit(`A shortlist holds ${ITEMS_MAX} cues. Take some off, or begin another production.`);
  return position;
}

/** In, out or still considered; a note; another version of the same cue. A version that is off sale cannot be chosen. */
export const setShortlistItem = command({
  name: "productions.setShortlistItem",
  who: ["buyer"],
  input: SetShortlistItem,
  authorise: async ({ tx, actor, input }) => lockOwnItem(tx, actor, input.itemId),
  run: async ({ tx, input, subject: { item } }) => {
    const changesVersion = input.recordingId !== undefined && input.recordingId !== item.recordingId;
    if (changesVersion && input.recordingId !== undefined) {
      const recording = await recordingOnSale(tx, input.recordingId);
      if (recording.familyId !== item.familyId)
        throw new Invalid("That version belongs to another cue.", { recordingId: "of another cue" });
    }
    const changes = {
      ...(input.state === undefined ? {} : { state: input.state }),
      ...(input.note === undefined ? {} : { note: input.note }),
      ...(changesVersion ? { recordingId: input.recordingId, priceSnapshot: null } : {}),
    };
    if (Object.keys(changes).length > 0)
      await tx.update(shortlistItems).set(changes).where(eq(shortlistItems.id, item.id));
    return { itemId: item.id };
  },
  audit: ({ input, subject }) => ({
    subject: subject.production.id,
    detail: { itemId: input.itemId, ...(input.state ? { state: input.state } : {}) },
  }),
});

export const removeFromShortlist = command({
  name: "productions.removeFromShortlist",
  who: ["buyer"],
  input: z.object({ itemId: z.string() }),
  authorise: async ({ tx, actor, input }) => lockOwnItem(tx, actor, input.itemId),
  run: async ({ tx, input }) => {
    await tx.delete(shortlistItems).where(eq(shortlistItems.id, input.itemId));
    return { itemId: input.itemId };
  },
  audit: ({ input, subject }) => ({ subject: subject.production.id, detail: { itemId: input.itemId } }),
});
