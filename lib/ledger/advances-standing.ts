import { and, eq, sql } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { advances, ledgerAccounts, ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";

export interface AdvanceStanding {
  paidMinor: bigint;
  recoupedMinor: bigint;
  outstandingMinor: bigint;
}

type Whose = { libraryId: string; personId: string; currency: string };

async function accountId(reader: Reader, kind: string, holderId: string, currency: string) {
  const [row] = await reader
    .select({ id: ledgerAccounts.id })
    .from(ledgerAccounts)
    .where(
      and(
        eq(ledgerAccounts.kind, kind),
        eq(ledgerAccounts.holderId, holderId),
        eq(ledgerAccounts.currency, currency),
      ),
    );
  return row?.id ?? null;
}

/** Only recoupments and what turns them round move between a composer's and a library's available accounts. */
async function moved(reader: Reader, from: string, to: string, until: Date | null): Promise<bigint> {
  const [row] = await reader
    .select({ total: sql<string>`coalesce(sum(${ledgerTransfers.amountMinor}), 0)` })
    .from(ledgerTransfers)
    .innerJoin(ledgerEntries, eq(ledgerEntries.id, ledgerTransfers.entryId))
    .where(
      and(
        eq(ledgerTransfers.debitAccountId, from),
        eq(ledgerTransfers.creditAccountId, to),
        until ? sql`${ledgerEntries.postedAt} <= ${until}` : undefined,
      ),
    );
  return BigInt(row?.total ?? 0);
}

/** A named composer's advance from one library: paid, come back, still to come back. */
export async function advanceStanding(
  reader: Reader,
  { libraryId, personId, currency }: Whose,
  until: Date | null = null,
): Promise<AdvanceStanding> {
  const [row] = await reader
    .select({ total: sql<string>`coalesce(sum(${advances.amountMinor}), 0)` })
    .from(advances)
    .where(
      and(
        eq(advances.libraryId, libraryId),
        eq(advances.personId, personId),
        eq(advances.currency, currency),
        until ? sql`${advances.paidAt} <= ${until}` : undefined,
      ),
    );
  const paidMinor = BigInt(row?.total ?? 0);
  const composer = await accountId(reader, "composer available", personId, currency);
  const library = await accountId(reader, "library available", libraryId, currency);
  const recoupedMinor =
    composer && library
      ? (await moved(reader, composer, library, until)) - (await moved(reader, library, composer, until))
      : 0n;
  return { paidMinor, recoupedMinor, outstandingMinor: paidMinor - recoupedMinor };
}
