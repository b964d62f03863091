import {
  boolean,
  double,
  index,
  int,
  mysqlTable,
  primaryKey,
  text,
  uniqueIndex,
  varchar,
} from "drizzle-orm/mysql-core";
import { ascii, at, bytes, id, jsonOf, sha256 } from "@/db/columns";

export const libraries = mysqlTable("libraries", {
  id: id("id").primaryKey(),
  code: ascii(4)("code").notNull().unique("libraries_code"),
  name: varchar("name", { length: 200 }).notNull(),
  place: varchar("place", { length: 200 }).notNull(),
  countryCode: ascii(2)("country_code").notNull(),
  currency: ascii(3)("currency").notNull(),
  timeZone: ascii(60)("time_zone").notNull(),
  publisherIpi: ascii(11)("publisher_ipi").notNull(),
  /** Composer pool as basis points of library receipts. */
  composerPoolBps: int("composer_pool_bps").notNull(),
  character: varchar("character_note", { length: 300 }).notNull(),
  /** Last catalogue number given out; raised in the transaction that takes one. */
  lastNumber: int("last_number").notNull().default(0),
  version: int("version").notNull().default(1),
  createdAt: at("created_at").notNull(),
});

/** One musical work of one library with all its recordings. */
export const families = mysqlTable(
  "families",
  {
    id: id("id").primaryKey(),
    libraryId: id("library_id").notNull(),
    number: int("number").notNull(),
    /** Public catalogue number: library code + number, "SM0001". */
    catalogueNumber: ascii(12)("catalogue_number").notNull().unique("families_number"),
    title: varchar("title", { length: 200 }).notNull(),
    otherTitles: jsonOf<string[]>("other_titles").notNull(),
    iswc: ascii(11)("iswc"),
    /** pending, listed, withdrawn, refused, returned */
    state: ascii(12)("state").notNull(),
    deal: ascii(14)("deal").notNull(),
    bpm: double("bpm"),
    musicalKey: varchar("musical_key", { length: 20 }),
    genre: ascii(40)("genre").notNull(),
    voice: ascii(12)("voice").notNull(),
    voiceLanguage: ascii(12)("voice_language"),
    ending: ascii(12)("ending").notNull(),
    shape: ascii(24)("shape").notNull(),
    density: ascii(12)("density").notNull(),
    description: varchar("description", { length: 400 }).notNull(),
    keywords: jsonOf<string[]>("keywords").notNull(),
    sections: jsonOf<{ atS: number; label: string; energy: number }[]>("sections").notNull(),
    explicitContent: ascii(8)("explicit_content").notNull().default("none"),
    yearRecorded: int("year_recorded"),
    restrictedTerritories: jsonOf<string[]>("restricted_territories").notNull(),
    refusedUses: jsonOf<string[]>("refused_uses").notNull(),
    /** Everything full-text search reads, kept by the catalogue's own writes. */
    searchText: text("search_text").notNull(),
    headRecordingId: id("head_recording_id"),
    demo: boolean("demo").notNull().default(false),
    createdAt: at("created_at").notNull(),
    acceptedAt: at("accepted_at"),
    listedAt: at("listed_at"),
    version: int("version").notNull().default(1),
  },
  (table) => [
    index("families_library").on(table.libraryId, table.state),
    uniqueIndex("families_library_title").on(table.libraryId, table.title),
  ],
);

export const familyTerms = mysqlTable(
  "family_terms",
  {
    familyId: id("family_id").notNull(),
    /** genre, mood, instrument, use */
    kind: ascii(12)("kind").notNull(),
    term: ascii(40)("term").notNull(),
    position: int("position").notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.familyId, table.kind, table.term] }),
    index("family_terms_term").on(table.kind, table.term),
  ],
);

/** A version of the split; a sale uses the one valid at capture. */
export const splitVersions = mysqlTable(
  "split_versions",
  {
    id: id("id").primaryKey(),
    familyId: id("family_id").notNull(),
    version: int("version").notNull(),
    validFrom: at("valid_from").notNull(),
    createdAt: at("created_at").notNull(),
  },
  (table) => [uniqueIndex("split_versions_once").on(table.familyId, table.version)],
);

