import { aliasedTable, and, eq, gte, lt } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { ledgerAccounts, ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import { peopleByIds } from "@/lib/accounts";
import { query } from "@/lib/kernel/verb";
import { type Leg, netByAccount } from "./legs";
import { libraryNames } from "./library-names";
import { boundsOf } from "./months";
import { period } from "./schemas";
import { ENTRY_WORDS, type EntryCode } from "./states";

export interface JournalEntry {
  entryId: string;
  name: string;
  words: string;
  currency: string;
  eventAt: Date;
  postedAt: Date;
  /** One net debit or credit an account; the two sides are equal. */
  nets: { account: string; debitMinor: bigint }[];
}

const debitAccount = aliasedTable(ledgerAccounts, "debit_account");
const creditAccount = aliasedTable(ledgerAccounts, "credit_account");
type Account = Pick<typeof ledgerAccounts.$inferSelect, "kind" | "holderId">;

async function accountNames(reader: Reader, accounts: readonly Account[]) {
  const holders = (prefix: string) =>
    accounts.filter(({ kind }) => kind.startsWith(prefix)).map(({ holderId }) => holderId);
  const people = await peopleByIds(reader, holders("composer "));
  const libraries = await libraryNames(reader, holders("library "));
  return ({ kind, holderId }: Account): string => {
    if (holderId === "-") return kind;
    const holder = people.get(holderId)?.name ?? libraries.get(holderId) ?? holderId;
    return `${kind}, ${holder}`;
  };
}

/** The entries posted in one month, in their order: all of them, or those about one library's sales and payouts. */
export const getJournal = query({
  name: "ledger.getJournal",
  who: ["accountant", "auditor"],
  input: z.object({ period }),
  authorise: async ({ actor }) => ({ libraryId: actor.libraryId }),
  run: async ({ reader, input, subject: { libraryId } }): Promise<JournalEntry[]> => {
    const { from, before } = boundsOf(input.period);
    const rows = await reader
      .select({ entry: ledgerEntries, transfer: ledgerTransfers, debit: debitAccount, credit: creditAccount })
      .from(ledgerEntries)
      .innerJoin(ledgerTransfers, eq(ledgerTransfers.entryId, ledgerEntries.id))
      .innerJoin(debitAccount, eq(debitAccount.id, ledgerTransfers.debitAccountId))
      .innerJoin(creditAccount, eq(creditAccount.id, ledgerTransfers.creditAccountId))
      .where(
        and(
          gte(ledgerEntries.postedAt, from),
          lt(ledgerEntries.postedAt, before),
          libraryId === null ? undefined : eq(ledgerEntries.libraryId, libraryId),
        ),
      )
      .orderBy(ledgerEntries.postedAt, ledgerEntries.id, ledgerTransfers.number);
    const nameOf = await accountNames(
      reader,
      rows.flatMap(({ debit, credit }) => [debit, credit]),
    );
    const entries = new Map<string, { entry: typeof ledgerEntries.$inferSelect; legs: Leg[] }>();
    for (const { entry, transfer, debit, credit } of rows) {
      const found = entries.get(entry.id) ?? { entry, legs: [] };
      found.legs.push({
        debit: { kind: debit.kind as Leg["debit"]["kind"], holderId: debit.holderId },
        credit: { kind: credit.kind as Leg["credit"]["kind"], holderId: credit.holderId },
        amountMinor: transfer.amountMinor,
        orderLineId: transfer.orderLineId,
        shareBps: transfer.shareBps,
      });
      entries.set(entry.id, found);
    }
    return [...entries.values()].map(({ entry, legs }) => ({
      entryId: entry.id,
      name: ENTRY_WORDS[entry.code as EntryCode],
      words: entry.words,
      currency: entry.currency,
      eventAt: entry.eventAt,
      postedAt: entry.postedAt,
      nets: netByAccount(legs).map((net) => ({ account: nameOf(net), debitMinor: net.debitMinor })),
    }));
  },
});
