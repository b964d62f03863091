import { index, int, mysqlTable, primaryKey, text, uniqueIndex, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, id, jsonOf, minor, sha256 } from "@/db/columns";

export const rateCards = mysqlTable(
  "rate_cards",
  {
    id: id("id").primaryKey(),
    libraryId: id("library_id").notNull(),
    version: int("version").notNull(),
    card: jsonOf<Record<string, unknown>>("card").notNull(),
    validFrom: at("valid_from").notNull(),
    createdBy: id("created_by"),
  },
  (table) => [uniqueIndex("rate_cards_once").on(table.libraryId, table.version)],
);

/** One library, one currency, one seller. */
export const orders = mysqlTable(
  "orders",
  {
    id: id("id").primaryKey(),
    number: int("number").notNull().unique("orders_number"),
    companyId: id("company_id").notNull(),
    productionId: id("production_id").notNull(),
    libraryId: id("library_id").notNull(),
    currency: ascii(3)("currency").notNull(),
    netMinor: minor("net_minor").notNull(),
    taxMinor: minor("tax_minor").notNull(),
    grossMinor: minor("gross_minor").notNull(),
    taxWords: varchar("tax_words", { length: 300 }).notNull(),
    /** proposed, awaiting payment, paid, licensed, refused, withdrawn */
    state: ascii(20)("state").notNull(),
    stateWords: varchar("state_words", { length: 500 }).notNull(),
    licensee: jsonOf<Record<string, unknown>>("licensee").notNull(),
    acceptance: jsonOf<Record<string, unknown> | null>("acceptance"),
    /** Checkouts opened so far: a new one gets a new idempotency key. */
    checkoutAttempt: int("checkout_attempt").notNull().default(0),
    checkoutSession: ascii(120)("checkout_session"),
    paymentIntent: ascii(80)("payment_intent"),
    placedBy: id("placed_by").notNull(),
    approvedBy: id("approved_by"),
    /** Set when the records have been signed. */
    issuedAt: at("issued_at"),
    placedAt: at("placed_at").notNull(),
    paidAt: at("paid_at"),
    version: int("version").notNull().default(1),
  },
  (table) => [
    index("orders_company").on(table.companyId),
    index("orders_library").on(table.libraryId, table.placedAt),
    index("orders_session").on(table.checkoutSession),
    index("orders_intent").on(table.paymentIntent),
  ],
);

export const orderLines = mysqlTable(
  "order_lines",
  {
    id: id("id").primaryKey(),
    orderId: id("order_id").notNull(),
    number: int("number").notNull(),
    familyId: id("family_id").notNull(),
    recordingIds: jsonOf<string[]>("recording_ids").notNull(),
    use: jsonOf<Record<string, unknown>>("use_scope").notNull(),
    price: jsonOf<Record<string, unknown>>("price").notNull(),
    netMinor: minor("net_minor").notNull(),
    taxMinor: minor("tax_minor").notNull(),
    splitVersionId: id("split_version_id"),
    licenceNumber: ascii(24)("licence_number"),
  },
  (table) => [
    uniqueIndex("order_lines_once").on(table.orderId, table.number),
    index("order_lines_family").on(table.familyId),
  ],
);

/** Gapless: the number is taken under the series row in the transaction that issues. */
export const numberSeries = mysqlTable("number_series", {
  name: ascii(40)("name").primaryKey(),
  last: int("last").notNull(),
});

export const invoices = mysqlTable(
  "invoices",
  {
    id: id("id").primaryKey(),
    libraryId: id("library_id").notNull(),
    number: ascii(24)("number").notNull().unique("invoices_number"),
    orderId: id("order_id").notNull(),
    /** invoice or credit note */
    kind: ascii(12)("kind").notNull(),
    refersTo: id("refers_to"),
    body: jsonOf<Record<string, unknown>>("body").notNull(),
    issuedAt: at("issued_at").notNull(),
  },
  (table) => [index("invoices_order").on(table.orderId)],
);

/** The immutable, signed paper of one licence. */
export const licenceRecords = mysqlTable(
  "licence_records",
  {
    number: ascii(24)("number").primaryKey(),
    proofCode: ascii(20)("proof_code").notNull().unique("licence_records_proof"),
    /** sold here, or brought in by its library */
    origin: ascii(12)("origin").notNull(),
    orderLineId: id("order_line_id").unique("licence_records_line"),
    libraryId: id("library_id").notNull(),
    companyId: id("company_id"),
    productionId: id("production_id"),
    familyId: id("family_id").notNull(),
    /** Signed canonical JSON, and the values of its confidential fields beside it. */
    canonical: text("canonical").notNull(),
    confidential: jsonOf<Record<string, unknown>>("confidential").notNull(),
    sha256: sha256("sha256").notNull(),
    keyId: ascii(40)("key_id").notNull(),
    signature: ascii(200)("signature").notNull(),
    lastUseAt: at("last_use_at"),
    issuedAt: at("issued_at").notNull(),
  },
  (table) => [
    index("licence_records_company").on(table.companyId),
    index("licence_records_family").on(table.familyId),
    index("licence_records_library").on(table.libraryId, table.issuedAt),
  ],
);

