import { aliasedTable, and, asc, eq, inArray, lte } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { ledgerAccounts, ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import { captureFacts } from "./sale-facts";

/** One order line as it was sold, with every part of what the buyer paid. */
export interface CapturedParts {
  orderId: string;
  orderNumber: string;
  orderLineId: string;
  licenceNumber: string | null;
  familyId: string | null;
  productionId: string | null;
  cueTitle: string;
  scopeWords: string;
  buyer: string;
  productionTitle: string;
  libraryName: string;
  soldAt: Date;
  currency: string;
  grossMinor: bigint;
  taxMinor: bigint;
  taxCountry: string;
  netMinor: bigint;
  platformFeeMinor: bigint;
  platformFeeBps: number;
  processorFeeMinor: bigint;
  receiptsMinor: bigint;
  libraryMinor: bigint;
  poolBps: number;
  writers: { personId: string; shareBps: number; amountMinor: bigint }[];
}

const debitAccount = aliasedTable(ledgerAccounts, "debit_account");
const creditAccount = aliasedTable(ledgerAccounts, "credit_account");

async function captureLegs(
  reader: Reader,
  which: { libraryId?: string; orderIds?: readonly string[] },
  until: Date,
) {
  return reader
    .select({
      entry: ledgerEntries,
      transfer: ledgerTransfers,
      debitKind: debitAccount.kind,
      creditKind: creditAccount.kind,
      debitHolder: debitAccount.holderId,
      creditHolder: creditAccount.holderId,
    })
    .from(ledgerEntries)
    .innerJoin(ledgerTransfers, eq(ledgerTransfers.entryId, ledgerEntries.id))
    .innerJoin(debitAccount, eq(debitAccount.id, ledgerTransfers.debitAccountId))
    .innerJoin(creditAccount, eq(creditAccount.id, ledgerTransfers.creditAccountId))
    .where(
      and(
        eq(ledgerEntries.code, "capture"),
        lte(ledgerEntries.postedAt, until),
        which.libraryId ? eq(ledgerEntries.libraryId, which.libraryId) : undefined,
        which.orderIds ? inArray(ledgerEntries.orderId, [...which.orderIds]) : undefined,
      ),
    )
    .orderBy(asc(ledgerEntries.eventAt), asc(ledgerEntries.id), asc(ledgerTransfers.number));
}

type CaptureLeg = Awaited<ReturnType<typeof captureLegs>>[number];

function blank({ entry, transfer }: CaptureLeg): CapturedParts | null {
  const facts = captureFacts.parse(entry.facts);
  const line = facts.lines.find(({ orderLineId }) => orderLineId === transfer.orderLineId);
  if (!line) return null;
  const net = BigInt(line.netMinor);
  const tax = BigInt(line.taxMinor);
  return {
    orderId: entry.orderId ?? "",
    orderNumber: facts.orderNumber,
    orderLineId: line.orderLineId,
    licenceNumber: transfer.licenceNumber,
    familyId: transfer.familyId,
    productionId: transfer.productionId,
    cueTitle: line.cueTitle,
    scopeWords: line.scopeWords,
    buyer: facts.buyer,
    productionTitle: facts.productionTitle,
    libraryName: facts.libraryName,
    soldAt: entry.eventAt,
    currency: entry.currency,
    grossMinor: net + tax,
    taxMinor: tax,
    taxCountry: "-",
    netMinor: net,
    platformFeeMinor: 0n,
    platformFeeBps: facts.platformFeeBps,
    processorFeeMinor: 0n,
    receiptsMinor: 0n,
    libraryMinor: 0n,
    poolBps: facts.composerPoolBps,
    writers: [],
  };
}

function addLeg(line: CapturedParts, leg: CaptureLeg): void {
  const amount = leg.transfer.amountMinor;
  switch (leg.creditKind) {
    case "vat payable":
      line.taxCountry = leg.creditHolder;
      break;
    case "platform fee income":
      line.platformFeeMinor += amount;
      break;
    case "processor fee recharged":
      line.processorFeeMinor += amount;
      break;
    case "library held":
      line.libraryMinor += amount;
      break;
    case "composer held":
      line.writers.push({
        personId: leg.creditHolder,
        shareBps: leg.transfer.shareBps ?? 0,
        amountMinor: amount,
      });
      break;
  }
  // A price smaller than its fees leaves the library's part below nothing: the leg is turned round.
  if (leg.debitKind === "library held") line.libraryMinor -= amount;
}

/** Lines that were sold, oldest first: of one library, or of some orders. */
export async function capturedLines(
  reader: Reader,
  which: { libraryId?: string; orderIds?: readonly string[] },
  until: Date,
): Promise<CapturedParts[]> {
  if (which.orderIds?.length === 0) return [];
  const lines = new Map<string, CapturedParts>();
  for (const leg of await captureLegs(reader, which, until)) {
    const id = leg.transfer.orderLineId;
    if (!id) continue;
    const line = lines.get(id) ?? blank(leg);
    if (!line) continue;
    lines.set(id, line);
    addLeg(line, leg);
  }
  for (const line of lines.values())
    line.receiptsMinor = line.netMinor - line.platformFeeMinor - line.processorFeeMinor;
  return [...lines.values()];
}
