import { and, eq, inArray, or } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { ledgerAccounts, ledgerTransfers } from "@/db/schema/ledger";
import { peopleByIds } from "@/lib/accounts";
import type { ActorOf } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import { query } from "@/lib/kernel/verb";
import { type AccountLine, accountLines, type Holder, holderBalances } from "./account-lines";
import { type AdvanceStanding, advanceStanding } from "./advances-standing";
import { type CapturedParts, capturedLines } from "./captured-lines";
import { boundsOf, type Month, monthOf, nextMonth } from "./months";
import { period } from "./schemas";
import { ENTRY_WORDS, type EntryCode } from "./states";

export type StatementActor = ActorOf<"composer" | "owner" | "accountant" | "auditor">;

/** A composer's own books with the library in use; the library's for its owner, accountant and auditor. */
export function statementHolder(actor: StatementActor): Holder {
  const { libraryId } = actor;
  if (libraryId === null) throw new NotFound();
  return actor.kind === "composer"
    ? { kind: "composer", holderId: actor.personId, libraryId }
    : { kind: "library", holderId: libraryId, libraryId };
}

export interface StatementLine {
  /** Of the entry and the order line: one line of a statement. */
  key: string;
  entryId: string;
  code: EntryCode;
  /** What kind of line, as it is called in front of people. */
  name: string;
  reason: string;
  eventAt: Date;
  postedAt: Date;
  amountMinor: bigint;
  balanceMinor: bigint;
  /** The sale it is about; null for a payout and the like. */
  sale: StatementSale | null;
  payoutId: string | null;
  /** Whose advances a repayment is about. */
  advancesOf: { name: string; amountMinor: bigint }[];
}

export interface StatementSale {
  orderNumber: string;
  licenceNumber: string | null;
  cueTitle: string;
  scopeWords: string;
  /** Who bought, and for what: for the library only. */
  buyer: string | null;
  productionTitle: string | null;
  netMinor: bigint;
  platformFeeMinor: bigint;
  processorFeeMinor: bigint;
  receiptsMinor: bigint;
  poolBps: number;
  /** The composer's own share of the pool. */
  shareBps: number | null;
}

export interface Statement {
  currency: string;
  openingMinor: bigint;
  lines: StatementLine[];
  closingMinor: bigint;
  /** Of the closing balance. */
  heldMinor: bigint;
  availableMinor: bigint;
  /** Where the composer has had an advance from this library. */
  advance: AdvanceStanding | null;
}

function saleOf(parts: CapturedParts | undefined, holder: Holder): StatementSale | null {
  if (!parts) return null;
  const isLibrary = holder.kind === "library";
  const { orderNumber, licenceNumber, cueTitle, scopeWords, netMinor, platformFeeMinor } = parts;
  return {
    orderNumber,
    licenceNumber,
    cueTitle,
    scopeWords,
    netMinor,
    platformFeeMinor,
    buyer: isLibrary ? parts.buyer : null,
    productionTitle: isLibrary ? parts.productionTitle : null,
    processorFeeMinor: parts.processorFeeMinor,
    receiptsMinor: parts.receiptsMinor,
    poolBps: parts.poolBps,
    shareBps: isLibrary
      ? null
      : (parts.writers.find((writer) => writer.personId === holder.holderId)?.shareBps ?? null),
  };
}

/** The composers whose advances were repaid or put back, by entry. */
async function advancesBehind(reader: Reader, moved: readonly AccountLine[]) {
  const behind = new Map<string, { name: string; amountMinor: bigint }[]>();
  const entryIds = moved.filter(({ code }) => code.startsWith("recoupment")).map(({ entryId }) => entryId);
  if (entryIds.length === 0) return behind;
  const rows = await reader
    .select({
      entryId: ledgerTransfers.entryId,
      personId: ledgerAccounts.holderId,
      amountMinor: ledgerTransfers.amountMinor,
    })
    .from(ledgerTransfers)
    .innerJoin(
      ledgerAccounts,
      or(
        eq(ledgerAccounts.id, ledgerTransfers.debitAccountId),
        eq(ledgerAccounts.id, ledgerTransfers.creditAccountId),
      ),
    )
    .where(and(inArray(ledgerTransfers.entryId, entryIds), eq(ledgerAccounts.kind, "composer available")));
  const people = await peopleByIds(
    reader,
    rows.map(({ personId }) => personId),
  );
  for (const { entryId, personId, amountMinor } of rows) {
    const name = people.get(personId)?.name ?? "a composer";
    behind.set(entryId, [...(behind.get(entryId) ?? []), { name, amountMinor }]);
  }
  return behind;
}

