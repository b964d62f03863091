/*
 * Before the first release there is one initial migration: it is made anew from db/schema whenever the
 * schema changes, and a database made from an older one is dropped. From the first release on, migrations
 * are added and never made anew, and this command goes.
 */
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync, writeFileSync } from "node:fs";
import { join, relative } from "node:path";
import { runToEnd } from "./start/children.mjs";
import { joinStatements } from "./start/handwritten.mjs";
import { makeDataDir, projectDir } from "./start/paths.mjs";
import { Stop, say, stage } from "./start/progress.mjs";
import { takeLock } from "./start/run-lock.mjs";

const LOCK_WAIT_MS = 120_000;
const target = join(projectDir, "db", "migrations");
const handwritten = join(projectDir, "db", "handwritten");

async function drizzleKit(args) {
  const lines = [];
  const { code } = await runToEnd({
    command: process.execPath,
    // tsx resolves the project's import alias, which drizzle-kit's own loader does not know.
    args: ["--import", "tsx", join(projectDir, "node_modules/drizzle-kit/bin.cjs"), ...args],
    cwd: projectDir,
    env: process.env,
    onLine: (line) => lines.push(line),
  });
  if (code !== 0 || lines.some((line) => /^\s*(Error|error)\b/.test(line))) {
    throw new Stop(`drizzle-kit ${args[0]} ended with ${code}:\n${lines.slice(-30).join("\n")}`);
  }
}

async function waitForLock(path) {
  const deadlineMs = performance.now() + LOCK_WAIT_MS;
  for (;;) {
    const lock = takeLock(path);
    if (lock.holder === undefined) return lock;
    if (performance.now() > deadlineMs)
      throw new Stop(`Process ${lock.holder.pid} has been making the migration for two minutes.`);
    await new Promise((resolve) => setTimeout(resolve, 250));
  }
}

const sqlFiles = (dir) =>
  existsSync(dir)
    ? readdirSync(dir)
        .filter((name) => name.endsWith(".sql"))
        .sort()
    : [];

async function generateInto(out) {
  const common = ["--dialect", "mysql", "--schema", "./db/schema", "--out", relative(projectDir, out)];
  await drizzleKit(["generate", ...common, "--name", "init"]);
  const texts = sqlFiles(handwritten).map((name) => readFileSync(join(handwritten, name), "utf8"));
  if (texts.length === 0) return;
  await drizzleKit(["generate", ...common, "--custom", "--name", "handwritten"]);
  const file = sqlFiles(out).find((name) => name.endsWith("_handwritten.sql"));
  if (file === undefined) throw new Stop("drizzle-kit wrote no file for the hand-written statements.");
  writeFileSync(join(out, file), joinStatements(texts));
}

function hasSameStatements(a, b) {
  const names = sqlFiles(a);
  if (names.join() !== sqlFiles(b).join()) return false;
  return names.every((name) => readFileSync(join(a, name), "utf8") === readFileSync(join(b, name), "utf8"));
}

async function generate() {
  const lock = await waitForLock(join(makeDataDir(), "migration.lock"));
  const draft = join(makeDataDir(), `migrations-${process.pid}`);
  try {
    rmSync(draft, { recursive: true, force: true });
    mkdirSync(draft);
    await generateInto(draft);
    if (hasSameStatements(draft, target)) return "the statements are unchanged; nothing written";
    const old = `${draft}-old`;
    if (existsSync(target)) renameSync(target, old);
    renameSync(draft, target);
    rmSync(old, { recursive: true, force: true });
    return `${sqlFiles(target).join(", ")} written to db/migrations`;
  } finally {
    rmSync(draft, { recursive: true, force: true });
    lock.release();
  }
}

try {
  await stage("Migration from db/schema and db/handwritten", generate);
} catch (error) {
  say(error instanceof Stop ? error.message : error.stack);
  process.exitCode = 1;
}
