import { boolean, index, int, mysqlTable, uniqueIndex, varchar } from "drizzle-orm/mysql-core";
import { ascii, at, id, jsonOf } from "@/db/columns";

export const people = mysqlTable("people", {
  id: id("id").primaryKey(),
  /** Lower case; compared without accents or case by the default collation. */
  email: varchar("email", { length: 254 }).notNull().unique("people_email"),
  name: varchar("name", { length: 200 }).notNull(),
  passwordHash: ascii(255)("password_hash"),
  /** Encrypted with FIELD_KEY; null until a second factor is set up. */
  totpSecret: ascii(255)("totp_secret"),
  /** A second factor being set up; it takes the place of the one in use when its first code is given. */
  totpPendingSecret: ascii(255)("totp_pending_secret"),
  totpConfirmedAt: at("totp_confirmed_at"),
  /** Last accepted 30-second step: a code works once. */
  totpLastStep: int("totp_last_step"),
  emailVerifiedAt: at("email_verified_at"),
  /** Last sign-in by an e-mailed link: shortly after it a new password may be set without the old one. */
  linkUsedAt: at("link_used_at"),
  /** Raised by sign-out everywhere: older session tokens stop working. */
  sessionVersion: int("session_version").notNull().default(1),
  disabledAt: at("disabled_at"),
  timeZone: ascii(60)("time_zone").notNull().default("Etc/UTC"),
  demo: boolean("demo").notNull().default(false),
  createdAt: at("created_at").notNull(),
});

export const memberships = mysqlTable(
  "memberships",
  {
    id: id("id").primaryKey(),
    personId: id("person_id").notNull(),
    role: ascii(20)("role").notNull(),
    /** Null for the marketplace's own moderators and accountants, and for admins and buyers. */
    libraryId: id("library_id"),
    companyId: id("company_id"),
    /** Name of the library or company when the role was given, so that a role can be named without asking another room. */
    scopeName: varchar("scope_name", { length: 200 }).notNull(),
    mayApprove: boolean("may_approve").notNull().default(false),
    granted: jsonOf<string[]>("granted").notNull(),
    /** From then on the role is gone: an auditor's stated time, or the moment a role was ended. */
    endsAt: at("ends_at"),
    lastUsedAt: at("last_used_at"),
    createdAt: at("created_at").notNull(),
  },
  (table) => [
    index("memberships_person").on(table.personId),
    index("memberships_library").on(table.libraryId, table.role),
  ],
);

export const companies = mysqlTable("companies", {
  id: id("id").primaryKey(),
  name: varchar("name", { length: 200 }).notNull(),
  address: varchar("address", { length: 500 }).notNull(),
  countryCode: ascii(2)("country_code").notNull(),
  taxNumber: ascii(30)("tax_number"),
  version: int("version").notNull().default(1),
  createdAt: at("created_at").notNull(),
});

export const invitations = mysqlTable("invitations", {
  id: id("id").primaryKey(),
  email: varchar("email", { length: 254 }).notNull(),
  name: varchar("name", { length: 200 }).notNull(),
  role: ascii(20)("role").notNull(),
  libraryId: id("library_id"),
  companyId: id("company_id"),
  scopeName: varchar("scope_name", { length: 200 }).notNull(),
  mayApprove: boolean("may_approve").notNull().default(false),
  granted: jsonOf<string[]>("granted").notNull(),
  endsAt: at("ends_at"),
  tokenHash: ascii(64)("token_hash").notNull().unique("invitations_token"),
  invitedBy: id("invited_by").notNull(),
  expiresAt: at("expires_at").notNull(),
  acceptedAt: at("accepted_at"),
  createdAt: at("created_at").notNull(),
});

/** The roster: a writer's name and IPI as the library has confirmed them. */
export const confirmedNames = mysqlTable(
  "confirmed_names",
  {
    id: id("id").primaryKey(),
    libraryId: id("library_id").notNull(),
    personId: id("person_id").notNull(),
    legalName: varchar("legal_name", { length: 200 }).notNull(),
    creditName: varchar("credit_name", { length: 200 }).notNull(),
    ipi: ascii(11)("ipi"),
    society: varchar("society", { length: 60 }),
    confirmedBy: id("confirmed_by").notNull(),
    confirmedAt: at("confirmed_at").notNull(),
  },
  (table) => [
    uniqueIndex("confirmed_names_once").on(table.libraryId, table.personId),
    uniqueIndex("confirmed_names_ipi").on(table.libraryId, table.ipi),
  ],
);

export const signInLinks = mysqlTable("sign_in_links", {
  tokenHash: ascii(64)("token_hash").primaryKey(),
  email: varchar("email", { length: 254 }).notNull(),
  expiresAt: at("expires_at").notNull(),
});

export const signInAttempts = mysqlTable("sign_in_attempts", {
  /** Keyed hash of an account, an address or both together: what is slowed, not who it is. */
  subjectHash: ascii(64)("subject_hash").primaryKey(),
  windowStart: at("window_start").notNull(),
  attempts: int("attempts").notNull(),
  /** No attempt before this moment; attempts at the same time are given one moment after the other. */
  nextAt: at("next_at").notNull(),
});
