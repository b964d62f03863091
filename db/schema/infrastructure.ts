import { bigint, index, int, mysqlTable, text, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, id, jsonOf, sha256 } from "@/db/columns";

export const jobs = mysqlTable(
  "jobs",
  {
    id: id("id").primaryKey(),
    name: ascii(80)("name").notNull(),
    /** Enqueueing the same key twice is one job; scheduled slots have deterministic keys. */
    dedupeKey: ascii(160)("dedupe_key").unique("jobs_dedupe"),
    payload: jsonOf<unknown>("payload").notNull(),
    state: ascii(10)("state").notNull(),
    /** Lower runs first: 10 somebody waits on the page, 50 ordinary, 90 in the background. */
    priority: int("priority").notNull(),
    runAt: at("run_at").notNull(),
    /** Set when the enqueuing command ran at a set business time: the job runs at that time too. */
    businessAt: at("business_at"),
    leaseToken: ascii(40)("lease_token"),
    leaseUntil: at("lease_until"),
    attempts: int("attempts").notNull().default(0),
    attemptsMax: int("attempts_max").notNull(),
    progress: jsonOf<{ words: string; done: number; of: number } | null>("progress"),
    lastError: text("last_error"),
    createdAt: at("created_at").notNull(),
    finishedAt: at("finished_at"),
  },
  (table) => [
    index("jobs_ready").on(table.state, table.priority, table.runAt),
    index("jobs_name").on(table.name, table.state),
  ],
);

export const mailOutbox = mysqlTable(
  "mail_outbox",
  {
    id: id("id").primaryKey(),
    toAddress: varchar("to_address", { length: 254 }).notNull(),
    personId: id("person_id"),
    template: ascii(60)("template").notNull(),
    props: jsonOf<Record<string, unknown>>("props").notNull(),
    subjectId: ascii(80)("subject_id").notNull(),
    state: ascii(10)("state").notNull(),
    providerId: ascii(80)("provider_id"),
    createdAt: at("created_at").notNull(),
    sentAt: at("sent_at"),
  },
  (table) => [index("mail_outbox_subject").on(table.subjectId)],
);

/** What is held in the file store. Bytes behind a key never change. */
export const storedFiles = mysqlTable(
  "stored_files",
  {
    key: ascii(120)("key").primaryKey(),
    slug: ascii(20)("slug").notNull(),
    name: varchar("name", { length: 255 }).notNull(),
    mime: varchar("mime", { length: 120 }).notNull(),
    sizeBytes: bigint("size_bytes", { mode: "number" }).notNull(),
    sha256: sha256("sha256"),
    uploaderId: id("uploader_id"),
    ownerKind: ascii(20)("owner_kind").notNull(),
    ownerId: id("owner_id").notNull(),
    createdAt: at("created_at").notNull(),
  },
  (table) => [index("stored_files_owner").on(table.ownerKind, table.ownerId)],
);

export const tickets = mysqlTable("tickets", {
  tokenHash: ascii(64)("token_hash").primaryKey(),
  purpose: ascii(30)("purpose").notNull(),
  subjectId: id("subject_id").notNull(),
  expiresAt: at("expires_at").notNull(),
  usedAt: at("used_at"),
});
