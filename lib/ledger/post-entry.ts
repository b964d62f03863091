import { createHash } from "node:crypto";
import { eq } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import { type Actor, describeActor } from "@/lib/kernel/actor";
import { encode } from "@/lib/kernel/codec";
import { minorUnits } from "@/lib/kernel/currencies";
import { assert, Conflict, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { formatMoney } from "@/lib/kernel/money";
import { accountsFor, isPayable, keyOf, lockPayables, owedOn } from "./accounts";
import type { AccountRef, Leg } from "./legs";
import type { EntryCode } from "./states";

/** What an order line is about; its legs carry it, so that a statement needs no other room. */
export interface LineRef {
  licenceNumber: string | null;
  familyId: string | null;
  productionId: string | null;
}

export interface EntryToPost {
  /** A function of the event: the same event is the same entry. */
  idempotencyKey: string;
  code: EntryCode;
  /** One sentence a stranger understands. */
  words: string;
  currency: string;
  legs: readonly Leg[];
  lines?: ReadonlyMap<string, LineRef>;
  libraryId?: string | null;
  orderId?: string | null;
  processorSource?: string | null;
  reverses?: string | null;
  facts: Record<string, unknown>;
  /** When it happened; `now` is when it is posted. */
  eventAt: Date;
  now: Date;
  actor: Actor;
}

export interface PostedEntry {
  entryId: string;
  isNew: boolean;
}

const WORDS_MAX = 300;
/**
 * Codes that spend what somebody is owed: never more than there is. A payout reserves its amount under the same lock before
 * the money leaves, and is posted as it happened.
 */
const COVERED: readonly EntryCode[] = ["recoupment"];

function contentOf(entry: EntryToPost): string {
  const { code, currency, libraryId = null, orderId = null, reverses = null } = entry;
  const legs = entry.legs.map(({ debit, credit, amountMinor, orderLineId, shareBps }) => [
    keyOf(debit),
    keyOf(credit),
    amountMinor,
    orderLineId,
    shareBps,
  ]);
  return createHash("sha256")
    .update(encode([code, currency, libraryId, orderId, reverses, legs]))
    .digest("hex");
}

export async function findEntry(reader: Reader, idempotencyKey: string) {
  const [row] = await reader
    .select({ id: ledgerEntries.id, contentSha256: ledgerEntries.contentSha256 })
    .from(ledgerEntries)
    .where(eq(ledgerEntries.idempotencyKey, idempotencyKey));
  return row ?? null;
}

function sameOrConflict(found: { id: string; contentSha256: string }, content: string, key: string) {
  if (found.contentSha256 !== content)
    throw new Conflict(`LEDGER-4: ${key} was posted before with other content. Nothing was posted.`);
  return { entryId: found.id, isNew: false };
}

async function checkCovered(tx: Tx, entry: EntryToPost, ids: ReadonlyMap<string, string>): Promise<void> {
  const spent = new Map<string, { account: AccountRef; minor: bigint }>();
  for (const { debit, amountMinor } of entry.legs) {
    if (!isPayable(debit.kind)) continue;
    const key = keyOf(debit);
    spent.set(key, { account: debit, minor: (spent.get(key)?.minor ?? 0n) + amountMinor });
  }
  for (const [key, { minor }] of spent) {
    const owed = await owedOn(tx, ids.get(key) ?? "", entry.libraryId ?? null);
    if (owed < minor) {
      const [wanted, there] = [minor, owed].map((value) =>
        formatMoney({ minor: value, currency: entry.currency }),
      );
      throw new Precondition(
        `LEDGER-5: ${wanted} cannot be taken from a balance of ${there}. Nothing was posted.`,
      );
    }
  }
}

/**
 * Posts one business event. Only from the `run` of a verb, whose transaction it joins. The same key with the same content is
 * the first entry; with other content it is a Conflict.
 */
export async function postEntry(tx: Tx, entry: EntryToPost): Promise<PostedEntry> {
  minorUnits(entry.currency);
  assert(entry.legs.length > 0, `LEDGER-1: ${entry.idempotencyKey} moves nothing`);
  assert(
    entry.legs.every(({ amountMinor }) => amountMinor > 0n),
    `LEDGER-1: ${entry.idempotencyKey} has an amount that is not above 0`,
  );
  assert(entry.words.length <= WORDS_MAX, `the words of ${entry.idempotencyKey} are too long`);
  const content = contentOf(entry);
  const found = await findEntry(tx, entry.idempotencyKey);
  if (found) return sameOrConflict(found, content, entry.idempotencyKey);

  const accounts = entry.legs.flatMap(({ debit, credit }) => [debit, credit]);
  const ids = await accountsFor(tx, accounts, entry.currency);
  await lockPayables(tx, accounts, entry.currency);
  if (COVERED.includes(entry.code)) await checkCovered(tx, entry, ids);

  const id = newId("ent");
  const who = describeActor(entry.actor);
  await tx
    .insert(ledgerEntries)
    .ignore()
    .values({
      id,
      idempotencyKey: entry.idempotencyKey,
      contentSha256: content,
      code: entry.code,
      words: entry.words,
      currency: entry.currency,
      reverses: entry.reverses ?? null,
      libraryId: entry.libraryId ?? null,
      orderId: entry.orderId ?? null,
      processorSource: entry.processorSource ?? null,
      facts: entry.facts,
      actorKind: who.kind,
      actorPersonId: who.personId,
      eventAt: entry.eventAt,
      postedAt: entry.now,
    });
  const written = await findEntry(tx, entry.idempotencyKey);
  assert(written, `LEDGER-4: ${entry.idempotencyKey} was not written`);
  if (written.id !== id) return sameOrConflict(written, content, entry.idempotencyKey);
  await tx.insert(ledgerTransfers).values(
    entry.legs.map((leg, index) => ({
      id: newId("tra"),
      entryId: id,
      number: index + 1,
      debitAccountId: ids.get(keyOf(leg.debit)) ?? "",
      creditAccountId: ids.get(keyOf(leg.credit)) ?? "",
      currency: entry.currency,
      amountMinor: leg.amountMinor,
      orderLineId: leg.orderLineId,
      shareBps: leg.shareBps,
      ...(leg.orderLineId ? entry.lines?.get(leg.orderLineId) : {}),
    })),
  );
  return { entryId: id, isNew: true };
}
