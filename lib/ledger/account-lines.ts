import { and, eq, gte, inArray, lt, lte, or, sql } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { ledgerAccounts, ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import type { EntryCode } from "./states";

/** Whose money: a library's or a composer's, in one library's books. */
export interface Holder {
  kind: "library" | "composer";
  holderId: string;
  libraryId: string;
}

/** What one entry moved for a holder: by order line where it is about one. Credits are above nothing. */
export interface AccountLine {
  entryId: string;
  code: EntryCode;
  words: string;
  eventAt: Date;
  postedAt: Date;
  currency: string;
  orderId: string | null;
  orderLineId: string | null;
  facts: Record<string, unknown>;
  heldMinor: bigint;
  availableMinor: bigint;
}

export interface Span {
  from?: Date;
  /** Not part of it. */
  before?: Date;
  /** Part of it. */
  until?: Date;
}

function within({ from, before, until }: Span) {
  return and(
    from ? gte(ledgerEntries.postedAt, from) : undefined,
    before ? lt(ledgerEntries.postedAt, before) : undefined,
    until ? lte(ledgerEntries.postedAt, until) : undefined,
  );
}

const signed = sql`case when ${ledgerTransfers.creditAccountId} = ${ledgerAccounts.id} then ${ledgerTransfers.amountMinor} else -${ledgerTransfers.amountMinor} end`;

const touches = or(
  eq(ledgerAccounts.id, ledgerTransfers.debitAccountId),
  eq(ledgerAccounts.id, ledgerTransfers.creditAccountId),
);

const isHolders = (holder: Holder) =>
  and(
    eq(ledgerEntries.libraryId, holder.libraryId),
    eq(ledgerAccounts.holderId, holder.holderId),
    inArray(ledgerAccounts.kind, [`${holder.kind} held`, `${holder.kind} available`]),
  );

/** In the order of posting. */
export async function accountLines(reader: Reader, holder: Holder, span: Span): Promise<AccountLine[]> {
  const rows = await reader
    .select({
      entryId: ledgerEntries.id,
      code: ledgerEntries.code,
      words: ledgerEntries.words,
      eventAt: ledgerEntries.eventAt,
      postedAt: ledgerEntries.postedAt,
      currency: ledgerEntries.currency,
      orderId: ledgerEntries.orderId,
      facts: ledgerEntries.facts,
      orderLineId: ledgerTransfers.orderLineId,
      kind: ledgerAccounts.kind,
      amount: sql<string>`${signed}`,
    })
    .from(ledgerEntries)
    .innerJoin(ledgerTransfers, eq(ledgerTransfers.entryId, ledgerEntries.id))
    .innerJoin(ledgerAccounts, touches)
    .where(and(isHolders(holder), within(span)))
    .orderBy(ledgerEntries.postedAt, ledgerEntries.id, ledgerTransfers.number);
  const lines = new Map<string, AccountLine>();
  for (const { kind, amount, code, ...row } of rows) {
    const key = `${row.entryId}\n${row.orderLineId}`;
    const line = lines.get(key) ?? { ...row, code: code as EntryCode, heldMinor: 0n, availableMinor: 0n };
    if (kind.endsWith(" held")) line.heldMinor += BigInt(amount);
    else line.availableMinor += BigInt(amount);
    lines.set(key, line);
  }
  return [...lines.values()];
}

export interface HolderBalance {
  currency: string;
  heldMinor: bigint;
  availableMinor: bigint;
}

/** What is owed to a holder at a moment, in each currency that ever moved. */
export async function holderBalances(reader: Reader, holder: Holder, span: Span): Promise<HolderBalance[]> {
  const rows = await reader
    .select({
      currency: ledgerEntries.currency,
      kind: ledgerAccounts.kind,
      total: sql<string>`sum(${signed})`,
    })
    .from(ledgerEntries)
    .innerJoin(ledgerTransfers, eq(ledgerTransfers.entryId, ledgerEntries.id))
    .innerJoin(ledgerAccounts, touches)
    .where(and(isHolders(holder), within(span)))
    .groupBy(ledgerEntries.currency, ledgerAccounts.kind);
  const balances = new Map<string, HolderBalance>();
  for (const { currency, kind, total } of rows) {
    const balance = balances.get(currency) ?? { currency, heldMinor: 0n, availableMinor: 0n };
    if (kind.endsWith(" held")) balance.heldMinor += BigInt(total);
    else balance.availableMinor += BigInt(total);
    balances.set(currency, balance);
  }
  return [...balances.values()].sort((a, b) => a.currency.localeCompare(b.currency));
}
