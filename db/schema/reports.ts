import { boolean, double, index, int, mysqlTable, primaryKey, text, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, bytes, id, jsonOf } from "@/db/columns";

/** A report of a work, from anybody. */
export const notices = mysqlTable(
  "notices",
  {
    id: id("id").primaryKey(),
    receiptNumber: ascii(20)("receipt_number").notNull().unique("notices_receipt"),
    accessHash: ascii(64)("access_hash").notNull(),
    /** Encrypted with FIELD_KEY: name, capacity, address, phone. Marketplace moderators only. */
    contact: bytes("contact").notNull(),
    emailHash: ascii(64)("email_hash").notNull(),
    emailConfirmedAt: at("email_confirmed_at"),
    claim: jsonOf<Record<string, unknown>>("claim").notNull(),
    /** received, incomplete, under review, decided */
    state: ascii(16)("state").notNull(),
    outcome: ascii(20)("outcome"),
    reasons: text("reasons"),
    decidedBy: id("decided_by"),
    decidedAt: at("decided_at"),
    targetFamilyId: id("target_family_id"),
    confidentialKey: ascii(120)("confidential_key"),
    reportedWorkId: id("reported_work_id"),
    receivedAt: at("received_at").notNull(),
    version: int("version").notNull().default(1),
  },
  (table) => [
    index("notices_state").on(table.state, table.receivedAt),
    index("notices_email").on(table.emailHash, table.receivedAt),
  ],
);

export const noticeEvents = mysqlTable(
  "notice_events",
  {
    id: id("id").primaryKey(),
    noticeId: id("notice_id").notNull(),
    words: varchar("words", { length: 500 }).notNull(),
    visibleToReporter: boolean("visible_to_reporter").notNull(),
    personId: id("person_id"),
    at: at("at").notNull(),
  },
  (table) => [index("notice_events_notice").on(table.noticeId, table.at)],
);

/** The blocklist. */
export const reportedWorks = mysqlTable(
  "reported_works",
  {
    id: id("id").primaryKey(),
    code: ascii(10)("code").notNull().unique("reported_works_code"),
    title: varchar("title", { length: 200 }).notNull(),
    /** work, recording, both */
    concerns: ascii(10)("concerns").notNull(),
    owner: varchar("owner", { length: 200 }).notNull(),
    /** claimed, supported, adjudicated */
    level: ascii(12)("level").notNull(),
    fileKey: ascii(120)("file_key"),
    durationS: double("duration_s"),
    fingerprinted: boolean("fingerprinted").notNull().default(false),
    noticeId: id("notice_id"),
    addedBy: id("added_by").notNull(),
    reviewAt: at("review_at").notNull(),
    removedAt: at("removed_at"),
    createdAt: at("created_at").notNull(),
    version: int("version").notNull().default(1),
  },
  (table) => [index("reported_works_level").on(table.level)],
);

export const reportLimits = mysqlTable(
  "report_limits",
  {
    subjectHash: ascii(64)("subject_hash").notNull(),
    day: ascii(10)("day").notNull(),
    count: int("count").notNull(),
  },
  (table) => [primaryKey({ columns: [table.subjectHash, table.day] })],
);
