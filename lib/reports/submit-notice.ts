import { randomBytes } from "node:crypto";
import { and, eq, sql } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { tickets } from "@/db/schema/infrastructure";
import { noticeEvents, notices, reportLimits } from "@/db/schema/reports";
import { familyByCatalogueNumber } from "@/lib/catalogue";
import { EVERYONE } from "@/lib/kernel/actor";
import { addBusinessDays, civilDateIn, endOfDay } from "@/lib/kernel/calendar";
import { mod3736 } from "@/lib/kernel/check-characters";
import { systemNow } from "@/lib/kernel/clock";
import { env } from "@/lib/kernel/env";
import { Limit } from "@/lib/kernel/errors";
import { blindHash, sealField } from "@/lib/kernel/field-crypto";
import { UK_HOLIDAYS } from "@/lib/kernel/holidays";
import { newId, newSecret } from "@/lib/kernel/ids";
import { command, open } from "@/lib/kernel/verb";
import { enqueueMail } from "@/lib/mail";
import { SubmitNotice } from "./schemas";
import { CONFIRM_HOURS, NOTICES_PER_DAY, TRIAGE_WORKING_DAYS } from "./states";

const LETTERS = "ABCDEFGHJKMNPQRSTVWXYZ23456789";

/** "RN-2026-K7Q2XMWB-4": eight characters of chance and a check character, so that a number cannot be guessed. */
function receiptNumber(year: number): string {
  const chance = Array.from(randomBytes(8), (byte) => LETTERS[byte % LETTERS.length]).join("");
  return `RN-${year}-${chance}-${mod3736(`RN${year}${chance}`)}`;
}

/** Anybody may report a work: no account, no fee, a receipt at once. */
export const submitNotice = command({
  name: "reports.submitNotice",
  who: EVERYONE,
  input: SubmitNotice.and(z.object({ fromAddress: z.string().max(100).default("local") })),
  authorise: open("anybody may report a work"),
  run: async ({ tx, input, now }) => {
    const { fromAddress, ...claim } = input;
    const emailHash = blindHash(claim.email.toLowerCase(), "notice:email");
    await countToday(tx, emailHash, "this address");
    await countToday(tx, blindHash(fromAddress, "notice:from"), "this connection");
    const id = newId("not");
    const receipt = receiptNumber(now.getUTCFullYear());
    const target = /[A-Z]{2,4}\d{4}/.exec(claim.where.toUpperCase())?.[0];
    const family = target ? await familyByCatalogueNumber(tx, target) : null;
    const { name, capacity, email, countryCode, postal, signedName, ...publicPart } = claim;
    await tx.insert(notices).values({
      id,
      receiptNumber: receipt,
      accessHash: blindHash(receipt, "notice:receipt"),
      contact: Buffer.from(
        sealField(JSON.stringify({ name, capacity, email, countryCode, postal, signedName }), `notice:${id}`),
      ),
      emailHash,
      claim: publicPart,
      state: "received",
      targetFamilyId: family?.id ?? null,
      receivedAt: now,
    });
    await tx
      .insert(noticeEvents)
      .values({ id: newId("eve"), noticeId: id, words: "Received.", visibleToReporter: true, at: now });
    await sendReceipt(tx, { id, receipt, email, workTitle: claim.workTitle, now });
    return { noticeId: id, receiptNumber: receipt };
  },
  audit: ({ result }) => ({ subject: result.noticeId }),
});

/** The counter's row is changed in the transaction that uses it, so a limit holds under any number of requests at once. */
async function countToday(tx: Tx, subjectHash: string, what: string): Promise<void> {
  const day = systemNow().toISOString().slice(0, 10);
  await tx
    .insert(reportLimits)
    .values({ subjectHash, day, count: 1 })
    .onDuplicateKeyUpdate({ set: { count: sql`count + 1` } });
  const [row] = await tx
    .select({ count: reportLimits.count })
    .from(reportLimits)
    .where(and(eq(reportLimits.subjectHash, subjectHash), eq(reportLimits.day, day)));
  if ((row?.count ?? 0) > NOTICES_PER_DAY) {
    throw new Limit(
      `From ${what} ${NOTICES_PER_DAY} reports a day are taken. What you wrote is kept in this browser; please send it tomorrow, or write to the library.`,
    );
  }
}

async function sendReceipt(
  tx: Tx,
  args: { id: string; receipt: string; email: string; workTitle: string; now: Date },
): Promise<void> {
  const nextNewsBy = endOfDay(
    addBusinessDays(civilDateIn(args.now, "Europe/London"), TRIAGE_WORKING_DAYS, UK_HOLIDAYS),
    "Europe/London",
  );
  const url = `${env.SITE_URL}/report/${args.receipt}`;
  await enqueueMail(tx, {
    toAddress: args.email,
    template: "report-receipt",
    subjectId: args.id,
    props: {
      receiptNumber: args.receipt,
      workTitle: args.workTitle,
      receivedAt: args.now.toISOString(),
      missing: [],
      nextNewsBy: nextNewsBy.toISOString(),
      url,
      zone: "UTC",
    },
  });
  const secret = newSecret();
  const expiresAt = new Date(systemNow().getTime() + CONFIRM_HOURS * 3_600_000);
  await tx.insert(tickets).values({
    tokenHash: blindHash(secret, "ticket"),
    purpose: "confirm address",
    subjectId: args.id,
    expiresAt,
  });
  await enqueueMail(tx, {
    toAddress: args.email,
    template: "report-confirm-address",
    subjectId: args.id,
    props: {
      receiptNumber: args.receipt,
      url: `${url}?confirm=${secret}`,
      expiresAt: expiresAt.toISOString(),
      zone: "UTC",
    },
  });
}
