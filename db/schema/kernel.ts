import { index, mysqlTable, text, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, id, jsonOf } from "@/db/columns";

/** One row a command, written in its transaction. Its operation id is what makes a repeated command harmless. */
export const auditLog = mysqlTable(
  "audit_log",
  {
    id: id("id").primaryKey(),
    operationId: ascii(120)("operation_id").notNull().unique("audit_log_operation"),
    verb: ascii(80)("verb").notNull(),
    actorKind: ascii(20)("actor_kind").notNull(),
    actorPersonId: id("actor_person_id"),
    actorScope: ascii(60)("actor_scope"),
    subject: ascii(80)("subject").notNull(),
    libraryId: id("library_id"),
    detail: jsonOf<Record<string, unknown>>("detail").notNull(),
    result: text("result").notNull(),
    requestId: ascii(60)("request_id"),
    businessAt: at("business_at").notNull(),
    systemAt: at("system_at").notNull(),
  },
  (table) => [
    index("audit_log_subject").on(table.subject),
    index("audit_log_library").on(table.libraryId, table.systemAt),
    index("audit_log_verb").on(table.verb, table.systemAt),
  ],
);

export const settings = mysqlTable("settings", {
  name: ascii(80)("name").primaryKey(),
  value: jsonOf<unknown>("value").notNull(),
  note: varchar("note", { length: 300 }),
});