export const licenceStatusEvents = mysqlTable(
  "licence_status_events",
  {
    id: id("id").primaryKey(),
    licenceNumber: ascii(24)("licence_number").notNull(),
    sequence: int("sequence").notNull(),
    status: ascii(40)("status").notNull(),
    words: varchar("words", { length: 500 }).notNull(),
    effectiveAt: at("effective_at").notNull(),
    recordedAt: at("recorded_at").notNull(),
    canonical: text("canonical").notNull(),
    sha256: sha256("sha256").notNull(),
  },
  (table) => [uniqueIndex("licence_status_events_once").on(table.licenceNumber, table.sequence)],
);

/** What a licensee keeps from the public page for now; no row: nothing. */
export const licenceVisibility = mysqlTable("licence_visibility", {
  licenceNumber: ascii(24)("licence_number").primaryKey(),
  withheld: jsonOf<string[]>("withheld").notNull(),
  changedBy: id("changed_by").notNull(),
  changedAt: at("changed_at").notNull(),
  version: int("version").notNull().default(1),
});

/** The one row under which places in the log are taken and days are closed. */
export const recordLogHead = mysqlTable("record_log_head", {
  name: ascii(10)("name").primaryKey(),
  /** Days up to this one have their root; nothing may join them. */
  publishedThrough: ascii(10)("published_through"),
  version: int("version").notNull().default(1),
});

/** Leaves of the days' trees in their places, gapless within a day. */
export const recordLog = mysqlTable(
  "record_log",
  {
    day: ascii(10)("day").notNull(),
    position: int("position").notNull(),
    /** record or status */
    kind: ascii(8)("kind").notNull(),
    licenceNumber: ascii(24)("licence_number").notNull(),
    leaf: text("leaf").notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.day, table.position] }),
    index("record_log_licence").on(table.licenceNumber),
  ],
);

/** A refund of some lines of a paid order, or of a payment that was refused a licence. */
export const orderRefunds = mysqlTable(
  "order_refunds",
  {
    id: id("id").primaryKey(),
    orderId: id("order_id").notNull(),
    /** Empty: the payment of an order for which nothing was issued. */
    lineIds: jsonOf<string[]>("line_ids").notNull(),
    amountMinor: minor("amount_minor").notNull(),
    currency: ascii(3)("currency").notNull(),
    words: varchar("words", { length: 500 }).notNull(),
    /** asked, done */
    state: ascii(8)("state").notNull(),
    paymentIntent: ascii(80)("payment_intent").notNull(),
    processorRefund: ascii(80)("processor_refund"),
    askedBy: id("asked_by"),
    askedAt: at("asked_at").notNull(),
    doneAt: at("done_at"),
  },
  (table) => [index("order_refunds_order").on(table.orderId)],
);

export const signingKeys = mysqlTable("signing_keys", {
  keyId: ascii(40)("key_id").primaryKey(),
  publicKey: ascii(64)("public_key").notNull(),
  validFrom: at("valid_from").notNull(),
  validUntil: at("valid_until"),
});

/** The Merkle root over a day's records and status events, signed, naming the day before. */
export const dayRoots = mysqlTable("day_roots", {
  day: ascii(10)("day").primaryKey(),
  leaves: jsonOf<string[]>("leaves").notNull(),
  root: sha256("root").notNull(),
  previousRoot: sha256("previous_root"),
  canonical: text("canonical").notNull(),
  keyId: ascii(40)("key_id").notNull(),
  signature: ascii(200)("signature").notNull(),
  publishedAt: at("published_at").notNull(),
});

/** Which master was fetched when, for the buyer's own list. */
export const masterDownloads = mysqlTable(
  "master_downloads",
  {
    id: id("id").primaryKey(),
    licenceNumber: ascii(24)("licence_number").notNull(),
    recordingId: id("recording_id").notNull(),
    personId: id("person_id").notNull(),
    at: at("at").notNull(),
  },
  (table) => [index("master_downloads_licence").on(table.licenceNumber)],
);
