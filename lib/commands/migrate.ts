import { existsSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { readMigrationFiles } from "drizzle-orm/migrator";
import { drizzle } from "drizzle-orm/mysql2";
import { migrate } from "drizzle-orm/mysql2/migrator";
import mysql, { type Connection, type RowDataPacket } from "mysql2/promise";

const NO_SUCH_GRANT = 1147;
const LOCK_WAIT_SECONDS = 600;
const MIGRATIONS_TABLE = "__drizzle_migrations";
const LOCK_TABLE = "migration_lock";
/** The application may look at these, and only look. */
const READ_ONLY_TABLES = [MIGRATIONS_TABLE, LOCK_TABLE];

const projectDir = fileURLToPath(new URL("../..", import.meta.url));
const migrationsFolder = join(projectDir, "db", "migrations");

export interface MigrateOptions {
  ownerUrl: string;
  /** The application's account, which gets its rights table by table; without it no rights are given. */
  appUrl?: string;
}

export interface Migrated {
  applied: number;
  tables: number;
  appendOnly: number;
}

/** A database that this code cannot bring up to date by itself; the message says what to do. */
export class NotMigratable extends Error {}

function connect(url: string): Promise<Connection> {
  return mysql.createConnection({ uri: url, supportBigNumbers: true, timezone: "Z" });
}

async function readApplied(connection: Connection): Promise<Set<string>> {
  const [tables] = await connection.query<RowDataPacket[]>("SHOW TABLES LIKE '\\_\\_drizzle\\_migrations'");
  if (tables.length === 0) return new Set();
  const [rows] = await connection.query<RowDataPacket[]>(`SELECT hash FROM ${MIGRATIONS_TABLE}`);
  return new Set(rows.map((row) => String(row.hash)));
}

/** drizzle compares dates only, so a migration whose statements were made anew would be skipped or run twice. */
function refuseRemade(applied: ReadonlySet<string>, known: ReadonlySet<string>): void {
  for (const hash of applied) {
    if (!known.has(hash)) {
      throw new NotMigratable(
        "This database was made from an earlier initial migration, which has since been made anew. " +
          "Remove .data/mariadb (its demo data go with it) and start again.",
      );
    }
  }
}

/** Statements that define tables are not undone, so a first migration that was cut off cannot be repeated over its own remains. */
function refuseUnfinished(applied: ReadonlySet<string>, tables: readonly string[]): void {
  const made = tables.filter((table) => !READ_ONLY_TABLES.includes(table));
  if (applied.size > 0 || made.length === 0) return;
  throw new NotMigratable(
    `The first migration of this database was cut off: it left ${made.length} tables and no record. ` +
      "Nothing can have been stored in them yet. Remove .data/mariadb and start again.",
  );
}

async function readTables(connection: Connection): Promise<string[]> {
  const [rows] = await connection.query<RowDataPacket[]>(
    "SELECT table_name AS name FROM information_schema.tables WHERE table_schema = DATABASE() AND table_type = 'BASE TABLE' ORDER BY table_name",
  );
  return rows.map((row) => String(row.name));
}

function readAppendOnly(): Set<string> {
  const path = join(projectDir, "db", "append-only.json");
  if (!existsSync(path)) return new Set();
  const names: unknown = JSON.parse(readFileSync(path, "utf8"));
  if (!Array.isArray(names) || names.some((name) => typeof name !== "string")) {
    throw new Error("db/append-only.json must be a list of table names");
  }
  return new Set(names as string[]);
}

/** The account as the server knows it, host part included; a URL does not say which host pattern matched. */
async function readAccount(appUrl: string): Promise<string> {
  const url = new URL(appUrl);
  url.pathname = "";
  const connection = await connect(url.href);
  try {
    const [rows] = await connection.query<RowDataPacket[]>("SELECT CURRENT_USER() AS account");
    const [user, host] = String(rows[0]?.account).split("@");
    return `${mysql.escape(user)}@${mysql.escape(host)}`;
  } finally {
    await connection.end();
  }
}

async function revokeIfGranted(
  owner: Connection,
  rights: string,
  table: string,
  account: string,
): Promise<void> {
  try {
    await owner.query(`REVOKE ${rights} ON ${mysql.escapeId(table)} FROM ${account}`);
  } catch (error) {
    if ((error as { errno?: number }).errno !== NO_SUCH_GRANT) throw error;
  }
}

async function grantRights(owner: Connection, account: string, tables: readonly string[]): Promise<number> {
  const appendOnly = readAppendOnly();
  const missing = [...appendOnly].filter((name) => !tables.includes(name));
  if (missing.length > 0)
    throw new Error(`db/append-only.json names tables that do not exist: ${missing.join(", ")}`);
  for (const table of tables) {
    const rights = READ_ONLY_TABLES.includes(table)
      ? ["SELECT"]
      : appendOnly.has(table)
        ? ["SELECT", "INSERT"]
        : ["SELECT", "INSERT", "UPDATE", "DELETE"];
    await owner.query(`GRANT ${rights.join(", ")} ON ${mysql.escapeId(table)} TO ${account}`);
    const withheld = ["INSERT", "UPDATE", "DELETE"].filter((right) => !rights.includes(right));
    if (withheld.length > 0) await revokeIfGranted(owner, withheld.join(", "), table, account);
  }
  return appendOnly.size;
}

/** Brings the owner's database up to date under a lock row, then gives the application its rights. */
export async function migrateDatabase({ ownerUrl, appUrl }: MigrateOptions): Promise<Migrated> {
  const lock = await connect(ownerUrl);
  const owner = await connect(ownerUrl);
  try {
    await lock.query(
      `CREATE TABLE IF NOT EXISTS ${LOCK_TABLE} (id TINYINT PRIMARY KEY, version BIGINT NOT NULL)`,
    );
    await lock.query(`INSERT IGNORE INTO ${LOCK_TABLE} (id, version) VALUES (1, 0)`);
    await lock.query(`SET SESSION innodb_lock_wait_timeout = ${LOCK_WAIT_SECONDS}`);
    await lock.beginTransaction();
    await lock.query(`SELECT version FROM ${LOCK_TABLE} WHERE id = 1 FOR UPDATE`);
    await lock.query(`UPDATE ${LOCK_TABLE} SET version = version + 1 WHERE id = 1`);

    const known = new Set(readMigrationFiles({ migrationsFolder }).map(({ hash }) => hash));
    const before = await readApplied(owner);
    refuseRemade(before, known);
    refuseUnfinished(before, await readTables(owner));
    await migrate(drizzle(owner), { migrationsFolder });
    const after = await readApplied(owner);
    const tables = await readTables(owner);
    const appendOnly = appUrl === undefined ? 0 : await grantRights(owner, await readAccount(appUrl), tables);
    await lock.commit();
    return { applied: after.size - before.size, tables: tables.length, appendOnly };
  } finally {
    await owner.end();
    await lock.end();
  }
}

async function main(): Promise<void> {
  const { DATABASE_OWNER_URL: ownerUrl, DATABASE_URL: appUrl } = process.env;
  if (ownerUrl === undefined)
    throw new Error("DATABASE_OWNER_URL is not set: migrations run with the owner's account");
  const { applied, tables, appendOnly } = await migrateDatabase({
    ownerUrl,
    ...(appUrl === undefined ? {} : { appUrl }),
  });
  console.log(
    `${applied === 0 ? "up to date" : `${applied} applied`}, ${tables} tables, ${appendOnly} of them append-only`,
  );
}

// A migration that is asked to stop finishes first: it takes seconds, and half of it cannot be undone.
if (process.argv[1] === fileURLToPath(import.meta.url)) {
  for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"]) process.on(signal, () => {});
  try {
    await main();
  } catch (error) {
    console.error(error instanceof NotMigratable ? error.message : error);
    process.exitCode = 1;
  }
}
