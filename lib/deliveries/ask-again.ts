import { and, eq } from "drizzle-orm";
import { z } from "zod";
import { deliveries, deliveryWriters } from "@/db/schema/deliveries";
import { NotFound, Precondition } from "@/lib/kernel/errors";
import { command } from "@/lib/kernel/verb";
import { DELIVERERS, lockOwnDelivery, writeDeliveryEvent } from "./own-delivery";
import { askByMail } from "./remind-writers";
import { ANSWER_DAYS } from "./states";

const DAY_MS = 86_400_000;

/** The deliverer asks a writer once more who declined or let the time pass. */
export const askWriterAgain = command({
  name: "deliveries.askWriterAgain",
  who: DELIVERERS,
  input: z.object({ deliveryId: z.string(), writerId: z.string() }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await lockOwnDelivery(tx, actor, input.deliveryId);
    if (delivery.delivererId !== actor.personId) throw new NotFound();
    const writers = await tx
      .select()
      .from(deliveryWriters)
      .where(eq(deliveryWriters.deliveryId, delivery.id));
    const writer = writers.find((row) => row.id === input.writerId);
    if (!writer) throw new NotFound();
    return { delivery, writers, writer };
  },
  run: async ({ tx, actor, subject: { delivery, writers, writer }, now }) => {
    if (writer.state !== "declined" && writer.state !== "lapsed")
      throw new Precondition(
        writer.state === "accepted"
          ? `${writer.name} has accepted already.`
          : `${writer.name} has been asked and may still answer.`,
      );
    await tx
      .update(deliveryWriters)
      .set({
        state: "asked",
        askedAt: now,
        answeredAt: null,
        answerUntil: new Date(now.getTime() + ANSWER_DAYS * DAY_MS),
      })
      .where(eq(deliveryWriters.id, writer.id));
    await askByMail(tx, { delivery, writers, writer });
    await writeDeliveryEvent(tx, {
      deliveryId: delivery.id,
      words: `${writer.name} was asked again to accept a share of ${(writer.shareBps / 100).toFixed(2)}.`,
      personId: actor.personId,
      now,
    });
    return null;
  },
  audit: ({ subject }) => ({
    subject: subject.delivery.id,
    libraryId: subject.delivery.libraryId,
    detail: { writerId: subject.writer.id },
  }),
});

/** Hands a delivery that the library sent back in again. Whatever was right before is kept as it is. */
export const handInAgain = command({
  name: "deliveries.handInAgain",
  who: DELIVERERS,
  input: z.object({
    deliveryId: z.string(),
    words: z.string().trim().min(5, "Say in a sentence what you changed.").max(2000),
  }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await lockOwnDelivery(tx, actor, input.deliveryId);
    if (delivery.delivererId !== actor.personId) throw new NotFound();
    return delivery;
  },
  run: async ({ tx, actor, input, subject, now }) => {
    if (subject.state !== "returned")
      throw new Precondition("Only a delivery that was sent back can be handed in again.");
    await tx
      .update(deliveries)
      .set({ state: "delivered", updatedAt: now })
      .where(and(eq(deliveries.id, subject.id), eq(deliveries.state, "returned")));
    await writeDeliveryEvent(tx, {
      deliveryId: subject.id,
      fromState: "returned",
      toState: "delivered",
      words: `Handed in again: ${input.words}`,
      personId: actor.personId,
      now,
    });
    return null;
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.libraryId }),
});
