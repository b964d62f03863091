import { aliasedTable, and, asc, eq, lte, notInArray, sql } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import type { Actor } from "@/lib/kernel/actor";
import { holdEndsAt } from "@/lib/kernel/deadlines";
import { command, open, query } from "@/lib/kernel/verb";
import { keyOf, lockPayables, owedOn } from "./accounts";
import { advanceStanding } from "./advances-standing";
import { composerAccount, type Leg, recoupmentLegs, releaseLegs } from "./legs";
import { lockSale, type StandingSale } from "./line-standing";
import { postEntry } from "./post-entry";
import { ledgerSettings } from "./settings";
import { recoupable } from "./split";
import { JOURNAL_ZONE } from "./states";

const release = aliasedTable(ledgerEntries, "release");
const MOST_AT_ONCE = 200;

/** Orders with a line whose hold has ended and that was not released. */
export const listDueHolds = query({
  name: "ledger.listDueHolds",
  who: ["system"],
  input: z.object({ except: z.array(z.string()).default([]) }),
  authorise: open("read by a job"),
  run: async ({ reader, input, now }): Promise<string[]> => {
    const { holdDays } = await ledgerSettings(reader);
    // A hold ends as its day begins, so a day more than it lasts is looked at and each order is judged by itself.
    const latest = new Date(now.getTime() - (holdDays - 1) * 86_400_000);
    const rows = await reader
      .selectDistinct({ orderId: ledgerEntries.orderId, eventAt: ledgerEntries.eventAt })
      .from(ledgerEntries)
      .innerJoin(ledgerTransfers, eq(ledgerTransfers.entryId, ledgerEntries.id))
      .where(
        and(
          eq(ledgerEntries.code, "capture"),
          lte(ledgerEntries.eventAt, latest),
          input.except.length ? notInArray(ledgerEntries.orderId, input.except) : undefined,
          sql`${ledgerTransfers.orderLineId} is not null`,
          sql`not exists (select 1 from ${ledgerTransfers} done join ${ledgerEntries} ${release} on ${release.id} = done.entry_id
            where done.order_line_id = ${ledgerTransfers.orderLineId} and ${release.code} = 'hold ends')`,
        ),
      )
      .orderBy(asc(ledgerEntries.eventAt))
      .limit(MOST_AT_ONCE);
    return rows
      .filter((row) => holdEndsAt(row.eventAt, holdDays, JOURNAL_ZONE) <= now)
      .flatMap((row) => row.orderId ?? []);
  },
});

const isAnythingHeld = (line: StandingSale["lines"][number]) =>
  line.libraryMinor !== 0n || line.writers.some(({ amountMinor }) => amountMinor !== 0n);

/** Of what a composer was released now, so much as an advance from this library still wants. No other library's earnings. */
async function recoupmentOf(
  tx: Tx,
  sale: StandingSale,
  released: ReadonlyMap<string, bigint>,
): Promise<Leg[]> {
  const { libraryId, currency } = sale;
  const legs: Leg[] = [];
  const accounts = [...released.keys()].map((personId) => composerAccount(personId, "available"));
  const ids = await lockPayables(tx, accounts, currency);
  for (const account of accounts) {
    const personId = account.holderId;
    const { outstandingMinor } = await advanceStanding(tx, { libraryId, personId, currency });
    if (outstandingMinor <= 0n) continue;
    const owed = await owedOn(tx, ids.get(keyOf(account)) ?? "", libraryId);
    const now = released.get(personId) ?? 0n;
    legs.push(...recoupmentLegs(libraryId, personId, recoupable(outstandingMinor, now < owed ? now : owed)));
  }
  return legs;
}

type Context = { tx: Tx; now: Date; actor: Actor };

async function postRecoupment({ tx, now, actor }: Context, sale: StandingSale, key: string, endedAt: Date) {
  const released = new Map<string, bigint>();
  for (const { writers } of sale.lines)
    for (const { payeeId, amountMinor } of writers)
      released.set(payeeId, (released.get(payeeId) ?? 0n) + amountMinor);
  const legs = await recoupmentOf(tx, sale, released);
  if (legs.length === 0) return null;
  const { entryId } = await postEntry(tx, {
    idempotencyKey: `recoupment:${key}`,
    code: "recoupment",
    words: `An advance is repaid from the composer's part of order ${sale.facts.orderNumber}.`,
    currency: sale.currency,
    legs,
    libraryId: sale.libraryId,
    orderId: sale.orderId,
    facts: {},
    eventAt: endedAt,
    now,
    actor,
  });
  return entryId;
}

/**
 * The refund window of an order has closed: what is left of its lines becomes available, and an advance is repaid from the
 * named composer's part in the same transaction. Lines that nothing is left of are not released.
 */
export const releaseHolds = command({
  name: "ledger.releaseHolds",
  who: ["system"],
  input: z.object({ orderId: z.string().max(40) }),
  authorise: async ({ tx, input }) => lockSale(tx, input.orderId),
  run: async ({ tx, subject: sale, now, actor }) => {
    const { holdDays } = await ledgerSettings(tx);
    const endedAt = holdEndsAt(sale.capturedAt, holdDays, JOURNAL_ZONE);
    const due = sale.lines.filter((line) => line.stage === "held" && isAnythingHeld(line));
    const first = due[0];
    if (endedAt > now || !first) return { entryId: null, recoupmentEntryId: null };
    // A line is released once, so the first of those released together names the release.
    const key = first.orderLineId;
    const { entryId } = await postEntry(tx, {
      idempotencyKey: `release:${key}`,
      code: "hold ends",
      words: `The refund window of order ${sale.facts.orderNumber} has closed: its earnings are available.`,
      currency: sale.currency,
      legs: due.flatMap((line) => releaseLegs(sale, line)),
      lines: sale.refs,
      libraryId: sale.libraryId,
      orderId: sale.orderId,
      facts: {},
      eventAt: endedAt,
      now,
      actor,
    });
    const recoupmentEntryId = await postRecoupment({ tx, now, actor }, { ...sale, lines: due }, key, endedAt);
    return { entryId, recoupmentEntryId };
  },
  audit: ({ input, subject, result }) => ({
    subject: input.orderId,
    libraryId: subject.libraryId,
    detail: { entryId: result.entryId, recoupmentEntryId: result.recoupmentEntryId },
  }),
});
