import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join, relative } from "node:path";
import { afterAll, expect, test } from "vitest";
import { needsDatabase, sortIntoSuites } from "@/lib/commands/start/suites.mjs";

const dir = mkdtempSync(join(tmpdir(), "suites-"));
afterAll(() => rmSync(dir, { recursive: true, force: true }));

function put(path: string, text = ""): void {
  mkdirSync(dirname(join(dir, path)), { recursive: true });
  writeFileSync(join(dir, path), text);
}

put("support/database.ts");
put("support/make.ts", 'import { db } from "./database";');
put("support/wave.ts", 'import { sine } from "@/lib/audio";');
put("ledger/split.test.ts", 'import { splitMoney } from "@/lib/ledger";');
put("ledger/post.test.ts", 'import { withDatabase } from "@/tests/support/database";');
put("review/finding.test.ts", 'import { makeCase } from "@/tests/support/make";');
put("audio/wave.test.ts", 'import { wave } from "@/tests/support/wave";');
put("architecture/doors.test.ts");
put("contract/mail.test.ts", 'import { withDatabase } from "@/tests/support/database";');
put("authorisation/matrix.test.ts", 'import { withDatabase } from "@/tests/support/database";');
put("e2e/buyer.test.ts");
put("ledger/notes.md");

test("a test belongs to its folder's suite, and otherwise to the one its imports ask for", () => {
  const sorted: Record<string, string[]> = sortIntoSuites(dir);
  const names = Object.fromEntries(
    Object.entries(sorted).map(([suite, paths]) => [suite, paths.map((path) => relative(dir, path))]),
  );
  expect(names).toEqual({
    architecture: ["architecture/doors.test.ts"],
    pure: ["audio/wave.test.ts", "ledger/split.test.ts"],
    database: ["ledger/post.test.ts", "review/finding.test.ts"],
    contract: ["contract/mail.test.ts"],
    authorisation: ["authorisation/matrix.test.ts"],
  });
});

test("a database is needed also when it is reached through another support module", () => {
  const support = join(dir, "support");
  expect(needsDatabase(join(dir, "review/finding.test.ts"), support)).toBe(true);
  expect(needsDatabase(join(dir, "audio/wave.test.ts"), support)).toBe(false);
});
