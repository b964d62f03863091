import { readFileSync } from "node:fs";

export const NOTHING = { passed: 0, failed: 0, skipped: 0 };

export function addCounts(a, b) {
  return { passed: a.passed + b.passed, failed: a.failed + b.failed, skipped: a.skipped + b.skipped };
}

/**
 * Counts from vitest's JSON report. A file that failed before any of its tests ran, and a run that ended
 * badly although every test passed (an unhandled rejection, say), count as a failure each.
 */
export function countVitest(report, exitCode) {
  const counts = {
    passed: report.numPassedTests,
    failed: report.numFailedTests,
    skipped: report.numPendingTests + report.numTodoTests,
  };
  for (const file of report.testResults) {
    const hasFailedTest = file.assertionResults.some((test) => test.status === "failed");
    if (file.status === "failed" && !hasFailedTest) counts.failed += 1;
  }
  if (exitCode !== 0 && counts.failed === 0) counts.failed = 1;
  return counts;
}

/** Counts from Playwright's JSON report. A test that passed only when repeated is a failure here. */
export function countPlaywright(report, exitCode) {
  const { expected, skipped, unexpected, flaky } = report.stats;
  const counts = { passed: expected, failed: unexpected + flaky + report.errors.length, skipped };
  if (exitCode !== 0 && counts.failed === 0) counts.failed = 1;
  return counts;
}

/** A runner that left no readable report did not run: one failure, never silence. */
export function countReport({ path, count, exitCode }) {
  try {
    return count(JSON.parse(readFileSync(path, "utf8")), exitCode);
  } catch (error) {
    if (error.code !== "ENOENT" && !(error instanceof SyntaxError)) throw error;
    return { ...NOTHING, failed: 1 };
  }
}

export function closingLine({ passed, failed, skipped }) {
  return `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ""}`;
}
