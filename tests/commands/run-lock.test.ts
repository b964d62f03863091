import { spawn } from "node:child_process";
import { once } from "node:events";
import { existsSync, mkdtempSync, readdirSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, expect, test } from "vitest";
import { describeProcess, isSameProcessAlive, readLock, takeLock } from "@/lib/commands/start/run-lock.mjs";

const dir = mkdtempSync(join(tmpdir(), "run-lock-"));
afterAll(() => rmSync(dir, { recursive: true, force: true }));

test("a lock held by a living process is not given twice, and its holder is named", () => {
  const path = join(dir, "held");
  const lock = takeLock(path);
  expect(takeLock(path).holder.pid).toBe(process.pid);
  lock.release();
  expect(existsSync(path)).toBe(false);
  takeLock(path).release();
});

test("a lock whose holder has gone is taken", async () => {
  const path = join(dir, "stale");
  const child = spawn(process.execPath, ["-e", "setInterval(() => {}, 1000)"], { stdio: "ignore" });
  await once(child, "spawn");
  const holder = describeProcess(child.pid);
  writeFileSync(path, JSON.stringify(holder));
  expect(takeLock(path).holder.pid).toBe(child.pid);
  child.kill("SIGKILL");
  await once(child, "exit");
  expect(takeLock(path).holder).toBeUndefined();
});

test("a process id that now belongs to another process does not hold the lock", () => {
  const path = join(dir, "reused");
  writeFileSync(path, JSON.stringify({ pid: process.pid, startedAt: "1" }));
  expect(takeLock(path).holder).toBeUndefined();
});

test("a damaged lock file is nobody's", () => {
  const path = join(dir, "damaged");
  writeFileSync(path, '{"pid": 1');
  expect(readLock(path)).toBeNull();
  expect(takeLock(path).holder).toBeUndefined();
});

test("of many processes that find a dead holder's lock at once exactly one gets it", async () => {
  const path = join(dir, "raced");
  writeFileSync(path, JSON.stringify({ pid: process.pid, startedAt: "1" }));
  const module = new URL("../../lib/commands/start/run-lock.mjs", import.meta.url).href;
  const script = `import(${JSON.stringify(module)}).then(({ takeLock }) => {
    process.stdout.write(takeLock(${JSON.stringify(path)}).holder === undefined ? "1" : "0");
    process.stdin.resume();
  });`;
  const children = Array.from({ length: 8 }, () =>
    spawn(process.execPath, ["-e", script], { stdio: ["pipe", "pipe", "inherit"] }),
  );
  const answers = await Promise.all(
    children.map(async (child) => String((await once(child.stdout, "data"))[0])),
  );
  for (const child of children) child.stdin.end();
  expect(answers.filter((answer) => answer === "1")).toHaveLength(1);
  expect(readdirSync(dir).filter((name) => name.startsWith("raced."))).toEqual([]);
});

test("this process is alive, one that never was is not", () => {
  expect(isSameProcessAlive(describeProcess(process.pid))).toBe(true);
  expect(isSameProcessAlive(describeProcess(2 ** 22 + 1))).toBe(false);
  expect(isSameProcessAlive(undefined)).toBe(false);
});
