import { and, eq, isNull } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { tickets } from "@/db/schema/infrastructure";
import { noticeEvents, notices } from "@/db/schema/reports";
import { EVERYONE } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { NotFound, Precondition } from "@/lib/kernel/errors";
import { blindHash } from "@/lib/kernel/field-crypto";
import { newId, newSecret } from "@/lib/kernel/ids";
import { command, open } from "@/lib/kernel/verb";
import { CONFIDENTIAL_LIMIT_BYTES, CONFIRM_HOURS } from "./states";

/** Takes a ticket: it works once, for its purpose, until it expires. */
async function useTicket(tx: Tx, secret: string, purpose: string): Promise<string> {
  const [ticket] = await tx
    .select()
    .from(tickets)
    .where(eq(tickets.tokenHash, blindHash(secret, "ticket")))
    .for("update");
  if (!ticket || ticket.purpose !== purpose || ticket.usedAt || ticket.expiresAt < systemNow())
    throw new NotFound("This link has been used or has expired. The report itself is kept and read.");
  await tx
    .update(tickets)
    .set({ usedAt: systemNow() })
    .where(and(eq(tickets.tokenHash, ticket.tokenHash), isNull(tickets.usedAt)));
  return ticket.subjectId;
}

/** The reporter's address is theirs; where they have a recording, they get a ticket to upload it once. */
export const confirmReporterAddress = command({
  name: "reports.confirmReporterAddress",
  who: EVERYONE,
  input: z.object({ secret: z.string().min(10).max(60) }),
  authorise: open("whoever has the link from the mail"),
  run: async ({ tx, input, now }) => {
    const noticeId = await useTicket(tx, input.secret, "confirm address");
    await tx.update(notices).set({ emailConfirmedAt: now }).where(eq(notices.id, noticeId));
    await tx.insert(noticeEvents).values({
      id: newId("eve"),
      noticeId,
      words: "The address is confirmed.",
      visibleToReporter: true,
      at: now,
    });
    const [notice] = await tx
      .select({ claim: notices.claim, receiptNumber: notices.receiptNumber })
      .from(notices)
      .where(eq(notices.id, noticeId));
    if (!notice?.claim.hasRecording)
      return { noticeId, receiptNumber: notice?.receiptNumber ?? "", uploadTicket: null };
    const uploadTicket = newSecret();
    await tx.insert(tickets).values({
      tokenHash: blindHash(uploadTicket, "ticket"),
      purpose: "confidential recording",
      subjectId: noticeId,
      expiresAt: new Date(systemNow().getTime() + CONFIRM_HOURS * 3_600_000),
    });
    return { noticeId, receiptNumber: notice.receiptNumber, uploadTicket };
  },
  audit: ({ result }) => ({ subject: result.noticeId }),
});

/** Asked before a confidential upload starts: the ticket is taken, and one file of bounded size is let in. */
export const admitConfidential = command({
  name: "reports.admitConfidential",
  who: EVERYONE,
  input: z.object({
    ticket: z.string().min(10).max(60),
    sizeBytes: z.int().min(1, "This file holds no bytes."),
    files: z.int().min(1).max(1, "One recording a report."),
  }),
  authorise: open("whoever has the one-use ticket"),
  run: async ({ tx, input }) => {
    if (input.sizeBytes > CONFIDENTIAL_LIMIT_BYTES)
      throw new Precondition(
        "A confidential recording may have up to 300 MB. An MP3 or FLAC of the passage is enough.",
      );
    return { noticeId: await useTicket(tx, input.ticket, "confidential recording") };
  },
  audit: ({ result }) => ({ subject: result.noticeId }),
});

export const confidentialArrived = command({
  name: "reports.confidentialArrived",
  who: ["system"],
  input: z.object({ noticeId: z.string(), fileKey: z.string().max(120) }),
  authorise: async ({ tx, input }) => {
    const [notice] = await tx.select().from(notices).where(eq(notices.id, input.noticeId)).for("update");
    if (!notice) throw new NotFound();
    return notice;
  },
  run: async ({ tx, input, subject, now }) => {
    if (subject.confidentialKey === input.fileKey) return null;
    await tx
      .update(notices)
      .set({ confidentialKey: input.fileKey, version: subject.version + 1 })
      .where(eq(notices.id, subject.id));
    await tx.insert(noticeEvents).values({
      id: newId("eve"),
      noticeId: subject.id,
      words: "A confidential recording arrived. Only the marketplace's moderators hear it.",
      visibleToReporter: true,
      at: now,
    });
    return null;
  },
  audit: ({ input }) => ({ subject: input.noticeId }),
});
