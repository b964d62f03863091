import { sql } from "drizzle-orm";
import { check, foreignKey, index, int, mysqlTable, uniqueIndex, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, id, jsonOf, minor, sha256 } from "@/db/columns";

export const ledgerAccounts = mysqlTable(
  "ledger_accounts",
  {
    id: id("id").primaryKey(),
    /** bank, processor clearing, vat payable, platform fee income, ... see lib/ledger/states */
    kind: ascii(40)("kind").notNull(),
    /** A library, a person, a country, or '-' where there is one for all. */
    holderId: id("holder_id").notNull(),
    currency: ascii(3)("currency").notNull(),
    /** Raised with every posting that touches an account which may not go negative. */
    version: int("version").notNull().default(1),
  },
  (table) => [
    uniqueIndex("ledger_accounts_once").on(table.kind, table.holderId, table.currency),
    uniqueIndex("ledger_accounts_currency").on(table.id, table.currency),
  ],
);

export const ledgerEntries = mysqlTable(
  "ledger_entries",
  {
    id: id("id").primaryKey(),
    idempotencyKey: ascii(160)("idempotency_key").notNull().unique("ledger_entries_key"),
    contentSha256: sha256("content_sha256").notNull(),
    /** capture, settlement, hold ends, recoupment, payout, refund, dispute, recoupment reversed, dispute charge, reversal */
    code: ascii(30)("code").notNull(),
    words: varchar("words", { length: 300 }).notNull(),
    currency: ascii(3)("currency").notNull(),
    reverses: id("reverses"),
    /** What it is about, so that statements need no upward read. */
    libraryId: id("library_id"),
    orderId: id("order_id"),
    /** The processor's charge, refund or dispute behind it: what its own book is matched by. */
    processorSource: ascii(80)("processor_source"),
    facts: jsonOf<Record<string, unknown>>("facts").notNull(),
    actorKind: ascii(20)("actor_kind").notNull(),
    actorPersonId: id("actor_person_id"),
    eventAt: at("event_at").notNull(),
    postedAt: at("posted_at").notNull(),
  },
  (table) => [
    uniqueIndex("ledger_entries_currency").on(table.id, table.currency),
    index("ledger_entries_posted").on(table.postedAt),
    index("ledger_entries_library").on(table.libraryId, table.postedAt),
    index("ledger_entries_order").on(table.orderId),
    index("ledger_entries_code").on(table.code, table.eventAt),
    index("ledger_entries_source").on(table.processorSource),
  ],
);

/** Each row moves money from one account to another: imbalance cannot be written. */
export const ledgerTransfers = mysqlTable(
  "ledger_transfers",
  {
    id: id("id").primaryKey(),
    entryId: id("entry_id").notNull(),
    number: int("number").notNull(),
    debitAccountId: id("debit_account_id").notNull(),
    creditAccountId: id("credit_account_id").notNull(),
    currency: ascii(3)("currency").notNull(),
    amountMinor: minor("amount_minor").notNull(),
    orderLineId: id("order_line_id"),
    licenceNumber: ascii(24)("licence_number"),
    familyId: id("family_id"),
    productionId: id("production_id"),
    /** Basis points of the writer's share behind this leg, where it is one. */
    shareBps: int("share_bps"),
  },
  (table) => [
    index("ledger_transfers_entry").on(table.entryId, table.number),
    index("ledger_transfers_debit").on(table.debitAccountId),
    index("ledger_transfers_credit").on(table.creditAccountId),
    index("ledger_transfers_line").on(table.orderLineId),
    // A transfer, its entry and both its accounts have one currency, and the database says so.
    foreignKey({
      name: "ledger_transfers_entry_currency",
      columns: [table.entryId, table.currency],
      foreignColumns: [ledgerEntries.id, ledgerEntries.currency],
    }),
    foreignKey({
      name: "ledger_transfers_debit_currency",
      columns: [table.debitAccountId, table.currency],
      foreignColumns: [ledgerAccounts.id, ledgerAccounts.currency],
    }),
    foreignKey({
      name: "ledger_transfers_credit_currency",
      columns: [table.creditAccountId, table.currency],
      foreignColumns: [ledgerAccounts.id, ledgerAccounts.currency],
    }),
    check("ledger_transfers_positive", sql`${table.amountMinor} > 0`),
    check("ledger_transfers_two", sql`${table.debitAccountId} <> ${table.creditAccountId}`),
  ],
);

