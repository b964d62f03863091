import { aliasedTable, and, asc, eq, inArray, isNotNull, sql } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { ledgerAccounts, ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import { assert, NotFound } from "@/lib/kernel/errors";
import { lockPayables } from "./accounts";
import { type AccountRef, composerAccount, libraryAccount, type Stage } from "./legs";
import type { LineRef } from "./post-entry";
import { type CaptureFacts, captureFacts } from "./sale-facts";
import type { LineSplit } from "./split";
import type { AccountKind } from "./states";

/** A sale as the journal holds it now: what of each line is left after refunds and disputes, and at which stage it stands. */
export interface StandingSale {
  captureId: string;
  orderId: string;
  libraryId: string;
  currency: string;
  taxCountry: string;
  capturedAt: Date;
  facts: CaptureFacts;
  lines: StandingLine[];
  refs: ReadonlyMap<string, LineRef>;
}

export interface StandingLine extends LineSplit {
  stage: Stage;
}

const debitAccount = aliasedTable(ledgerAccounts, "debit_account");
const creditAccount = aliasedTable(ledgerAccounts, "credit_account");

async function captureOf(reader: Reader, orderId: string) {
  const [entry] = await reader
    .select()
    .from(ledgerEntries)
    .where(eq(ledgerEntries.idempotencyKey, captureKey(orderId)));
  if (!entry?.libraryId) throw new NotFound("This order has no payment in the journal.");
  const transfers = await reader
    .select({
      orderLineId: ledgerTransfers.orderLineId,
      licenceNumber: ledgerTransfers.licenceNumber,
      familyId: ledgerTransfers.familyId,
      productionId: ledgerTransfers.productionId,
      shareBps: ledgerTransfers.shareBps,
      debitKind: debitAccount.kind,
      debitHolder: debitAccount.holderId,
      creditKind: creditAccount.kind,
      creditHolder: creditAccount.holderId,
    })
    .from(ledgerTransfers)
    .innerJoin(debitAccount, eq(debitAccount.id, ledgerTransfers.debitAccountId))
    .innerJoin(creditAccount, eq(creditAccount.id, ledgerTransfers.creditAccountId))
    .where(eq(ledgerTransfers.entryId, entry.id))
    .orderBy(asc(ledgerTransfers.number));
  return { entry, libraryId: entry.libraryId, transfers };
}

export const captureKey = (orderId: string): string => `capture:${orderId}`;

type Capture = Awaited<ReturnType<typeof captureOf>>;

function writersOf({ transfers }: Capture, orderLineId: string) {
  return transfers
    .filter((leg) => leg.orderLineId === orderLineId && leg.creditKind === "composer held")
    .map((leg) => ({ payeeId: leg.creditHolder, shareBps: leg.shareBps ?? 0 }));
}

function payablesOf({ libraryId, transfers }: Capture): AccountRef[] {
  const writers = transfers
    .filter((leg) => leg.creditKind === "composer held")
    .map((leg) => leg.creditHolder);
  return (["held", "available"] as const).flatMap((stage) => [
    libraryAccount(libraryId, stage),
    ...[...new Set(writers)].map((payeeId) => composerAccount(payeeId, stage)),
  ]);
}

/** Net credit of each account by line: key is line, kind, holder. */
async function netByLine(reader: Reader, orderLineIds: readonly string[]): Promise<Map<string, bigint>> {
  const nets = new Map<string, bigint>();
  if (orderLineIds.length === 0) return nets;
  for (const side of ["debit", "credit"] as const) {
    const column = side === "debit" ? ledgerTransfers.debitAccountId : ledgerTransfers.creditAccountId;
    const rows = await reader
      .select({
        orderLineId: ledgerTransfers.orderLineId,
        kind: ledgerAccounts.kind,
        holderId: ledgerAccounts.holderId,
        total: sql<string>`sum(${ledgerTransfers.amountMinor})`,
      })
      .from(ledgerTransfers)
      .innerJoin(ledgerAccounts, eq(ledgerAccounts.id, column))
      .where(
        and(isNotNull(ledgerTransfers.orderLineId), inArray(ledgerTransfers.orderLineId, [...orderLineIds])),
      )
      .groupBy(ledgerTransfers.orderLineId, ledgerAccounts.kind, ledgerAccounts.holderId);
    for (const row of rows) {
      const key = `${row.orderLineId}\n${row.kind}\n${row.holderId}`;
      nets.set(key, (nets.get(key) ?? 0n) + (side === "debit" ? -BigInt(row.total) : BigInt(row.total)));
    }
  }
  return nets;
}

async function wasReleased(reader: Reader, orderLineIds: readonly string[]): Promise<Set<string>> {
  const rows = await reader
    .selectDistinct({ orderLineId: ledgerTransfers.orderLineId })
    .from(ledgerTransfers)
    .innerJoin(ledgerEntries, eq(ledgerEntries.id, ledgerTransfers.entryId))
    .where(and(inArray(ledgerTransfers.orderLineId, [...orderLineIds]), eq(ledgerEntries.code, "hold ends")));
  return new Set(rows.flatMap((row) => row.orderLineId ?? []));
}

function standing(capture: Capture, nets: ReadonlyMap<string, bigint>, released: ReadonlySet<string>) {
  const taxCountry = capture.transfers.find((leg) => leg.creditKind === "vat payable")?.creditHolder ?? "-";
  const refs = new Map<string, LineRef>();
  for (const { orderLineId, licenceNumber, familyId, productionId } of capture.transfers)
    if (orderLineId) refs.set(orderLineId, { licenceNumber, familyId, productionId });
  const lines = [...refs.keys()].map((orderLineId): StandingLine => {
    const net = (kind: AccountKind, holderId: string) =>
      nets.get(`${orderLineId}\n${kind}\n${holderId}`) ?? 0n;
    const stage: Stage = released.has(orderLineId) ? "available" : "held";
    return {
      orderLineId,
      stage,
      taxMinor: net("vat payable", taxCountry),
      platformFeeMinor: net("platform fee income", "-"),
      processorFeeMinor: net("processor fee recharged", "-"),
      libraryMinor: net(`library ${stage}`, capture.libraryId),
      writers: writersOf(capture, orderLineId).map((writer) => ({
        ...writer,
        amountMinor: net(`composer ${stage}`, writer.payeeId),
      })),
    };
  });
  return { taxCountry, refs, lines };
}

function saleOf(capture: Capture, parts: ReturnType<typeof standing>): StandingSale {
  const { entry, libraryId } = capture;
  assert(entry.orderId, "a capture names its order");
  return {
    captureId: entry.id,
    orderId: entry.orderId,
    libraryId,
    currency: entry.currency,
    capturedAt: entry.eventAt,
    facts: captureFacts.parse(entry.facts),
    ...parts,
  };
}

const lineIdsOf = ({ transfers }: Capture) => [...new Set(transfers.flatMap((leg) => leg.orderLineId ?? []))];

/** The sale with every payable of it locked: what stands now stands until the commit. */
export async function lockSale(tx: Tx, orderId: string): Promise<StandingSale> {
  const capture = await captureOf(tx, orderId);
  await lockPayables(tx, payablesOf(capture), capture.entry.currency);
  return standingOf(tx, capture);
}

/** The sale as it stands, for reading. */
export async function readSale(reader: Reader, orderId: string): Promise<StandingSale> {
  return standingOf(reader, await captureOf(reader, orderId));
}

async function standingOf(reader: Reader, capture: Capture): Promise<StandingSale> {
  const ids = lineIdsOf(capture);
  const nets = await netByLine(reader, ids);
  const released = ids.length ? await wasReleased(reader, ids) : new Set<string>();
  return saleOf(capture, standing(capture, nets, released));
}
