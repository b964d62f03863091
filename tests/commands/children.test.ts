import { mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, afterEach, expect, test, vi } from "vitest";
import { runToEnd, startChild, stopChild } from "@/lib/commands/start/children.mjs";
import { startedAt } from "@/lib/commands/start/run-lock.mjs";
import { endLeftovers, Supervisor } from "@/lib/commands/start/supervise.mjs";

const dir = mkdtempSync(join(tmpdir(), "children-"));
const supervisors: { stop(): Promise<void> }[] = [];

// Prints the id of a grandchild that would live for a minute and ignores a polite end.
const PARENT = `
  const { spawn } = require("node:child_process");
  const child = spawn(process.execPath, ["-e", "process.on('SIGTERM', () => {}); console.log(process.pid); setTimeout(() => {}, 60000)"], { stdio: ["ignore", "inherit", "ignore"] });
  setTimeout(() => {}, 60000);
`;

function startNode(name: string, script: string) {
  return startChild({
    name,
    command: process.execPath,
    args: ["-e", script],
    cwd: dir,
    env: { PATH: process.env.PATH },
    output: join(dir, `${name}.log`),
  });
}

const isAlive = (pid: number): boolean =>
  startedAt(pid) !== null && !/\) Z /.test(readFileSync(`/proc/${pid}/stat`, "utf8"));
const numbersIn = (name: string): number[] =>
  readFileSync(join(dir, `${name}.log`), "utf8")
    .split("\n")
    .filter(Boolean)
    .map(Number);
const wait = { timeout: 20_000, interval: 20 };

afterEach(async () => {
  for (const supervisor of supervisors.splice(0)) await supervisor.stop();
});
afterAll(() => rmSync(dir, { recursive: true, force: true }));

test("ending a child ends what it started, politely or not", async () => {
  const child = startNode("family", PARENT);
  await vi.waitFor(() => expect(numbersIn("family")).toHaveLength(1), wait);
  const [grandchild] = numbersIn("family");
  await stopChild(child, { graceMs: 200 });
  expect(child.isRunning()).toBe(false);
  await vi.waitFor(() => expect(isAlive(grandchild!)).toBe(false), wait);
});

test("a program's lines and its exit code are handed on", async () => {
  const lines: string[] = [];
  const script =
    "process.stdout.write('one\\ntw'); process.stdout.write('o\\n'); process.stderr.write('three'); process.exitCode = 7";
  const { code } = await runToEnd({
    command: process.execPath,
    args: ["-e", script],
    cwd: dir,
    env: { PATH: process.env.PATH },
    onLine: (line: string) => lines.push(line),
  });
  expect(code).toBe(7);
  expect(lines.sort()).toEqual(["one", "three", "two"]);
});

test("a child that is killed is started again; one that is stopped is not", async () => {
  const supervisor = new Supervisor({ recordPath: join(dir, "record"), onGivenUp: () => {} });
  supervisors.push(supervisor);
  const first = supervisor.run("kept", () =>
    startNode("kept", "console.log(process.pid); setTimeout(() => {}, 60000)"),
  );
  await vi.waitFor(() => expect(numbersIn("kept")).toHaveLength(1), wait);
  process.kill(first.pid, "SIGKILL");
  await vi.waitFor(() => expect(numbersIn("kept")).toHaveLength(2), wait);
  const second = numbersIn("kept")[1]!;
  expect(isAlive(second)).toBe(true);
  await supervisor.stop();
  expect(isAlive(second)).toBe(false);
  expect(JSON.parse(readFileSync(join(dir, "record"), "utf8"))).toEqual([]);
});

test("what a killed start left running is ended by the next, and nothing else is", async () => {
  const left = startNode("left", "setTimeout(() => {}, 60000)");
  const other = startNode("other", "setTimeout(() => {}, 60000)");
  const record = join(dir, "left-record");
  writeFileSync(
    record,
    JSON.stringify([
      { name: "site", pid: left.pid, startedAt: startedAt(left.pid) },
      { name: "worker", pid: other.pid, startedAt: "1" },
    ]),
  );
  expect(await endLeftovers(record)).toEqual(["site"]);
  await vi.waitFor(() => expect(left.isRunning()).toBe(false), wait);
  expect(other.isRunning()).toBe(true);
  await stopChild(other);
});
