import { existsSync, readdirSync, readFileSync } from "node:fs";
import { join, relative, resolve } from "node:path";

const TEST_FILE = /\.test\.tsx?$/;

export function listTestFiles(dir) {
  return readdirSync(dir, { withFileTypes: true })
    .flatMap((entry) => {
      const path = join(dir, entry.name);
      if (entry.isDirectory()) return listTestFiles(path);
      return TEST_FILE.test(entry.name) ? [path] : [];
    })
    .sort();
}

function supportImports(path, supportDir) {
  const text = readFileSync(path, "utf8");
  return [
    ...text.matchAll(
      /(?:from\s+|import\s*\(?\s*)"(?:@\/tests\/support\/|(?:\.\.?\/)+(?:support\/)?)([\w/-]+)"/g,
    ),
  ]
    .map((match) => join(supportDir, `${match[1]}.ts`))
    .filter((file) => existsSync(file));
}

/** Whether a test reaches `tests/support/database`, itself or through the other support modules it imports. */
export function needsDatabase(path, supportDir) {
  const database = join(supportDir, "database.ts");
  const seen = new Set();
  const waiting = [path];
  while (waiting.length > 0) {
    const current = waiting.pop();
    if (seen.has(current)) continue;
    seen.add(current);
    if (current === database) return true;
    waiting.push(...supportImports(current, supportDir));
  }
  return false;
}

export const SUITES = [
  { name: "architecture", title: "Architecture" },
  { name: "pure", title: "Pure rules, properties and engine" },
  { name: "database", title: "Verbs on MariaDB" },
  { name: "contract", title: "Contracts with the real SDKs" },
  { name: "authorisation", title: "Authorisation matrix" },
];

/** Files by suite. A folder of its own decides first; the rest is told apart by whether it needs a database. */
export function sortIntoSuites(testsDir) {
  const bySuite = Object.fromEntries(SUITES.map(({ name }) => [name, []]));
  for (const path of listTestFiles(testsDir)) {
    const file = relative(testsDir, path);
    const folder = file.split("/")[0];
    if (folder === "e2e") continue;
    const suite = ["architecture", "contract", "authorisation"].includes(folder)
      ? folder
      : needsDatabase(resolve(path), join(testsDir, "support"))
        ? "database"
        : "pure";
    bySuite[suite].push(path);
  }
  return bySuite;
}
