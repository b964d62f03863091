import { aliasedTable, asc, eq } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { ledgerAccounts, ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import type { Actor } from "@/lib/kernel/actor";
import { assert, NotFound, Precondition } from "@/lib/kernel/errors";
import { allocate, formatMoney } from "@/lib/kernel/money";
import { keyOf, lockPayables, owedOn } from "./accounts";
import { advanceStanding } from "./advances-standing";
import {
  composerAccount,
  disputeChargeLegs,
  type Leg,
  recoupmentReversalLegs,
  reverseLegs,
  takeBackLegs,
} from "./legs";
import { lockSale, type StandingSale } from "./line-standing";
import { findEntry, type LineRef, type PostedEntry, postEntry } from "./post-entry";
import { grossOf, recoupmentToReverse, takeBack } from "./split";
import type { AccountKind } from "./states";

export interface DisputeOfPayment {
  orderId: string;
  disputeId: string;
  /** What the buyer's bank took back; left out: all that is left of the payment. */
  amountMinor?: bigint;
  /** What the processor charges for the dispute. */
  chargeMinor: bigint;
  words: string;
  eventAt: Date;
  now: Date;
  actor: Actor;
}

export interface PostedDispute extends PostedEntry {
  /** What was put back of recouped advances; null where nothing was. */
  recoupmentEntryId: string | null;
  chargeEntryId: string | null;
}

const keys = (disputeId: string) => ({
  taken: `dispute:${disputeId}`,
  recoupment: `dispute:${disputeId}:recoupment`,
  charge: `dispute:${disputeId}:charge`,
});

/** The amount over the lines, by what is left of each; then over each line's parts, by what is stored. */
function takenLegs(sale: StandingSale, amountMinor: bigint): Leg[] {
  const left = sale.lines.map((line) => grossOf(line));
  const parts = allocate(amountMinor, left);
  return sale.lines.flatMap((line, index) =>
    takeBackLegs(sale, takeBack(line, parts[index] ?? 0n).taken, line.stage),
  );
}

async function putBackLegs(tx: Tx, sale: StandingSale): Promise<Leg[]> {
  const writers = new Set(sale.lines.flatMap((line) => line.writers.map(({ payeeId }) => payeeId)));
  const accounts = [...writers].map((personId) => composerAccount(personId, "available"));
  const ids = await lockPayables(tx, accounts, sale.currency);
  const legs: Leg[] = [];
  for (const account of accounts) {
    const { libraryId, currency } = sale;
    const balance = await owedOn(tx, ids.get(keyOf(account)) ?? "", libraryId);
    const { recoupedMinor } = await advanceStanding(tx, { libraryId, personId: account.holderId, currency });
    const back = recoupmentToReverse(recoupedMinor, balance);
    legs.push(...recoupmentReversalLegs(libraryId, account.holderId, back));
  }
  return legs;
}

/**
 * A buyer's bank took a payment back. Three entries: the payment by its stored parts; of recouped advances what now leaves
 * their composers below nothing; the processor's charge, which the platform bears.
 */
export async function postDispute(tx: Tx, dispute: DisputeOfPayment): Promise<PostedDispute> {
  const key = keys(dispute.disputeId);
  const sale = await lockSale(tx, dispute.orderId);
  const found = await findEntry(tx, key.taken);
  if (found) {
    const ids = [await findEntry(tx, key.recoupment), await findEntry(tx, key.charge)];
    return {
      entryId: found.id,
      isNew: false,
      recoupmentEntryId: ids[0]?.id ?? null,
      chargeEntryId: ids[1]?.id ?? null,
    };
  }
  const left = sale.lines.reduce((sum, line) => sum + grossOf(line), 0n);
  const amountMinor = dispute.amountMinor ?? left;
  if (amountMinor <= 0n || amountMinor > left) {
    const [taken, there] = [amountMinor, left].map((minor) =>
      formatMoney({ minor, currency: sale.currency }),
    );
    throw new Precondition(`A dispute of ${taken} does not fit the ${there} left of this order's payment.`);
  }
  const { libraryId, orderId, currency } = sale;
  const about = { currency, libraryId, orderId, lines: sale.refs, eventAt: dispute.eventAt };
  const common = {
    ...about,
    now: dispute.now,
    actor: dispute.actor,
    facts: { disputeId: dispute.disputeId },
  };
  const taken = await postEntry(tx, {
    ...common,
    idempotencyKey: key.taken,
    code: "dispute",
    words: dispute.words,
    legs: takenLegs(sale, amountMinor),
    processorSource: dispute.disputeId,
  });
  const back = await putBackLegs(tx, sale);
  const recoupment = back.length
    ? await postEntry(tx, {
        ...common,
        idempotencyKey: key.recoupment,
        code: "recoupment reversed",
        words: `The repayment of an advance is put back: the earnings it came from are disputed.`,
        legs: back,
      })
    : null;
  const charge =
    dispute.chargeMinor > 0n
      ? await postEntry(tx, {
          ...common,
          idempotencyKey: key.charge,
          code: "dispute charge",
          words: "The processor's charge for the dispute, borne by the platform.",
          legs: disputeChargeLegs(dispute.chargeMinor),
        })
      : null;
  return {
    ...taken,
    recoupmentEntryId: recoupment?.entryId ?? null,
    chargeEntryId: charge?.entryId ?? null,
  };
}

const debitAccount = aliasedTable(ledgerAccounts, "debit_account");
const creditAccount = aliasedTable(ledgerAccounts, "credit_account");

async function postedLegs(
  reader: Reader,
  entryId: string,
): Promise<{ legs: Leg[]; refs: Map<string, LineRef> }> {
  const rows = await reader
    .select({ transfer: ledgerTransfers, debit: debitAccount, credit: creditAccount })
    .from(ledgerTransfers)
    .innerJoin(debitAccount, eq(debitAccount.id, ledgerTransfers.debitAccountId))
    .innerJoin(creditAccount, eq(creditAccount.id, ledgerTransfers.creditAccountId))
    .where(eq(ledgerTransfers.entryId, entryId))
    .orderBy(asc(ledgerTransfers.number));
  const refs = new Map<string, LineRef>();
  const legs = rows.map(({ transfer, debit, credit }): Leg => {
    const { licenceNumber, familyId, productionId } = transfer;
    if (transfer.orderLineId) refs.set(transfer.orderLineId, { licenceNumber, familyId, productionId });
    return {
      debit: { kind: debit.kind as AccountKind, holderId: debit.holderId },
      credit: { kind: credit.kind as AccountKind, holderId: credit.holderId },
      amountMinor: transfer.amountMinor,
      orderLineId: transfer.orderLineId,
      shareBps: transfer.shareBps,
    };
  });
  return { legs, refs };
}

export interface WonDispute {
  disputeId: string;
  words: string;
  /** Whether the processor gave its charge back as well. */
  chargeReturned?: boolean;
  eventAt: Date;
  now: Date;
  actor: Actor;
}

/** The dispute was decided for the seller: its entries are turned round, each by one of its own. */
export async function postDisputeWon(tx: Tx, won: WonDispute): Promise<{ entryIds: string[] }> {
  const key = keys(won.disputeId);
  const taken = await findEntry(tx, key.taken);
  if (!taken) throw new NotFound("This dispute is not in the journal.");
  const entryIds: string[] = [];
  for (const name of [key.taken, key.recoupment, ...(won.chargeReturned ? [key.charge] : [])]) {
    const entry = await findEntry(tx, name);
    if (!entry) continue;
    const [row] = await tx.select().from(ledgerEntries).where(eq(ledgerEntries.id, entry.id));
    assert(row, "an entry that was found is there");
    const { legs, refs } = await postedLegs(tx, entry.id);
    const posted = await postEntry(tx, {
      idempotencyKey: `${name}:won`,
      code: "reversal",
      words: won.words,
      currency: row.currency,
      legs: reverseLegs(legs),
      lines: refs,
      libraryId: row.libraryId,
      orderId: row.orderId,
      processorSource: name === key.taken ? won.disputeId : null,
      reverses: entry.id,
      facts: { disputeId: won.disputeId },
      eventAt: won.eventAt,
      now: won.now,
      actor: won.actor,
    });
    entryIds.push(posted.entryId);
  }
  return { entryIds };
}
