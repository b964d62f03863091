import { index, int, mysqlTable, uniqueIndex, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, bytes, id, jsonOf } from "@/db/columns";

/** What a buyer licenses music for; belongs to the company and outlives its people. */
export const productions = mysqlTable(
  "productions",
  {
    id: id("id").primaryKey(),
    companyId: id("company_id").notNull(),
    title: varchar("title", { length: 200 }).notNull(),
    codeName: varchar("code_name", { length: 80 }),
    episode: varchar("episode", { length: 120 }),
    kind: varchar("kind", { length: 60 }).notNull(),
    client: varchar("client", { length: 200 }),
    /** The use priced by default on every cue seen inside the production. */
    use: jsonOf<Record<string, unknown> | null>("default_use"),
    createdBy: id("created_by").notNull(),
    createdAt: at("created_at").notNull(),
    version: int("version").notNull().default(1),
  },
  (table) => [index("productions_company").on(table.companyId)],
);

export const shortlistItems = mysqlTable(
  "shortlist_items",
  {
    id: id("id").primaryKey(),
    productionId: id("production_id").notNull(),
    familyId: id("family_id").notNull(),
    recordingId: id("recording_id").notNull(),
    position: int("position").notNull(),
    /** picked, considering, out */
    state: ascii(12)("state").notNull(),
    note: varchar("note", { length: 500 }).notNull(),
    priceSnapshot: jsonOf<Record<string, unknown> | null>("price_snapshot"),
    addedBy: id("added_by").notNull(),
    addedAt: at("added_at").notNull(),
  },
  (table) => [uniqueIndex("shortlist_items_once").on(table.productionId, table.familyId)],
);

/** Kept for search by sound: one row per recording with its standardised features. */
export const searchFeatures = mysqlTable("search_features", {
  recordingId: id("recording_id").primaryKey(),
  packed: bytes("packed").notNull(),
});
