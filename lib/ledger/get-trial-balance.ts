import { and, eq, inArray, lte, or, sql } from "drizzle-orm";
import { z } from "zod";
import { ledgerAccounts, ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import { peopleByIds } from "@/lib/accounts";
import { query } from "@/lib/kernel/verb";
import { libraryNames } from "./library-names";
import { ACCOUNT_KINDS, type AccountKind, PAYABLE_KINDS } from "./states";

export interface TrialRow {
  kind: AccountKind;
  /** Whose account: a name, a country; null where there is one for all. */
  holder: string | null;
  debitMinor: bigint;
  creditMinor: bigint;
}

export interface TrialBalance {
  currency: string;
  rows: TrialRow[];
  debitMinor: bigint;
  creditMinor: bigint;
}

export interface TrialBalances {
  at: Date;
  /** The whole journal balances; one library's payables are a part of it and need not. */
  isWhole: boolean;
  balances: TrialBalance[];
}

const order = (kind: AccountKind) => ACCOUNT_KINDS.indexOf(kind);

/** Every account as it stood at an instant, the instant included: entries posted after it do not count. */
export const getTrialBalance = query({
  name: "ledger.getTrialBalance",
  who: ["accountant", "auditor"],
  input: z.object({ at: z.date().optional() }),
  authorise: async ({ actor }) => ({ libraryId: actor.libraryId }),
  run: async ({ reader, input, subject: { libraryId }, now }): Promise<TrialBalances> => {
    const at = input.at && input.at < now ? input.at : now;
    const sign = sql`case when ${ledgerTransfers.debitAccountId} = ${ledgerAccounts.id} then ${ledgerTransfers.amountMinor} else -${ledgerTransfers.amountMinor} end`;
    const sums = await reader
      .select({
        kind: ledgerAccounts.kind,
        holderId: ledgerAccounts.holderId,
        currency: ledgerAccounts.currency,
        total: sql<string>`sum(${sign})`,
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
          lte(ledgerEntries.postedAt, at),
          libraryId === null
            ? undefined
            : and(eq(ledgerEntries.libraryId, libraryId), inArray(ledgerAccounts.kind, [...PAYABLE_KINDS])),
        ),
      )
      .groupBy(ledgerAccounts.kind, ledgerAccounts.holderId, ledgerAccounts.currency);

    const holdersOf = (prefix: string) =>
      sums.filter(({ kind }) => kind.startsWith(prefix)).map(({ holderId }) => holderId);
    const people = await peopleByIds(reader, holdersOf("composer "));
    const libraries = await libraryNames(reader, holdersOf("library "));
    const nameOf = (kind: string, holderId: string): string | null => {
      if (holderId === "-") return null;
      if (kind.startsWith("composer ")) return people.get(holderId)?.name ?? holderId;
      return kind.startsWith("library ") ? (libraries.get(holderId) ?? holderId) : holderId;
    };
    const balances = [...new Set(sums.map(({ currency }) => currency))]
      .sort()
      .map((currency): TrialBalance => {
        const rows = sums
          .filter((row) => row.currency === currency && BigInt(row.total) !== 0n)
          .map((row): TrialRow => {
            const total = BigInt(row.total);
            return {
              kind: row.kind as AccountKind,
              holder: nameOf(row.kind, row.holderId),
              debitMinor: total > 0n ? total : 0n,
              creditMinor: total < 0n ? -total : 0n,
            };
          })
          .sort((a, b) => order(a.kind) - order(b.kind) || (a.holder ?? "").localeCompare(b.holder ?? ""));
        return {
          currency,
          rows,
          debitMinor: rows.reduce((sum, row) => sum + row.debitMinor, 0n),
          creditMinor: rows.reduce((sum, row) => sum + row.creditMinor, 0n),
        };
      });
    return { at, isWhole: libraryId === null, balances };
  },
});