export const splitShares = mysqlTable(
  "split_shares",
  {
    id: id("id").primaryKey(),
    splitVersionId: id("split_version_id").notNull(),
    /** writer or publisher */
    side: ascii(10)("side").notNull(),
    position: int("position").notNull(),
    personId: id("person_id"),
    name: varchar("name", { length: 200 }).notNull(),
    ipi: ascii(11)("ipi"),
    role: ascii(4)("role").notNull(),
    shareBps: int("share_bps").notNull(),
    acceptedAt: at("accepted_at"),
  },
  (table) => [
    index("split_shares_version").on(table.splitVersionId),
    index("split_shares_person").on(table.personId),
  ],
);

/** One version: one distinct recording, one ISRC, one master whose bytes never change. */
export const recordings = mysqlTable(
  "recordings",
  {
    id: id("id").primaryKey(),
    familyId: id("family_id").notNull(),
    libraryId: id("library_id").notNull(),
    versionRole: varchar("version_role", { length: 60 }).notNull(),
    position: int("position").notNull(),
    isrc: ascii(12)("isrc").unique("recordings_isrc"),
    /** pending, clear, held, listed, withdrawn, refused, returned */
    state: ascii(12)("state").notNull(),
    ending: ascii(12)("ending").notNull(),
    fileKey: ascii(120)("file_key").notNull(),
    fileName: varchar("file_name", { length: 255 }).notNull(),
    fileSha256: sha256("file_sha256").notNull(),
    sampleRateHz: int("sample_rate_hz").notNull(),
    bitDepth: int("bit_depth").notNull(),
    channels: int("channels").notNull(),
    durationS: double("duration_s").notNull(),
    loudnessLufs: double("loudness_lufs"),
    truePeakDbtp: double("true_peak_dbtp"),
    loudnessRangeLu: double("loudness_range_lu"),
    bpmMeasured: double("bpm_measured"),
    keyMeasured: varchar("key_measured", { length: 20 }),
    contour: bytes("contour"),
    soundFeatures: bytes("sound_features"),
    sectionLoudness: jsonOf<number[] | null>("section_loudness"),
    previewKey: ascii(120)("preview_key"),
    createdAt: at("created_at").notNull(),
  },
  (table) => [
    index("recordings_family").on(table.familyId, table.position),
    index("recordings_sha").on(table.fileSha256),
  ],
);

/** The master as licensed: rendered once, hashed, immutable. */
export const licensedMasters = mysqlTable("licensed_masters", {
  recordingId: id("recording_id").primaryKey(),
  fileKey: ascii(120)("file_key").notNull(),
  sha256: sha256("sha256").notNull(),
  sizeBytes: int("size_bytes").notNull(),
  durationSamples: int("duration_samples").notNull(),
  createdAt: at("created_at").notNull(),
});

export const holds = mysqlTable(
  "holds",
  {
    id: id("id").primaryKey(),
    familyId: id("family_id").notNull(),
    /** reported work, finding, exclusive, owner */
    cause: ascii(20)("cause").notNull(),
    causeId: ascii(60)("cause_id").notNull(),
    reason: varchar("reason", { length: 500 }).notNull(),
    sinceAt: at("since_at").notNull(),
    endedAt: at("ended_at"),
  },
  (table) => [index("holds_family").on(table.familyId, table.endedAt)],
);

export const catalogueEvents = mysqlTable(
  "catalogue_events",
  {
    id: id("id").primaryKey(),
    familyId: id("family_id").notNull(),
    recordingId: id("recording_id"),
    happenedAt: at("happened_at").notNull(),
    words: varchar("words", { length: 300 }).notNull(),
    fromState: ascii(12)("from_state"),
    toState: ascii(12)("to_state"),
    personId: id("person_id"),
  },
  (table) => [index("catalogue_events_family").on(table.familyId, table.happenedAt)],
);
