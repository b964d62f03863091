import { createHash } from "node:crypto";
import { existsSync, readdirSync, readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import mysql from "mysql2/promise";
import { afterAll, expect } from "vitest";
import { closeDb } from "@/db/client";

/*
 * Import this file first in a test that needs the database: the test file then has one of its own, built from the
 * migrations, with the product's own user (no DDL, append-only tables). Rows are kept between the tests of a file, so
 * every test makes its own with tests/support/make.ts.
 */
const root = fileURLToPath(new URL("../..", import.meta.url));
const migrations = `${root}db/migrations`;
const APP = { name: "sedgewren_test_app", password: "app-user-of-the-test-databases" };

function adminUrl(): URL {
  const fromFile = () => {
    const file = `${root}.data/test/env`;
    const line = existsSync(file)
      ? readFileSync(file, "utf8").match(/^TEST_DATABASE_ADMIN_URL=(.+)$/m)
      : null;
    return line?.[1];
  };
  const url = process.env.TEST_DATABASE_ADMIN_URL ?? fromFile();
  if (!url)
    throw new Error(
      "No test database: run `npm test`, or `node lib/commands/test.mjs --serve` beside vitest.",
    );
  return new URL(url);
}

function statements(): string[] {
  return readdirSync(migrations)
    .filter((name) => name.endsWith(".sql"))
    .sort()
    .flatMap((name) => readFileSync(`${migrations}/${name}`, "utf8").split("--> statement-breakpoint"))
    .map((statement) => statement.trim())
    .filter(Boolean);
}

async function prepare(): Promise<string> {
  const url = adminUrl();
  const sql = statements();
  const file = expect.getState().testPath ?? "";
  const hash = createHash("sha256")
    .update(`${file};${sql.join(";")}`)
    .digest("hex")
    .slice(0, 12);
  const name = `sedgewren_test_${process.ppid}_${process.env.VITEST_POOL_ID ?? "0"}_${hash}`;
  const admin = await mysql.createConnection({ uri: url.href, multipleStatements: false });
  try {
    const [found] = await admin.query<mysql.RowDataPacket[]>(
      "select 1 from information_schema.tables where table_schema = ? and table_name = 'sw_ready'",
      [name],
    );
    if (found.length === 0) {
      await admin.query(`drop database if exists \`${name}\``);
      await admin.query(`create database \`${name}\` character set utf8mb4 collate utf8mb4_unicode_ci`);
      await admin.changeUser({ database: name });
      for (const statement of sql) await admin.query(statement);
      await grant(admin, name);
      await admin.query("create table sw_ready (id int primary key)");
    }
  } finally {
    await admin.end();
  }
  return `mysql://${APP.name}:${APP.password}@${url.host}/${name}`;
}

async function grant(admin: mysql.Connection, name: string): Promise<void> {
  const appendOnly = new Set(JSON.parse(readFileSync(`${root}db/append-only.json`, "utf8")) as string[]);
  await admin.query(`create user if not exists '${APP.name}'@'%' identified by '${APP.password}'`);
  const [tables] = await admin.query<mysql.RowDataPacket[]>(
    "select table_name as name from information_schema.tables where table_schema = ?",
    [name],
  );
  for (const table of tables) {
    const rights = appendOnly.has(table.name) ? "select, insert" : "select, insert, update, delete";
    await admin.query(`grant ${rights} on \`${name}\`.\`${table.name}\` to '${APP.name}'@'%'`);
  }
}

const TEST_ENVIRONMENT: Record<string, string> = {
  SEDGEWREN_MODE: "demo",
  SITE_URL: "http://127.0.0.1:3400",
  NEXTAUTH_SECRET: "a-secret-for-tests-that-is-long-enough",
  UPLOADTHING_TOKEN: Buffer.from(
    JSON.stringify({ apiKey: "sk_live_test", appId: "test", regions: ["lo1"] }),
  ).toString("base64"),
  STRIPE_SECRET_KEY: "sk_test_of_tests",
  STRIPE_WEBHOOK_SECRET: "whsec_of_tests",
  RESEND_API_KEY: "re_of_tests",
  MAIL_FROM: "Sedgewren <post@sedgewren.example>",
  RECORD_SIGNING_SEED: "9d61b19deffd5a60ba844af492ec2cc44449c5697b326919703bac031cae7f60",
  FIELD_KEY: "00112233445566778899aabbccddeeff00112233445566778899aabbccddeeff",
  BUSINESS_CLOCK_START: "2026-05-18T09:00:00Z",
  BUSINESS_CLOCK_ANCHOR: new Date().toISOString(),
};

for (const [name, value] of Object.entries(TEST_ENVIRONMENT)) process.env[name] ??= value;
process.env.DATABASE_URL = await prepare();

afterAll(closeDb);
