import { and, eq, inArray } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { deliveries, deliveryWriters } from "@/db/schema/deliveries";
import { peopleByIds } from "@/lib/accounts";
import { libraryById } from "@/lib/catalogue";
import { env } from "@/lib/kernel/env";
import { command, open, query } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { type DeliveryRow, lockOwnDelivery, writeDeliveryEvent } from "./own-delivery";

const DAY_MS = 86_400_000;
type WriterRow = typeof deliveryWriters.$inferSelect;

/** Deliveries with a writer who was asked at least a day ago and has not answered. */
export const findUnanswered = query({
  name: "deliveries.findUnanswered",
  who: ["system"],
  input: z.object({}),
  authorise: open("only the daily job asks"),
  run: async ({ reader, now }) => {
    const rows = await reader
      .selectDistinct({ deliveryId: deliveryWriters.deliveryId, askedAt: deliveryWriters.askedAt })
      .from(deliveryWriters)
      .innerJoin(deliveries, eq(deliveries.id, deliveryWriters.deliveryId))
      .where(
        and(
          eq(deliveryWriters.state, "asked"),
          inArray(deliveries.state, ["delivered", "listed", "returned"]),
        ),
      );
    const due = rows.filter((row) => row.askedAt && now.getTime() - row.askedAt.getTime() >= DAY_MS / 2);
    return [...new Set(due.map((row) => row.deliveryId))];
  },
});

/** Reminds each writer who has not answered; where the fourteen days are over, the delivery goes back to its deliverer. */
export const remindWriters = command({
  name: "deliveries.remindWriters",
  who: ["system"],
  input: z.object({ deliveryId: z.string() }),
  authorise: async ({ tx, actor, input }) => {
    const delivery = await lockOwnDelivery(tx, actor, input.deliveryId);
    const writers = await tx
      .select()
      .from(deliveryWriters)
      .where(eq(deliveryWriters.deliveryId, delivery.id));
    return { delivery, writers };
  },
  run: async ({ tx, subject: { delivery, writers }, now }) => {
    const asked = writers.filter((writer) => writer.state === "asked");
    const lapsed = asked.filter((writer) => writer.answerUntil && writer.answerUntil < now);
    for (const writer of lapsed) {
      await tx.update(deliveryWriters).set({ state: "lapsed" }).where(eq(deliveryWriters.id, writer.id));
      await writeDeliveryEvent(tx, {
        deliveryId: delivery.id,
        words: `${writer.name} did not answer in fourteen days. It waits for its deliverer, who may ask again.`,
        codes: ["M01"],
        now,
      });
      await tellDeliverer(tx, { delivery, writerName: writer.name, answer: "no answer" });
    }
    const waiting = asked.filter((writer) => !lapsed.includes(writer));
    for (const writer of waiting) await askByMail(tx, { delivery, writers, writer });
    return { reminded: waiting.length, lapsed: lapsed.length };
  },
  audit: ({ subject, result }) => ({
    subject: subject.delivery.id,
    libraryId: subject.delivery.libraryId,
    detail: { ...result },
  }),
});

/** Asks one writer for their answer; who has no account yet is asked by the library's invitation. */
export async function askByMail(
  tx: Tx,
  args: { delivery: DeliveryRow; writers: readonly WriterRow[]; writer: WriterRow },
): Promise<void> {
  const { delivery, writers, writer } = args;
  if (!writer.personId) return;
  const people = await peopleByIds(tx, [writer.personId, delivery.delivererId]);
  const person = people.get(writer.personId);
  const library = await libraryById(tx, delivery.libraryId);
  if (!person) return;
  const percent = (bps: number) => (bps / 100).toFixed(2);
  await enqueueMail(tx, {
    toAddress: person.email,
    personId: person.id,
    template: "split-acceptance-request",
    subjectId: delivery.id,
    props: {
      title: delivery.title,
      delivererName: people.get(delivery.delivererId)?.name ?? "The deliverer",
      libraryName: library?.name ?? "the library",
      sharePercent: percent(writer.shareBps),
      shares: writers.map((other) => ({ writerName: other.name, percent: percent(other.shareBps) })),
      url: `${env.SITE_URL}/deliveries/${delivery.id}`,
    },
  });
}

export async function tellDeliverer(
  tx: Tx,
  args: { delivery: DeliveryRow; writerName: string; answer: "declined" | "no answer" },
): Promise<void> {
  const deliverer = (await peopleByIds(tx, [args.delivery.delivererId])).get(args.delivery.delivererId);
  if (!deliverer) return;
  await enqueueMail(tx, {
    toAddress: deliverer.email,
    personId: deliverer.id,
    template: "co-writer-not-accepted",
    subjectId: args.delivery.id,
    props: {
      title: args.delivery.title,
      writerName: args.writerName,
      answer: args.answer,
      url: `${env.SITE_URL}/deliveries/${args.delivery.id}`,
    },
  });
}