/** Somebody who can be paid: one connected account at the processor each. */
export const payees = mysqlTable(
  "payees",
  {
    id: id("id").primaryKey(),
    /** library or person */
    kind: ascii(8)("kind").notNull(),
    holderId: id("holder_id").notNull(),
    processorAccount: ascii(60)("processor_account"),
    legalName: varchar("legal_name", { length: 200 }).notNull(),
    countryCode: ascii(2)("country_code").notNull(),
    /** not started, under way, ready */
    state: ascii(12)("state").notNull(),
    /** The processor's name of the bank account, and its last four digits: all that is known of it here. */
    bankRef: ascii(60)("bank_ref"),
    bankLast4: ascii(4)("bank_last4"),
    bankChangedAt: at("bank_changed_at"),
    createdAt: at("created_at").notNull(),
  },
  (table) => [uniqueIndex("payees_once").on(table.kind, table.holderId)],
);

export const advances = mysqlTable(
  "advances",
  {
    id: id("id").primaryKey(),
    libraryId: id("library_id").notNull(),
    personId: id("person_id").notNull(),
    amountMinor: minor("amount_minor").notNull(),
    currency: ascii(3)("currency").notNull(),
    paidAt: at("paid_at").notNull(),
  },
  (table) => [index("advances_person").on(table.personId, table.libraryId)],
);

/** A run of payouts for one library: prepared, released by its accountant, then by the marketplace's. */
export const payoutRuns = mysqlTable("payout_runs", {
  id: id("id").primaryKey(),
  libraryId: id("library_id").notNull(),
  currency: ascii(3)("currency").notNull(),
  /** prepared, released, confirmed, withdrawn */
  state: ascii(12)("state").notNull(),
  preparedBy: id("prepared_by").notNull(),
  preparedAt: at("prepared_at").notNull(),
  releasedBy: id("released_by"),
  releasedAt: at("released_at"),
  confirmedBy: id("confirmed_by"),
  confirmedAt: at("confirmed_at"),
  version: int("version").notNull().default(1),
});

export const payouts = mysqlTable(
  "payouts",
  {
    id: id("id").primaryKey(),
    runId: id("run_id").notNull(),
    libraryId: id("library_id").notNull(),
    /** library or person */
    kind: ascii(8)("kind").notNull(),
    holderId: id("holder_id").notNull(),
    /** Null while the holder has not begun to be a payee. */
    payeeId: id("payee_id"),
    amountMinor: minor("amount_minor").notNull(),
    currency: ascii(3)("currency").notNull(),
    /** prepared, sending, paid, carried, failed, withdrawn */
    state: ascii(12)("state").notNull(),
    reason: varchar("reason", { length: 300 }).notNull(),
    processorTransfer: ascii(60)("processor_transfer"),
    entryId: id("entry_id"),
    paidAt: at("paid_at"),
  },
  (table) => [index("payouts_run").on(table.runId), index("payouts_holder").on(table.holderId)],
);

/** The processor's events, stored before they are acted on. */
export const paymentEvents = mysqlTable(
  "payment_events",
  {
    id: ascii(80)("id").primaryKey(),
    type: ascii(60)("type").notNull(),
    payload: jsonOf<Record<string, unknown>>("payload").notNull(),
    receivedAt: at("received_at").notNull(),
  },
  (table) => [index("payment_events_type").on(table.type)],
);
