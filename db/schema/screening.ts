import { boolean, double, index, int, mysqlTable, uniqueIndex, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, bytes, id, jsonOf, sha256 } from "@/db/columns";

/** The head row: locked and raised by every admission. One row, name 'index'. */
export const indexHead = mysqlTable("index_head", {
  name: ascii(10)("name").primaryKey(),
  seq: int("seq").notNull(),
});

/** Gapless: the numbers are taken under the head row, never from a counter of the table's own. */
export const indexLog = mysqlTable(
  "index_log",
  {
    seq: int("seq").primaryKey(),
    /** add, remove */
    change: ascii(8)("change_kind").notNull(),
    /** recording, reported, loop */
    subjectKind: ascii(10)("subject_kind").notNull(),
    subjectId: id("subject_id").notNull(),
    at: at("at").notNull(),
  },
  (table) => [index("index_log_subject").on(table.subjectKind, table.subjectId)],
);

/** The packed fingerprint is the truth; the index in a worker's memory is rebuilt from these rows. */
export const recordingFingerprints = mysqlTable(
  "recording_fingerprints",
  {
    id: id("id").primaryKey(),
    /** recording, reported, loop */
    subjectKind: ascii(10)("subject_kind").notNull(),
    subjectId: id("subject_id").notNull(),
    /** mid, left, right */
    channel: ascii(5)("channel").notNull(),
    engineVersion: int("engine_version").notNull(),
    /** Where the sound is, for a reference that is no delivered recording. */
    fileKey: ascii(120)("file_key"),
    packed: bytes("packed").notNull(),
    sha256: sha256("sha256").notNull(),
    durationS: double("duration_s").notNull(),
    contentS: double("content_s").notNull(),
    comparable: boolean("comparable").notNull(),
    notComparable: jsonOf<{ startS: number; endS: number; reason: string }[]>("not_comparable").notNull(),
    createdAt: at("created_at").notNull(),
  },
  (table) => [
    uniqueIndex("recording_fingerprints_once").on(
      table.subjectKind,
      table.subjectId,
      table.channel,
      table.engineVersion,
    ),
  ],
);

export const screeningRuns = mysqlTable(
  "screening_runs",
  {
    id: id("id").primaryKey(),
    recordingId: id("recording_id").notNull(),
    engineVersion: int("engine_version").notNull(),
    /** Sequence of the index the search saw, and the one the admission closed at. */
    seqSearched: int("seq_searched").notNull(),
    seqAdmitted: int("seq_admitted").notNull(),
    recordingsCompared: int("recordings_compared").notNull(),
    hoursCompared: double("hours_compared").notNull(),
    thresholds: jsonOf<Record<string, unknown>>("thresholds").notNull(),
    /** clear, explained, held, not comparable */
    outcome: ascii(16)("outcome").notNull(),
    outcomeWords: varchar("outcome_words", { length: 500 }).notNull(),
    startedAt: at("started_at").notNull(),
    finishedAt: at("finished_at").notNull(),
    supersededBy: id("superseded_by"),
  },
  (table) => [index("screening_runs_recording").on(table.recordingId)],
);

export const hits = mysqlTable(
  "hits",
  {
    id: id("id").primaryKey(),
    runId: id("run_id").notNull(),
    recordingId: id("recording_id").notNull(),
    /** recording, reported, loop */
    referenceKind: ascii(10)("reference_kind").notNull(),
    referenceId: id("reference_id").notNull(),
    referenceFamilyId: id("reference_family_id"),
    referenceLibraryId: id("reference_library_id"),
    relation: ascii(20)("relation").notNull(),
    band: ascii(8)("band").notNull(),
    /** null while unexplained; family, loop, other title, public domain, own refused work */
    explainedBy: ascii(24)("explained_by"),
    explanation: varchar("explanation", { length: 500 }),
    evidence: double("evidence").notNull(),
    evidence2: double("evidence2").notNull(),
    chance: double("chance"),
    speed: double("speed").notNull(),
    pitchSemitones: double("pitch_semitones").notNull(),
    coverageRecording: double("coverage_recording").notNull(),
    coverageReference: double("coverage_reference").notNull(),
    channel: ascii(5)("channel").notNull(),
    reversed: boolean("reversed").notNull(),
    lowDistinctiveness: boolean("low_distinctiveness").notNull(),
    createdAt: at("created_at").notNull(),
  },
  (table) => [
    index("hits_run").on(table.runId),
    index("hits_reference").on(table.referenceKind, table.referenceId),
    index("hits_recording").on(table.recordingId),
  ],
);

