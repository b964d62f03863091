import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, expect, test } from "vitest";
import {
  addCounts,
  closingLine,
  countPlaywright,
  countReport,
  countVitest,
} from "@/lib/commands/start/counts.mjs";

const dir = mkdtempSync(join(tmpdir(), "counts-"));
afterAll(() => rmSync(dir, { recursive: true, force: true }));

const file = (status: string, ...tests: string[]) => ({
  status,
  assertionResults: tests.map((test) => ({ status: test })),
});
const report = (passed: number, failed: number, pending: number, testResults: unknown[]) => ({
  numPassedTests: passed,
  numFailedTests: failed,
  numPendingTests: pending,
  numTodoTests: 0,
  testResults,
});

test("the closing line names passed and failed, and skipped only when there are any", () => {
  expect(closingLine({ passed: 12, failed: 0, skipped: 0 })).toBe("12 passed, 0 failed");
  expect(closingLine({ passed: 12, failed: 1, skipped: 3 })).toBe("12 passed, 1 failed, 3 skipped");
});

test("a vitest run counts its tests", () => {
  const run = report(2, 1, 1, [file("failed", "passed", "failed"), file("passed", "passed", "pending")]);
  expect(countVitest(run, 1)).toEqual({ passed: 2, failed: 1, skipped: 1 });
});

test("a test file that broke before its tests is one failure", () => {
  expect(countVitest(report(2, 0, 0, [file("failed"), file("passed", "passed", "passed")]), 1)).toEqual({
    passed: 2,
    failed: 1,
    skipped: 0,
  });
});

test("a run that ended badly with every test passed is a failure", () => {
  expect(countVitest(report(3, 0, 0, [file("passed", "passed", "passed", "passed")]), 1).failed).toBe(1);
});

test("a browser test that passed only when repeated is a failure", () => {
  const run = { stats: { expected: 4, skipped: 1, unexpected: 1, flaky: 2 }, errors: [] };
  expect(countPlaywright(run, 1)).toEqual({ passed: 4, failed: 3, skipped: 1 });
});

test("an error outside any browser test is a failure", () => {
  const run = {
    stats: { expected: 4, skipped: 0, unexpected: 0, flaky: 0 },
    errors: [{ message: "no config" }],
  };
  expect(countPlaywright(run, 1).failed).toBe(1);
});

test("a runner that left no report, or half of one, is a failure", () => {
  const half = join(dir, "half.json");
  writeFileSync(half, '{"numPassedTests": 3');
  for (const path of [join(dir, "absent.json"), half]) {
    expect(countReport({ path, count: countVitest, exitCode: 0 })).toEqual({
      passed: 0,
      failed: 1,
      skipped: 0,
    });
  }
});

test("counts of suites add up", () => {
  expect(addCounts({ passed: 1, failed: 2, skipped: 3 }, { passed: 10, failed: 20, skipped: 30 })).toEqual({
    passed: 11,
    failed: 22,
    skipped: 33,
  });
});
