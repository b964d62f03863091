import { aliasedTable, and, eq, inArray, or, sql } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import {
  ledgerAccounts,
  ledgerEntries,
  ledgerTransfers,
  payees,
  payoutRuns,
  payouts,
} from "@/db/schema/ledger";
import { requireRecentSecondFactor } from "@/lib/accounts";
import { enqueue } from "@/lib/jobs";
import type { ActorOf } from "@/lib/kernel/actor";
import { civilDateIn, formatCivilDate } from "@/lib/kernel/calendar";
import { Forbidden, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { formatMoney } from "@/lib/kernel/money";
import { command } from "@/lib/kernel/verb";
import { lockPayables } from "./accounts";
import { libraryAccount } from "./legs";
import { bankHeldUntil } from "./payees";
import { PreparePayoutRun, RunInput } from "./schemas";
import { ledgerSettings } from "./settings";
import { payoutOf } from "./split";
import { JOURNAL_ZONE, type PayoutState } from "./states";

export type RunRow = typeof payoutRuns.$inferSelect;

interface Due {
  kind: "library" | "person";
  holderId: string;
  balanceMinor: bigint;
}

/** What each payee of a library is owed as available, by this library's books alone, less what is on its way already. */
export async function availableBalances(reader: Reader, libraryId: string, currency: string): Promise<Due[]> {
  const sign = sql`case when ${ledgerTransfers.creditAccountId} = ${ledgerAccounts.id} then ${ledgerTransfers.amountMinor} else -${ledgerTransfers.amountMinor} end`;
  const rows = await reader
    .select({
      kind: ledgerAccounts.kind,
      holderId: ledgerAccounts.holderId,
      balance: sql<string>`sum(${sign})`,
    })
    .from(ledgerEntries)
    .innerJoin(ledgerTransfers, eq(ledgerTransfers.entryId, ledgerEntries.id))
    .innerJoin(
      ledgerAccounts,
      or(
        eq(ledgerAccounts.id, ledgerTransfers.debitAccountId),
        eq(ledgerAccounts.id, ledgerTransfers.creditAccountId),
      ),
    )
    .where(
      and(
        eq(ledgerEntries.libraryId, libraryId),
        eq(ledgerEntries.currency, currency),
        inArray(ledgerAccounts.kind, ["library available", "composer available"]),
      ),
    )
    .groupBy(ledgerAccounts.kind, ledgerAccounts.holderId);
  const onTheirWay = await pending(reader, libraryId, currency);
  return rows
    .map((row): Due => {
      const kind = row.kind === "library available" ? "library" : "person";
      const balanceMinor = BigInt(row.balance) - (onTheirWay.get(row.holderId) ?? 0n);
      return { kind, holderId: row.holderId, balanceMinor };
    })
    .sort((a, b) => a.kind.localeCompare(b.kind) || (a.balanceMinor > b.balanceMinor ? -1 : 1));
}

const confirmed = aliasedTable(payoutRuns, "confirmed");

async function pending(reader: Reader, libraryId: string, currency: string): Promise<Map<string, bigint>> {
  const rows = await reader
    .select({ holderId: payouts.holderId, total: sql<string>`sum(${payouts.amountMinor})` })
    .from(payouts)
    .innerJoin(confirmed, eq(confirmed.id, payouts.runId))
    .where(
      and(
        eq(payouts.libraryId, libraryId),
        eq(payouts.currency, currency),
        eq(confirmed.state, "confirmed"),
        inArray(payouts.state, ["prepared", "sending"]),
      ),
    )
    .groupBy(payouts.holderId);
  return new Map(rows.map((row) => [row.holderId, BigInt(row.total)]));
}

type PayeeRow = typeof payees.$inferSelect;

/** Why nothing can be sent to this payee now, or null. */
export function hindrance(payee: PayeeRow | undefined, now: Date): string | null {
  if (!payee?.processorAccount || payee.state !== "ready")
    return "Carried forward: bank and identity have not been given to the payment service yet.";
  const heldUntil = bankHeldUntil(payee);
  if (heldUntil && heldUntil > now)
    return `Carried forward: the bank account was changed, so payments wait until ${formatCivilDate(civilDateIn(heldUntil, JOURNAL_ZONE))}.`;
  return null;
}

function decide(
  due: Due,
  payee: PayeeRow | undefined,
  at: { currency: string; thresholdMinor: bigint; now: Date },
): { state: PayoutState; reason: string } {
  const words = (minor: bigint) => formatMoney({ minor, currency: at.currency });
  if (due.balanceMinor < 0n)
    return {
      state: "carried",
      reason: "Carried forward: it comes off coming sales, and is never taken from anybody's bank.",
    };
  if (payoutOf(due.balanceMinor, at.thresholdMinor) === 0n)
    return { state: "carried", reason: `Carried forward: less than ${words(at.thresholdMinor)}.` };
  const hindered = hindrance(payee, at.now);
  return hindered
    ? { state: "carried", reason: hindered }
    : { state: "prepared", reason: "The whole available balance." };
}

async function withdrawEarlier(tx: Tx, libraryId: string, currency: string): Promise<void> {
  const earlier = await tx
    .select({ id: payoutRuns.id })
    .from(payoutRuns)
    .where(
      and(
        eq(payoutRuns.libraryId, libraryId),
        eq(payoutRuns.currency, currency),
        inArray(payoutRuns.state, ["prepared", "released"]),
      ),
    )
    .for("update");
  for (const { id } of earlier) {
    await tx
      .update(payoutRuns)
      .set({ state: "withdrawn", version: sql`${payoutRuns.version} + 1` })
      .where(eq(payoutRuns.id, id));
    await tx
      .update(payouts)
      .set({ state: "withdrawn", reason: "A newer run took its place before this one was confirmed." })
      .where(and(eq(payouts.runId, id), eq(payouts.state, "prepared")));
  }
}

/** Works out who is paid what now. A run that was not confirmed gives way to the new one. */
export const preparePayoutRun = command({
  name: "ledger.preparePayoutRun",
  who: ["accountant"],
  input: PreparePayoutRun,
  guard: async ({ tx, input, actor }) => {
    if (actor.libraryId !== input.libraryId) throw new NotFound();
    await lockPayables(tx, [libraryAccount(input.libraryId, "available")], input.currency);
  },
  authorise: async ({ actor }) => actor,
  run: async ({ tx, input, actor, now }) => {
    const { libraryId, currency } = input;
    await withdrawEarlier(tx, libraryId, currency);
    const { thresholdMinor } = await ledgerSettings(tx);
    const due = (await availableBalances(tx, libraryId, currency)).filter((one) => one.balanceMinor !== 0n);
    if (due.length === 0)
      throw new Precondition(
        "Nobody has an available balance in this currency, so there is nothing to prepare.",
      );
    const holders = due.map(({ holderId }) => holderId);
    const known = await tx.select().from(payees).where(inArray(payees.holderId, holders));
    const runId = newId("run");
    const rows = due.map((one) => {
      const payee = known.find((row) => row.kind === one.kind && row.holderId === one.holderId);
      const { state, reason } = decide(one, payee, {
        currency,
        thresholdMinor: thresholdMinor(currency),
        now,
      });
      return {
        id: newId("po"),
        runId,
        libraryId,
        kind: one.kind,
        holderId: one.holderId,
        payeeId: payee?.id ?? null,
        amountMinor: one.balanceMinor,
        currency,
        state,
        reason,
      };
    });
    await tx.insert(payoutRuns).values({
      id: runId,
      libraryId,
      currency,
      state: "prepared",
      preparedBy: actor.personId,
      preparedAt: now,
    });
    await tx.insert(payouts).values(rows);
    return { runId, toPay: rows.filter((row) => row.state === "prepared").length };
  },
  audit: ({ input, result }) => ({
    subject: result.runId,
    libraryId: input.libraryId,
    detail: { currency: input.currency, toPay: result.toPay },
  }),
});

async function lockRun(tx: Tx, runId: string): Promise<RunRow> {
  const [run] = await tx.select().from(payoutRuns).where(eq(payoutRuns.id, runId)).for("update");
  if (!run) throw new NotFound();
  await tx
    .update(payoutRuns)
    .set({ version: sql`${payoutRuns.version} + 1` })
    .where(eq(payoutRuns.id, runId));
  return run;
}

const toPay = (reader: Reader, runId: string) =>
  reader
    .select({ id: payouts.id })
    .from(payouts)
    .where(and(eq(payouts.runId, runId), eq(payouts.state, "prepared")));

/** The first of the two persons: the library's accountant. */
export const releasePayoutRun = command({
  name: "ledger.releasePayoutRun",
  who: ["accountant"],
  input: RunInput,
  authorise: async ({ tx, actor, input }) => {
    const run = await lockRun(tx, input.runId);
    if (actor.libraryId === null)
      throw new Forbidden("The library's own accountant releases first; you confirm after that.");
    if (actor.libraryId !== run.libraryId) throw new NotFound();
    requireRecentSecondFactor(actor);
    return run;
  },
  run: async ({ tx, actor, subject, now }) => {
    if (subject.state !== "prepared")
      throw new Precondition(`This run is ${subject.state} already. Nothing was changed.`);
    if ((await toPay(tx, subject.id)).length === 0)
      throw new Precondition("Nobody in this run can be paid, so there is nothing to release.");
    await tx
      .update(payoutRuns)
      .set({ state: "released", releasedBy: actor.personId, releasedAt: now })
      .where(eq(payoutRuns.id, subject.id));
    return { runId: subject.id };
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.libraryId }),
});