export const passages = mysqlTable(
  "passages",
  {
    id: id("id").primaryKey(),
    hitId: id("hit_id").notNull(),
    number: int("number").notNull(),
    startS: double("start_s").notNull(),
    endS: double("end_s").notNull(),
    refStartS: double("ref_start_s").notNull(),
    refEndS: double("ref_end_s").notNull(),
    speed: double("speed").notNull(),
    pitchSemitones: double("pitch_semitones").notNull(),
    landmarksMatched: int("landmarks_matched").notNull(),
    landmarksTotal: int("landmarks_total").notNull(),
    evidence: double("evidence").notNull(),
  },
  (table) => [index("passages_hit").on(table.hitId, table.number)],
);

/** What was compared, how, with what result: canonical text, never changed. */
export const certificates = mysqlTable(
  "certificates",
  {
    id: id("id").primaryKey(),
    recordingId: id("recording_id").notNull(),
    runId: id("run_id").notNull().unique("certificates_run"),
    body: jsonOf<Record<string, unknown>>("body").notNull(),
    sha256: sha256("sha256").notNull(),
    issuedAt: at("issued_at").notNull(),
  },
  (table) => [index("certificates_recording").on(table.recordingId)],
);

/** Registered shared material: a loop alarms once, then explains itself. */
export const sharedLoops = mysqlTable("shared_loops", {
  id: id("id").primaryKey(),
  code: ascii(10)("code").notNull().unique("shared_loops_code"),
  title: varchar("title", { length: 200 }).notNull(),
  lengthS: double("length_s").notNull(),
  bpm: double("bpm"),
  /** With other musical content; not as the principal element; low information. */
  condition: ascii(30)("condition_kind").notNull(),
  conditionWords: varchar("condition_words", { length: 300 }).notNull(),
  /** Largest part of a recording's length that the loop alone may make up, in basis points. */
  coverageMaxBps: int("coverage_max_bps").notNull(),
  fileKey: ascii(120)("file_key"),
  registeredBy: id("registered_by").notNull(),
  confirmedBy: id("confirmed_by"),
  createdAt: at("created_at").notNull(),
});

/** Public-domain tunes and other titles: explanations kept in words and numbers. */
export const registerEntries = mysqlTable(
  "register_entries",
  {
    id: id("id").primaryKey(),
    /** public domain, other title */
    kind: ascii(16)("kind").notNull(),
    code: ascii(10)("code"),
    title: varchar("title", { length: 200 }).notNull(),
    familyIds: jsonOf<string[]>("family_ids").notNull(),
    personId: id("person_id"),
    libraryId: id("library_id"),
    words: varchar("words", { length: 500 }).notNull(),
    createdAt: at("created_at").notNull(),
  },
  (table) => [index("register_entries_kind").on(table.kind)],
);

/** What a screening must know of the delivery behind a recording, told by deliveries when it is signed. */
export const screeningRequests = mysqlTable("screening_requests", {
  recordingId: id("recording_id").primaryKey(),
  familyId: id("family_id").notNull(),
  libraryId: id("library_id").notNull(),
  delivererId: id("deliverer_id").notNull(),
  /** Writers who have accepted, besides the deliverer: a family link counts only for them or the library itself. */
  writerIds: jsonOf<string[]>("writer_ids").notNull(),
  /** Codes of registered loops that this delivery declares with a paper. */
  declaredLoops: jsonOf<string[]>("declared_loops").notNull(),
  /** Head or cutdown: whether a match with the family is to be expected. */
  expectsFamilyMatch: boolean("expects_family_match").notNull(),
  requestedAt: at("requested_at").notNull(),
});
