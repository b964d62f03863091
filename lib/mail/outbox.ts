import { eq } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { mailOutbox } from "@/db/schema/infrastructure";
import { enqueue } from "@/lib/jobs";
import { businessNow } from "@/lib/kernel/clock";
import { newId } from "@/lib/kernel/ids";

export interface OutgoingMail {
  toAddress: string;
  personId?: string | null;
  /** A name of emails/registry.ts; its props are parsed when the mail is rendered. */
  template: string;
  props: Record<string, unknown>;
  /** What the mail is about: a delivery, a case, an order. */
  subjectId: string;
}

/** Puts a mail into the outbox in the caller's transaction; the worker renders and sends it. */
export async function enqueueMail(tx: Tx, mail: OutgoingMail): Promise<string> {
  const id = newId("mai");
  await tx.insert(mailOutbox).values({
    id,
    toAddress: mail.toAddress,
    personId: mail.personId ?? null,
    template: mail.template,
    props: mail.props,
    subjectId: mail.subjectId,
    state: "waiting",
    createdAt: businessNow(),
  });
  await enqueue(tx, "mail.send", { mailId: id }, { key: id, priority: 30 });
  return id;
}

export async function mailById(tx: Tx, id: string) {
  const [row] = await tx.select().from(mailOutbox).where(eq(mailOutbox.id, id));
  return row ?? null;
}