function checkSecondPerson(actor: ActorOf<"accountant">, run: RunRow): void {
  if (run.releasedBy === actor.personId || run.preparedBy === actor.personId)
    throw new Forbidden("Two persons release a payout: you prepared or released this run yourself.");
}

/** The second person: the marketplace's accountant. From here each payout is sent by a job of its own. */
export const confirmPayoutRun = command({
  name: "ledger.confirmPayoutRun",
  who: ["accountant"],
  input: RunInput,
  authorise: async ({ tx, actor, input }) => {
    const run = await lockRun(tx, input.runId);
    if (actor.libraryId !== null && actor.libraryId !== run.libraryId) throw new NotFound();
    if (actor.libraryId !== null) throw new Forbidden("A marketplace accountant confirms what you released.");
    checkSecondPerson(actor, run);
    requireRecentSecondFactor(actor);
    return run;
  },
  run: async ({ tx, actor, subject, now }) => {
    if (subject.state !== "released")
      throw new Precondition(
        subject.state === "prepared"
          ? "The library's accountant has not released this run yet."
          : `This run is ${subject.state} already. Nothing was changed.`,
      );
    await tx
      .update(payoutRuns)
      .set({ state: "confirmed", confirmedBy: actor.personId, confirmedAt: now })
      .where(eq(payoutRuns.id, subject.id));
    for (const { id } of await toPay(tx, subject.id))
      await enqueue(tx, "ledger.sendPayout", { payoutId: id }, { key: id, priority: 30 });
    return { runId: subject.id };
  },
  audit: ({ subject }) => ({ subject: subject.id, libraryId: subject.libraryId }),
});
