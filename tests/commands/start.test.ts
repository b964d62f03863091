import { expect, test } from "vitest";
import { demoEnvironment, USUAL_PORTS } from "@/lib/commands/start/environment.mjs";
import { joinStatements } from "@/lib/commands/start/handwritten.mjs";
import { accountsSql, serverConfig } from "@/lib/commands/start/mariadb.mjs";
import { makeSecrets, TEST_MAKERS } from "@/lib/commands/start/secrets.mjs";
import { parseSeedLine } from "@/lib/commands/start/stack.mjs";
import { parseEnvironment } from "@/lib/kernel/env";

const options = {
  dir: "/d",
  port: 3307,
  socket: "/d/s",
  account: null,
  bufferPool: "256M",
  isForTests: false,
};

test("the environment that a start assembles is the one that the product parses", () => {
  const values = demoEnvironment({ ports: USUAL_PORTS, secrets: makeSecrets(), mediaDir: "/m" });
  const parsed = parseEnvironment(values);
  expect(parsed.SEDGEWREN_MODE).toBe("demo");
  expect(parsed.UPLOADTHING_UFS_HOST).toBe("localhost:3410");
  expect(() => parseEnvironment({ ...values, SEDGEWREN_MODE: "live" })).toThrow("stand-in");
});

test("secrets are made once: what is kept stays, what is missing is made", () => {
  const first = makeSecrets();
  expect(makeSecrets(first)).toEqual(first);
  const { fieldKey: _removed, ...rest } = first;
  const second = makeSecrets(rest);
  expect(second.recordSigningSeed).toBe(first.recordSigningSeed);
  expect(second.fieldKey).not.toBe(first.fieldKey);
});

test("no two starts share a secret", () => {
  const { businessClockAnchor: _a, ...first } = makeSecrets();
  const { businessClockAnchor: _b, ...second } = makeSecrets();
  for (const [name, value] of Object.entries(first)) expect(second[name]).not.toBe(value);
});

test("the server listens on loopback only, in UTC, at READ COMMITTED, without LOAD DATA LOCAL", () => {
  const lines: string[] = serverConfig(options).split("\n");
  for (const line of [
    "bind-address=127.0.0.1",
    "default-time-zone='+00:00'",
    "transaction-isolation=READ-COMMITTED",
    "local-infile=0",
  ]) {
    expect(lines).toContain(line);
  }
  expect(lines).toContain("innodb_flush_log_at_trx_commit=1");
});

test("only the server of the tests has an administrator", () => {
  expect(accountsSql(makeSecrets())).not.toContain("admin");
  expect(accountsSql(makeSecrets({}, TEST_MAKERS))).toContain("sedgewren_test_admin");
});

test("the application's account gets no right with its making", () => {
  const grants: string[] = accountsSql(makeSecrets())
    .split("\n")
    .filter((line: string) => line.startsWith("GRANT"));
  expect(grants.length).toBeGreaterThan(0);
  for (const grant of grants) expect(grant).not.toContain("sedgewren_app");
});

test("hand-written statements are joined by drizzle's breakpoint and leave no empty statement", () => {
  expect(
    joinStatements(["A;\n--> statement-breakpoint\nB;\n--> statement-breakpoint\n", "\nC;\n", " "]),
  ).toBe("A;\n--> statement-breakpoint\nB;\n--> statement-breakpoint\nC;\n");
});

test("of the seed's output only its list of sign-ins is read as data", () => {
  expect(parseSeedLine("Cue 4: rendering")).toBeNull();
  expect(parseSeedLine('{"level":30,"msg":"hello"}')).toBeNull();
  expect(parseSeedLine("{broken")).toBeNull();
  const signIns = [{ role: "owner", name: "N", email: "e", password: "p" }];
  expect(parseSeedLine(JSON.stringify({ signIns }))).toEqual({ signIns });
});
