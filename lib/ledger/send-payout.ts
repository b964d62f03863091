import { and, eq, ne, sql } from "drizzle-orm";
import { z } from "zod";
import type { Reader, Tx } from "@/db/client";
import { payees, payoutRuns, payouts } from "@/db/schema/ledger";
import { civilDateIn } from "@/lib/kernel/calendar";
import { env } from "@/lib/kernel/env";
import { assert, NotFound, Precondition } from "@/lib/kernel/errors";
import { formatMoney } from "@/lib/kernel/money";
import { command } from "@/lib/kernel/verb";
import { enqueueMail, mailAmount } from "@/lib/mail";
import { keyOf, lockPayables, owedOn } from "./accounts";
import { type AccountRef, composerAccount, libraryAccount, payoutLegs } from "./legs";
import { monthInWords } from "./months";
import { contactsOf } from "./payees";
import { hindrance } from "./payout-run";
import { postEntry } from "./post-entry";
import { JOURNAL_ZONE } from "./states";

type PayoutRow = typeof payouts.$inferSelect;

const PayoutInput = z.object({ payoutId: z.string().max(40) });

export const accountOf = (payout: Pick<PayoutRow, "kind" | "holderId">): AccountRef =>
  payout.kind === "library"
    ? libraryAccount(payout.holderId, "available")
    : composerAccount(payout.holderId, "available");

async function lockPayout(tx: Tx, payoutId: string): Promise<PayoutRow> {
  const [row] = await tx.select().from(payouts).where(eq(payouts.id, payoutId)).for("update");
  if (!row) throw new NotFound();
  const [run] = await tx
    .select({ state: payoutRuns.state })
    .from(payoutRuns)
    .where(eq(payoutRuns.id, row.runId));
  if (run?.state !== "confirmed") throw new Precondition("This payout has not been released by two persons.");
  return row;
}

/** What is reserved for other payouts of the same balance: the money may have left already. */
async function reserved(reader: Reader, payout: PayoutRow): Promise<bigint> {
  const [row] = await reader
    .select({ total: sql<string>`coalesce(sum(${payouts.amountMinor}), 0)` })
    .from(payouts)
    .where(
      and(
        eq(payouts.kind, payout.kind),
        eq(payouts.holderId, payout.holderId),
        eq(payouts.libraryId, payout.libraryId),
        eq(payouts.currency, payout.currency),
        eq(payouts.state, "sending"),
        ne(payouts.id, payout.id),
      ),
    );
  return BigInt(row?.total ?? 0);
}

export interface PayoutToSend {
  payoutId: string;
  accountId: string;
  amountMinor: bigint;
  currency: string;
}

async function fail(tx: Tx, payoutId: string, reason: string): Promise<null> {
  await tx.update(payouts).set({ state: "failed", reason }).where(eq(payouts.id, payoutId));
  return null;
}

/**
 * Reserves a payout's amount under the lock of its account, before any money leaves. Null where nothing is to be sent: it was
 * paid or has failed already, or the balance or the payee has changed since it was prepared.
 */
export const beginPayout = command({
  name: "ledger.beginPayout",
  who: ["system"],
  input: PayoutInput,
  authorise: async ({ tx, input }) => lockPayout(tx, input.payoutId),
  run: async ({ tx, subject: payout, now }): Promise<PayoutToSend | null> => {
    if (payout.state !== "prepared" && payout.state !== "sending") return null;
    const account = accountOf(payout);
    const ids = await lockPayables(tx, [account], payout.currency);
    const [payee] = payout.payeeId ? await tx.select().from(payees).where(eq(payees.id, payout.payeeId)) : [];
    if (payout.state === "prepared") {
      const hindered = hindrance(payee, now);
      if (hindered) return fail(tx, payout.id, hindered);
      const owed = await owedOn(tx, ids.get(keyOf(account)) ?? "", payout.libraryId);
      const there = owed - (await reserved(tx, payout));
      if (there < payout.amountMinor)
        return fail(
          tx,
          payout.id,
          `Carried forward: the balance fell to ${formatMoney({ minor: there, currency: payout.currency })} after the run was prepared.`,
        );
      await tx.update(payouts).set({ state: "sending" }).where(eq(payouts.id, payout.id));
    }
    assert(payee?.processorAccount, `payout ${payout.id} is being sent to nobody`);
    return {
      payoutId: payout.id,
      accountId: payee.processorAccount,
      amountMinor: payout.amountMinor,
      currency: payout.currency,
    };
  },
  audit: ({ subject, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { sending: result !== null },
  }),
});

async function tellPayee(tx: Tx, payout: PayoutRow, transferId: string, now: Date): Promise<void> {
  const [payee] = payout.payeeId ? await tx.select().from(payees).where(eq(payees.id, payout.payeeId)) : [];
  if (!payee) return;
  const month = civilDateIn(now, JOURNAL_ZONE).slice(0, 7);
  for (const person of await contactsOf(tx, payee))
    await enqueueMail(tx, {
      toAddress: person.email,
      personId: person.id,
      template: "payout-sent",
      props: {
        payeeName: payee.legalName,
        periodInWords: monthInWords(month),
        amount: mailAmount({ minor: payout.amountMinor, currency: payout.currency }),
        sentAt: now.toISOString(),
        reference: transferId,
        ...(payee.bankLast4?.length === 4 ? { bankLast4: payee.bankLast4 } : {}),
        statementUrl: `${env.SITE_URL}/statements/${month}`,
        zone: person.timeZone,
      },
      subjectId: payout.id,
    });
}

/** The processor has moved the money: the entry, the payout's state and the letters, once. */
export const recordPayoutSent = command({
  name: "ledger.recordPayoutSent",
  who: ["system"],
  input: PayoutInput.extend({ transferId: z.string().min(1).max(60) }),
  authorise: async ({ tx, input }) => lockPayout(tx, input.payoutId),
  run: async ({ tx, input, subject: payout, actor, now }) => {
    if (payout.state === "paid") return { entryId: payout.entryId };
    assert(payout.state === "sending", `payout ${payout.id} is ${payout.state}, but its money has left`);
    const { entryId } = await postEntry(tx, {
      idempotencyKey: `payout:${payout.id}`,
      code: "payout",
      words: "Paid out to the bank account given to the payment service.",
      currency: payout.currency,
      legs: payoutLegs(accountOf(payout), payout.amountMinor),
      libraryId: payout.libraryId,
      processorSource: input.transferId,
      facts: { payoutId: payout.id, runId: payout.runId, transferId: input.transferId },
      eventAt: now,
      now,
      actor,
    });
    await tx
      .update(payouts)
      .set({ state: "paid", entryId, processorTransfer: input.transferId, paidAt: now })
      .where(eq(payouts.id, payout.id));
    await tellPayee(tx, payout, input.transferId, now);
    return { entryId };
  },
  audit: ({ subject, input }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { transferId: input.transferId },
  }),
});

/** The processor refused, and nothing moved: the balance waits for the next run. */
export const recordPayoutFailed = command({
  name: "ledger.recordPayoutFailed",
  who: ["system"],
  input: PayoutInput.extend({ reason: z.string().min(1).max(300) }),
  authorise: async ({ tx, input }) => lockPayout(tx, input.payoutId),
  run: async ({ tx, input, subject }) => {
    if (subject.state === "sending") await fail(tx, subject.id, input.reason);
    return null;
  },
  audit: ({ subject, input }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { reason: input.reason },
  }),
});
