import { and, eq } from "drizzle-orm";
import { z } from "zod";
import { deliveries, deliveryWriters } from "@/db/schema/deliveries";
import { peopleByIds } from "@/lib/accounts";
import { acceptShare } from "@/lib/catalogue";
import { enqueue } from "@/lib/jobs";
import { SIGNED_IN } from "@/lib/kernel/actor";
import { env } from "@/lib/kernel/env";
import { NotFound, Precondition } from "@/lib/kernel/errors";
import { command } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { writeDeliveryEvent } from "./own-delivery";
import { tellDeliverer } from "./remind-writers";

/** A writer answers for their own share, from their own account, whatever role they are using. */
export const answerSplit = command({
  name: "deliveries.answerSplit",
  who: SIGNED_IN,
  input: z.object({ deliveryId: z.string(), accept: z.boolean() }),
  authorise: async ({ tx, actor, input }) => {
    const [delivery] = await tx
      .select()
      .from(deliveries)
      .where(eq(deliveries.id, input.deliveryId))
      .for("update");
    const rows = delivery
      ? await tx.select().from(deliveryWriters).where(eq(deliveryWriters.deliveryId, delivery.id))
      : [];
    const own = rows.find((row) => row.personId === actor.personId);
    if (!delivery || !own) throw new NotFound();
    await tx
      .update(deliveries)
      .set({ version: delivery.version + 1 })
      .where(eq(deliveries.id, delivery.id));
    return { delivery, own, rows };
  },
  run: async ({ tx, actor, input, subject: { delivery, own, rows }, now }) => {
    if (own.state !== "asked")
      throw new Precondition(
        own.state === "accepted"
          ? "You have accepted these shares already."
          : own.state === "declined"
            ? "You have declined these shares already."
            : "The time to answer is over; the deliverer may ask you again.",
      );
    await tx
      .update(deliveryWriters)
      .set({ state: input.accept ? "accepted" : "declined", answeredAt: now })
      .where(and(eq(deliveryWriters.id, own.id), eq(deliveryWriters.state, "asked")));
    if (input.accept && delivery.familyId)
      await acceptShare(tx, { familyId: delivery.familyId, personId: actor.personId, now });
    const others = rows.filter((row) => row.id !== own.id);
    const complete = input.accept && others.every((row) => row.state === "accepted");
    if (complete) {
      await tx.update(deliveries).set({ writersAcceptedAt: now }).where(eq(deliveries.id, delivery.id));
      await enqueue(tx, "delivery.tryListing", { deliveryId: delivery.id }, { priority: 30 });
    }
    await writeDeliveryEvent(tx, {
      deliveryId: delivery.id,
      words: `${own.name} ${input.accept ? "accepted" : "declined"} a share of ${(own.shareBps / 100).toFixed(2)}.`,
      personId: actor.personId,
      codes: input.accept ? [] : ["M01"],
      now,
    });
    const deliverer = (await peopleByIds(tx, [delivery.delivererId])).get(delivery.delivererId);
    if (deliverer && input.accept) {
      await enqueueMail(tx, {
        toAddress: deliverer.email,
        personId: deliverer.id,
        template: "co-writer-accepted",
        subjectId: delivery.id,
        props: {
          title: delivery.title,
          writerName: own.name,
          acceptedAt: now.toISOString(),
          waitingFor: others.filter((row) => row.state !== "accepted").map((row) => row.name),
          url: `${env.SITE_URL}/deliveries/${delivery.id}`,
          zone: deliverer.timeZone,
        },
      });
    }
    if (!input.accept) await tellDeliverer(tx, { delivery, writerName: own.name, answer: "declined" });
    return { complete };
  },
  audit: ({ subject, input }) => ({
    subject: subject.delivery.id,
    libraryId: subject.delivery.libraryId,
    detail: { accept: input.accept },
  }),
});
