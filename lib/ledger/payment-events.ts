import { eq } from "drizzle-orm";
import { z } from "zod";
import { paymentEvents } from "@/db/schema/ledger";
import { enqueue } from "@/lib/jobs";
import { systemNow } from "@/lib/kernel/clock";
import { command, open, query } from "@/lib/kernel/verb";

const PaymentEventInput = z.object({
  eventId: z.string().min(1).max(80),
  type: z.string().min(1).max(60),
  /** What the event is about: ids only. */
  subject: z.record(z.string(), z.unknown()),
});

/** Keeps a processor's event whose signature was verified, and asks for it to be acted on. The same event twice is one. */
export const recordPaymentEvent = command({
  name: "ledger.recordPaymentEvent",
  who: ["system"],
  input: PaymentEventInput,
  authorise: open("the processor signs what it sends"),
  run: async ({ tx, input }) => {
    await tx
      .insert(paymentEvents)
      .ignore()
      .values({ id: input.eventId, type: input.type, payload: input.subject, receivedAt: systemNow() });
    await enqueue(
      tx,
      "licensing.paymentEvent",
      { eventId: input.eventId },
      { key: input.eventId, priority: 20 },
    );
    return { eventId: input.eventId };
  },
  audit: ({ input }) => ({ subject: input.eventId, detail: { type: input.type } }),
});

export interface StoredPaymentEvent {
  eventId: string;
  type: string;
  subject: Record<string, unknown>;
}

/** For the job that acts on it; null where no such event was kept. */
export const readPaymentEvent = query({
  name: "ledger.readPaymentEvent",
  who: ["system"],
  input: z.object({ eventId: z.string().max(80) }),
  authorise: open("read by a job"),
  run: async ({ reader, input }): Promise<StoredPaymentEvent | null> => {
    const [row] = await reader.select().from(paymentEvents).where(eq(paymentEvents.id, input.eventId));
    return row ? { eventId: row.id, type: row.type, subject: row.payload } : null;
  },
});