/** Lines as a statement prints them, with a running balance. What only passes from held to available is none of them. */
export async function statementLines(
  reader: Reader,
  holder: Holder,
  moved: readonly AccountLine[],
  openingMinor: bigint,
  until: Date,
): Promise<StatementLine[]> {
  const orderIds = [...new Set(moved.flatMap(({ orderId }) => orderId ?? []))];
  const parts = new Map(
    (await capturedLines(reader, { orderIds }, until)).map((line) => [line.orderLineId, line]),
  );
  const advancesOf = await advancesBehind(reader, moved);
  let balanceMinor = openingMinor;
  return moved.flatMap((line): StatementLine[] => {
    const amountMinor = line.heldMinor + line.availableMinor;
    if (amountMinor === 0n) return [];
    balanceMinor += amountMinor;
    const { payoutId } = line.facts;
    return [
      {
        key: `${line.entryId} ${line.orderLineId ?? "-"}`,
        entryId: line.entryId,
        code: line.code,
        name: ENTRY_WORDS[line.code],
        reason: line.words,
        eventAt: line.eventAt,
        postedAt: line.postedAt,
        amountMinor,
        balanceMinor,
        sale: saleOf(line.orderLineId ? parts.get(line.orderLineId) : undefined, holder),
        payoutId: typeof payoutId === "string" ? payoutId : null,
        advancesOf: advancesOf.get(line.entryId) ?? [],
      },
    ];
  });
}

/** Everything that moved a holder's balance in one month, one statement a currency. */
export const getStatement = query({
  name: "ledger.getStatement",
  who: ["composer", "owner", "accountant", "auditor"],
  input: z.object({ period }),
  authorise: async ({ actor }) => statementHolder(actor),
  run: async ({ reader, input, subject: holder, now }): Promise<Statement[]> => {
    const { from, before } = boundsOf(input.period);
    if (from > now) throw new NotFound();
    const opening = await holderBalances(reader, holder, { before: from });
    const closing = await holderBalances(reader, holder, { before });
    const moved = await accountLines(reader, holder, { from, before });
    const statements: Statement[] = [];
    for (const { currency, heldMinor, availableMinor } of closing) {
      const start = opening.find((one) => one.currency === currency);
      const openingMinor = (start?.heldMinor ?? 0n) + (start?.availableMinor ?? 0n);
      const own = moved.filter((line) => line.currency === currency);
      const { libraryId, holderId: personId } = holder;
      const lastInstant = new Date(before.getTime() - 1);
      const advance =
        holder.kind === "composer"
          ? await advanceStanding(reader, { libraryId, personId, currency }, lastInstant)
          : null;
      statements.push({
        currency,
        openingMinor,
        lines: await statementLines(reader, holder, own, openingMinor, before),
        closingMinor: heldMinor + availableMinor,
        heldMinor,
        availableMinor,
        advance: advance && advance.paidMinor > 0n ? advance : null,
      });
    }
    return statements;
  },
});

export interface StatementMonth {
  month: Month;
  /** Whether the month is still going on. */
  isOpen: boolean;
  sums: {
    currency: string;
    openingMinor: bigint;
    earnedMinor: bigint;
    paidMinor: bigint;
    closingMinor: bigint;
  }[];
}

function monthsFrom(first: Month, last: Month): Month[] {
  const months: Month[] = [];
  for (let month = first; month <= last; month = nextMonth(month)) months.push(month);
  return months;
}

/** The months since the first line, newest first, months in which nothing moved included. */
export const listStatements = query({
  name: "ledger.listStatements",
  who: ["composer", "owner", "accountant", "auditor"],
  input: z.object({}),
  authorise: async ({ actor }) => statementHolder(actor),
  run: async ({ reader, subject: holder, now }): Promise<StatementMonth[]> => {
    const lines = await accountLines(reader, holder, { until: now });
    const first = lines[0];
    if (!first) return [];
    const currencies = [...new Set(lines.map(({ currency }) => currency))].sort();
    const running = new Map(currencies.map((currency) => [currency, 0n]));
    const current = monthOf(now);
    return monthsFrom(monthOf(first.postedAt), current)
      .map((month): StatementMonth => {
        const own = lines.filter((line) => monthOf(line.postedAt) === month);
        const sums = currencies.map((currency) => {
          const openingMinor = running.get(currency) ?? 0n;
          let [earnedMinor, paidMinor] = [0n, 0n];
          for (const line of own.filter((one) => one.currency === currency)) {
            const amount = line.heldMinor + line.availableMinor;
            if (line.code === "payout") paidMinor -= amount;
            else earnedMinor += amount;
          }
          const closingMinor = openingMinor + earnedMinor - paidMinor;
          running.set(currency, closingMinor);
          return { currency, openingMinor, earnedMinor, paidMinor, closingMinor };
        });
        return { month, isOpen: month === current, sums };
      })
      .reverse();
  },
});
