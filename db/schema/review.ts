import { boolean, index, int, mysqlTable, text, uniqueIndex, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, id, jsonOf } from "@/db/columns";

/** The hits of one delivery, opened for a person. */
export const cases = mysqlTable(
  "cases",
  {
    id: id("id").primaryKey(),
    number: int("number").notNull().unique("cases_number"),
    deliveryId: id("delivery_id").notNull(),
    familyId: id("family_id").notNull(),
    /** Whose people resolve it: a library, or null for the marketplace. */
    libraryId: id("library_id"),
    deliveringLibraryId: id("delivering_library_id").notNull(),
    /** open, waiting on composer, waiting on second person, closed */
    state: ascii(24)("state").notNull(),
    holderId: id("holder_id"),
    papersOpenedAt: at("papers_opened_at"),
    dueAt: at("due_at").notNull(),
    openedAt: at("opened_at").notNull(),
    closedAt: at("closed_at"),
    version: int("version").notNull().default(1),
  },
  (table) => [
    index("cases_queue").on(table.libraryId, table.state, table.dueAt),
    index("cases_delivery").on(table.deliveryId),
  ],
);

/** One group per reference family (or reported work): answered one by one. */
export const caseGroups = mysqlTable(
  "case_groups",
  {
    id: id("id").primaryKey(),
    caseId: id("case_id").notNull(),
    referenceKind: ascii(10)("reference_kind").notNull(),
    /** Family of the reference, or the reported work. */
    referenceKey: id("reference_key").notNull(),
    hitIds: jsonOf<string[]>("hit_ids").notNull(),
    relation: ascii(20)("relation").notNull(),
    outsideLibrary: boolean("outside_library").notNull(),
  },
  (table) => [uniqueIndex("case_groups_once").on(table.caseId, table.referenceKind, table.referenceKey)],
);

/** A moderator's recorded answer. Never changed; a later one supersedes it. */
export const findings = mysqlTable(
  "findings",
  {
    id: id("id").primaryKey(),
    caseId: id("case_id").notNull(),
    groupId: id("group_id").notNull(),
    outcome: ascii(24)("outcome").notNull(),
    explainedBy: ascii(24)("explained_by"),
    codes: jsonOf<string[]>("codes").notNull(),
    reasons: text("reasons").notNull(),
    notDecided: text("not_decided").notNull(),
    knowing: boolean("knowing"),
    knowingBecause: text("knowing_because"),
    alternatives: jsonOf<string[]>("alternatives").notNull(),
    deciderId: id("decider_id").notNull(),
    decidedAt: at("decided_at").notNull(),
    needsSecond: boolean("needs_second").notNull(),
    supersededBy: id("superseded_by"),
  },
  (table) => [index("findings_case").on(table.caseId)],
);

export const confirmations = mysqlTable("confirmations", {
  findingId: id("finding_id").primaryKey(),
  confirmerId: id("confirmer_id").notNull(),
  confirmed: boolean("confirmed").notNull(),
  words: text("words").notNull(),
  at: at("at").notNull(),
});

/** On the record of a verified person, for a time. */
export const upheldFindings = mysqlTable(
  "upheld_findings",
  {
    id: id("id").primaryKey(),
    findingId: id("finding_id").notNull().unique("upheld_findings_finding"),
    personId: id("person_id").notNull(),
    fromAt: at("from_at").notNull(),
    throughAt: at("through_at").notNull(),
    removedAt: at("removed_at"),
  },
  (table) => [index("upheld_findings_person").on(table.personId)],
);

export const caseMessages = mysqlTable(
  "case_messages",
  {
    id: id("id").primaryKey(),
    caseId: id("case_id").notNull(),
    /** question, answer, note (private to the reviewing side) */
    kind: ascii(10)("kind").notNull(),
    authorId: id("author_id").notNull(),
    words: text("words").notNull(),
    passageIds: jsonOf<string[]>("passage_ids").notNull(),
    fileKey: ascii(120)("file_key"),
    answerUntil: at("answer_until"),
    at: at("at").notNull(),
  },
  (table) => [index("case_messages_case").on(table.caseId, table.at)],
);

export const conflictsDeclared = mysqlTable(
  "conflicts_declared",
  {
    id: id("id").primaryKey(),
    caseId: id("case_id").notNull(),
    personId: id("person_id").notNull(),
    words: varchar("words", { length: 500 }).notNull(),
    at: at("at").notNull(),
  },
  (table) => [uniqueIndex("conflicts_declared_once").on(table.caseId, table.personId)],
);

/** The four-channel file of one passage, rendered by the worker: delivery left and right, reference left and right. */
export const alignedListenings = mysqlTable(
  "aligned_listenings",
  {
    passageId: id("passage_id").primaryKey(),
    hitId: id("hit_id").notNull(),
    /** ready, or why it cannot be heard */
    state: ascii(10)("state").notNull(),
    fileKey: ascii(120)("file_key"),
    /** As lib/audio's renderAligned returns it. */
    render: jsonOf<Record<string, unknown> | null>("render_facts"),
    createdAt: at("created_at").notNull(),
  },
  (table) => [index("aligned_listenings_hit").on(table.hitId)],
);

/** Who opened what of whom: papers and another library's sound. */
export const disclosures = mysqlTable(
  "disclosures",
  {
    id: id("id").primaryKey(),
    caseId: id("case_id").notNull(),
    personId: id("person_id").notNull(),
    /** papers, hearing */
    kind: ascii(10)("kind").notNull(),
    subjectId: id("subject_id").notNull(),
    libraryId: id("library_id"),
    at: at("at").notNull(),
  },
  (table) => [
    index("disclosures_case").on(table.caseId),
    index("disclosures_library").on(table.libraryId, table.at),
  ],
);
