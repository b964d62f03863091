import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import mysql, { type Connection, type RowDataPacket } from "mysql2/promise";
import { afterAll, beforeAll, expect, test } from "vitest";
import { migrateDatabase, NotMigratable } from "@/lib/commands/migrate";
import { APP, databaseUrl, findRunning, OWNER, startMariadb } from "@/lib/commands/start/mariadb.mjs";
import { makeSecrets } from "@/lib/commands/start/secrets.mjs";

// A path with a space in it, as a person's own folder may have.
const root = mkdtempSync(join(tmpdir(), "own mariadb "));
const dir = join(root, "mariadb");
const secrets = makeSecrets();
let server: { port: number; pid: number; stop(): Promise<void>; kill(): Promise<void> };

const start = () =>
  startMariadb({ dir, wantedPort: 20_000 + (process.pid % 20_000), passwords: secrets, isForTests: true });
const ownerUrl = (): string =>
  databaseUrl({ user: OWNER, password: secrets.ownerPassword, port: server.port });
const appUrl = (): string => databaseUrl({ user: APP, password: secrets.appPassword, port: server.port });

async function using<T>(url: string, body: (connection: Connection) => Promise<T>): Promise<T> {
  const connection = await mysql.createConnection(url);
  try {
    return await body(connection);
  } finally {
    await connection.end();
  }
}

const errnoOf = (url: string, sql: string): Promise<number> =>
  using(url, (connection) =>
    connection.query(sql).then(
      () => 0,
      (error: { errno: number }) => error.errno,
    ),
  );

const appendOnly = JSON.parse(
  readFileSync(new URL("../../db/append-only.json", import.meta.url), "utf8"),
) as string[];
const DENIED = 1142;

beforeAll(async () => {
  server = await start();
});

afterAll(async () => {
  await server.stop();
  expect(findRunning(dir)).toBeNull();
  rmSync(root, { recursive: true, force: true });
});

test("two migrations at once: each statement runs once, and both end well", async () => {
  const options = { ownerUrl: ownerUrl(), appUrl: appUrl() };
  const [first, second] = await Promise.all([migrateDatabase(options), migrateDatabase(options)]);
  expect(Math.min(first.applied, second.applied)).toBe(0);
  expect(first.applied + second.applied).toBeGreaterThan(0);
  expect(first.tables).toBe(second.tables);
});

test("the application may add to the journal, audit and records and change nothing in them", async () => {
  expect(appendOnly).toEqual(
    expect.arrayContaining(["audit_log", "ledger_entries", "ledger_transfers", "licence_records"]),
  );
  for (const table of appendOnly) {
    expect(await errnoOf(appUrl(), `SELECT 1 FROM ${table} LIMIT 1`)).toBe(0);
    expect(await errnoOf(appUrl(), `DELETE FROM ${table}`)).toBe(DENIED);
    const [column] = await using(
      appUrl(),
      async (connection) => (await connection.query<RowDataPacket[]>(`SHOW COLUMNS FROM ${table}`))[0],
    );
    expect(await errnoOf(appUrl(), `UPDATE ${table} SET ${column?.Field} = ${column?.Field}`)).toBe(DENIED);
  }
});

test("the application defines nothing", async () => {
  for (const sql of [
    "CREATE TABLE mine (a INT)",
    "DROP TABLE audit_log",
    "ALTER TABLE people ADD mine INT",
    "TRUNCATE TABLE people",
  ]) {
    expect(await errnoOf(appUrl(), sql)).toBe(DENIED);
  }
});

test("what the application stores elsewhere it may change", async () => {
  expect(await errnoOf(appUrl(), "INSERT INTO settings (name, value) VALUES ('kept', '1')")).toBe(0);
  expect(await errnoOf(appUrl(), "UPDATE settings SET value = '2' WHERE name = 'kept'")).toBe(0);
});

test("the session is UTC and READ COMMITTED without being asked", async () => {
  const [rows] = await using(appUrl(), (connection) =>
    connection.query<RowDataPacket[]>(
      "SELECT @@time_zone AS zone, @@tx_isolation AS isolation, @@local_infile AS loads",
    ),
  );
  expect(rows[0]).toMatchObject({ zone: "+00:00", isolation: "READ-COMMITTED", loads: 0 });
});

test("a killed server comes back on its port with what was committed", async () => {
  const { port } = server;
  await server.kill();
  server = await startMariadb({ dir, wantedPort: port, passwords: secrets, isForTests: true });
  expect(server.port).toBe(port);
  const [rows] = await using(appUrl(), (connection) =>
    connection.query<RowDataPacket[]>("SELECT value FROM settings WHERE name = 'kept'"),
  );
  expect(rows).toHaveLength(1);
});

test("where the port is taken the server takes another", async () => {
  const other = await startMariadb({
    dir: join(root, "other"),
    wantedPort: server.port,
    passwords: makeSecrets(),
    isForTests: true,
  });
  try {
    expect(other.port).toBeGreaterThan(server.port);
  } finally {
    await other.stop();
  }
});

test("a database made from another initial migration is refused with what to do", async () => {
  await using(ownerUrl(), (connection) =>
    connection.query("UPDATE __drizzle_migrations SET hash = REVERSE(hash)"),
  );
  await expect(migrateDatabase({ ownerUrl: ownerUrl() })).rejects.toThrow("Remove .data/mariadb");
});

test("a first migration that was cut off is refused with what to do", async () => {
  await using(ownerUrl(), (connection) => connection.query("DELETE FROM __drizzle_migrations"));
  await expect(migrateDatabase({ ownerUrl: ownerUrl() })).rejects.toThrow(NotMigratable);
});
