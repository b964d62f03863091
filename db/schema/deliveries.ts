import { bigint, index, int, mysqlTable, text, uniqueIndex, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, bytes, id, jsonOf, sha256 } from "@/db/columns";

export const deliveries = mysqlTable(
  "deliveries",
  {
    id: id("id").primaryKey(),
    libraryId: id("library_id").notNull(),
    /** Who hands it in: a composer, or staff for their own library. */
    delivererId: id("deliverer_id").notNull(),
    delivererKind: ascii(20)("deliverer_kind").notNull(),
    familyId: id("family_id"),
    title: varchar("title", { length: 200 }).notNull(),
    /** The form as far as it is filled in: kept at each step, checked whole when signed. */
    draft: jsonOf<Record<string, unknown>>("draft").notNull(),
    /** draft, delivered, returned, listed, refused, withdrawn */
    state: ascii(12)("state").notNull(),
    /** Gates beside the state. */
    writersAcceptedAt: at("writers_accepted_at"),
    editorialAcceptedAt: at("editorial_accepted_at"),
    editorialAcceptedBy: id("editorial_accepted_by"),
    version: int("version").notNull().default(1),
    createdAt: at("created_at").notNull(),
    updatedAt: at("updated_at").notNull(),
    deliveredAt: at("delivered_at"),
  },
  (table) => [
    index("deliveries_deliverer").on(table.delivererId, table.state),
    index("deliveries_library").on(table.libraryId, table.state),
  ],
);

/** One file of a delivery. A replaced file stays, with replacedBy set. */
export const deliveryVersions = mysqlTable(
  "delivery_versions",
  {
    id: id("id").primaryKey(),
    deliveryId: id("delivery_id").notNull(),
    position: int("position").notNull(),
    fileKey: ascii(120)("file_key").notNull().unique("delivery_versions_file"),
    fileName: varchar("file_name", { length: 255 }).notNull(),
    sizeBytes: bigint("size_bytes", { mode: "number" }).notNull(),
    sha256: sha256("sha256"),
    versionRole: varchar("version_role", { length: 60 }).notNull(),
    isrc: ascii(12)("isrc"),
    /** arrived, measuring, measured, unreadable, screening, clear, held, returned, refused, listed */
    state: ascii(12)("state").notNull(),
    stateWords: varchar("state_words", { length: 500 }).notNull(),
    facts: jsonOf<Record<string, unknown> | null>("facts"),
    measures: jsonOf<Record<string, unknown> | null>("measures"),
    checks: jsonOf<Record<string, unknown>[] | null>("checks"),
    contour: bytes("contour"),
    soundFeatures: bytes("sound_features"),
    recordingId: id("recording_id"),
    replacedBy: id("replaced_by"),
    arrivedAt: at("arrived_at").notNull(),
  },
  (table) => [
    index("delivery_versions_delivery").on(table.deliveryId, table.position),
    index("delivery_versions_recording").on(table.recordingId),
  ],
);

/** Signed statements: every change is a new version with its own hash. */
export const declarations = mysqlTable(
  "declarations",
  {
    id: id("id").primaryKey(),
    deliveryId: id("delivery_id").notNull(),
    version: int("version").notNull(),
    textVersion: ascii(20)("text_version").notNull(),
    answers: jsonOf<Record<string, unknown>>("answers").notNull(),
    sha256: sha256("sha256").notNull(),
    signedBy: id("signed_by").notNull(),
    signedName: varchar("signed_name", { length: 200 }).notNull(),
    signedAt: at("signed_at").notNull(),
  },
  (table) => [uniqueIndex("declarations_once").on(table.deliveryId, table.version)],
);

export const deliveryWriters = mysqlTable(
  "delivery_writers",
  {
    id: id("id").primaryKey(),
    deliveryId: id("delivery_id").notNull(),
    position: int("position").notNull(),
    personId: id("person_id"),
    name: varchar("name", { length: 200 }).notNull(),
    email: varchar("email", { length: 254 }),
    ipi: ascii(11)("ipi"),
    role: ascii(4)("role").notNull(),
    shareBps: int("share_bps").notNull(),
    /** asked, accepted, declined, lapsed */
    state: ascii(10)("state").notNull(),
    askedAt: at("asked_at"),
    answeredAt: at("answered_at"),
    answerUntil: at("answer_until"),
  },
  (table) => [
    index("delivery_writers_delivery").on(table.deliveryId),
    index("delivery_writers_person").on(table.personId, table.state),
  ],
);

export const deliveryEvents = mysqlTable(
  "delivery_events",
  {
    id: id("id").primaryKey(),
    deliveryId: id("delivery_id").notNull(),
    versionId: id("version_id"),
    happenedAt: at("happened_at").notNull(),
    fromState: ascii(12)("from_state"),
    toState: ascii(12)("to_state"),
    words: text("words").notNull(),
    personId: id("person_id"),
    codes: jsonOf<string[]>("codes").notNull(),
  },
  (table) => [index("delivery_events_delivery").on(table.deliveryId, table.happenedAt)],
);
