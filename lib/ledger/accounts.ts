import { and, eq, inArray, or, sql } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { ledgerAccounts, ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import { assert } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import type { AccountRef } from "./legs";
import { type AccountKind, PAYABLE_KINDS } from "./states";

export const keyOf = ({ kind, holderId }: AccountRef): string => `${kind}\n${holderId}`;

export const isPayable = (kind: AccountKind): boolean =>
  (PAYABLE_KINDS as readonly AccountKind[]).includes(kind);

async function findAccounts(
  reader: Reader,
  refs: readonly AccountRef[],
  currency: string,
): Promise<Map<string, string>> {
  if (refs.length === 0) return new Map();
  const rows = await reader
    .select({ id: ledgerAccounts.id, kind: ledgerAccounts.kind, holderId: ledgerAccounts.holderId })
    .from(ledgerAccounts)
    .where(
      and(
        eq(ledgerAccounts.currency, currency),
        or(
          ...refs.map((ref) =>
            and(eq(ledgerAccounts.kind, ref.kind), eq(ledgerAccounts.holderId, ref.holderId)),
          ),
        ),
      ),
    );
  return new Map(rows.map((row) => [`${row.kind}\n${row.holderId}`, row.id]));
}

/** The accounts' ids by `keyOf`; those that are missing are made. */
export async function accountsFor(
  tx: Tx,
  refs: readonly AccountRef[],
  currency: string,
): Promise<Map<string, string>> {
  const wanted = [...new Map(refs.map((ref) => [keyOf(ref), ref])).values()];
  const found = await findAccounts(tx, wanted, currency);
  const missing = wanted.filter((ref) => !found.has(keyOf(ref)));
  if (missing.length === 0) return found;
  await tx
    .insert(ledgerAccounts)
    .ignore()
    .values(missing.map(({ kind, holderId }) => ({ id: newId("acc"), kind, holderId, currency })));
  const all = await findAccounts(tx, wanted, currency);
  assert(
    wanted.every((ref) => all.has(keyOf(ref))),
    "LEDGER-2: an account is missing after it was made",
  );
  return all;
}

/**
 * Locks the payables among the accounts in id order and raises their versions: from here to the commit nobody else posts to
 * them. Balances are read after this, never before.
 */
export async function lockPayables(
  tx: Tx,
  refs: readonly AccountRef[],
  currency: string,
): Promise<Map<string, string>> {
  const ids = await accountsFor(tx, refs, currency);
  const payable = refs.filter(({ kind }) => isPayable(kind)).map((ref) => ids.get(keyOf(ref)) ?? "");
  const ordered = [...new Set(payable)].sort();
  if (ordered.length === 0) return ids;
  await tx
    .select({ id: ledgerAccounts.id })
    .from(ledgerAccounts)
    .where(inArray(ledgerAccounts.id, ordered))
    .orderBy(ledgerAccounts.id)
    .for("update");
  await tx
    .update(ledgerAccounts)
    .set({ version: sql`${ledgerAccounts.version} + 1` })
    .where(inArray(ledgerAccounts.id, ordered));
  return ids;
}

/** What is owed on an account, or on the part of it that one library's entries made. */
export async function owedOn(reader: Reader, accountId: string, libraryId: string | null): Promise<bigint> {
  const sign = sql<string>`coalesce(sum(case when ${ledgerTransfers.creditAccountId} = ${accountId} then ${ledgerTransfers.amountMinor} else -${ledgerTransfers.amountMinor} end), 0)`;
  const [row] = await reader
    .select({ owed: sign })
    .from(ledgerTransfers)
    .innerJoin(ledgerEntries, eq(ledgerEntries.id, ledgerTransfers.entryId))
    .where(
      and(
        or(eq(ledgerTransfers.debitAccountId, accountId), eq(ledgerTransfers.creditAccountId, accountId)),
        libraryId === null ? undefined : eq(ledgerEntries.libraryId, libraryId),
      ),
    );
  return BigInt(row?.owed ?? 0);
}
