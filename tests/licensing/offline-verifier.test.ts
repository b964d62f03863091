import { spawnSync } from "node:child_process";
import { copyFileSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { inForceOn } from "@/lib/licensing/record/in-force";
import { STATUS_KINDS } from "@/lib/licensing/record/schema";
import { signStatus } from "@/lib/licensing/record/sign-record";
import { verifyRecord } from "@/lib/licensing/record/verify-record";
import { inventedFile, KEY, KEYS, statusLines } from "./invented-record";

const VERIFIER = fileURLToPath(new URL("../../public/verify/sedgewren-verify.mjs", import.meta.url));
type Json = null | boolean | number | string | Json[] | { [name: string]: Json };

let folder = "";
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), "verify-"));
  copyFileSync(VERIFIER, join(folder, "sedgewren-verify.mjs"));
  writeFileSync(join(folder, "keys.json"), JSON.stringify(KEYS));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

function run(text: string, ...options: string[]) {
  writeFileSync(join(folder, "record.json"), text);
  const args = ["sedgewren-verify.mjs", "record.json", "keys.json", ...options];
  const { status, stdout, stderr } = spawnSync(process.execPath, args, {
    cwd: folder,
    encoding: "utf8",
    env: { ...process.env, TZ: "Pacific/Auckland" },
  });
  return { status, stdout, stderr };
}

const answer = (text: string) => {
  const { inForce, ...result } = JSON.parse(run(text, "--json", "--on", "2026-03-20").stdout);
  return { result, inForce };
};

const other = (value: null | boolean | number | string): Json =>
  value === null
    ? "x"
    : typeof value === "boolean"
      ? !value
      : typeof value === "number"
        ? value + 1
        : // Change the last character within its own kind, so that dates and hashes keep their shape.
          value.slice(0, -1) + (value.endsWith("0") ? "1" : "0");

/** Every copy of `value` with exactly one thing changed, and the path to it. */
function* changed(value: Json, path = ""): Generator<[path: string, copy: Json]> {
  if (Array.isArray(value)) {
    yield [`${path}[+]`, [...value, "added"]];
    for (const [i, item] of value.entries())
      for (const [at, copy] of changed(item, `${path}[${i}]`)) yield [at, value.with(i, copy)];
  } else if (value && typeof value === "object") {
    yield [`${path}.+`, { ...value, added: "added" }];
    for (const [name, item] of Object.entries(value))
      for (const [at, copy] of changed(item, `${path}.${name}`)) yield [at, { ...value, [name]: copy }];
  } else {
    yield [path, other(value)];
  }
}

/** Every copy with one name removed. */
function* without(value: Json, path = ""): Generator<[path: string, copy: Json]> {
  if (!value || typeof value !== "object" || Array.isArray(value)) return;
  for (const [name, item] of Object.entries(value)) {
    const { [name]: _, ...rest } = value;
    yield [`${path}.${name}`, rest];
    for (const [at, copy] of without(item, `${path}.${name}`)) yield [at, { ...value, [name]: copy }];
  }
}

const file = JSON.parse(JSON.stringify(inventedFile())) as { [name: string]: Json };

describe("the offline verifier", () => {
  it("runs in a folder that holds nothing but itself, a file and the keys", () => {
    const { status, stdout, stderr } = run(JSON.stringify(file), "--on", "2026-03-20");
    expect(readdirSync(folder).sort()).toEqual(["keys.json", "record.json", "sedgewren-verify.mjs"]);
    expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
    expect(stdout.split("\n").slice(0, 3)).toEqual([
      "Genuine record. In force on 20 March 2026. Since 11 May 2026 a rights question is open.",
      "Licence LR-2026-0103-C",
      "Status history as of 2026-05-18T09:00:00.000Z:",
    ]);
  });

  it("every field changed, added to or taken away in turn is altered for the library's check", () => {
    const cases = [...changed(file), ...without(file)];
    const notAltered = cases
      .filter(([, copy]) => verifyRecord(JSON.stringify(copy), KEYS).verdict !== "altered")
      .map(([path]) => path);
    expect(cases.length).toBeGreaterThan(400);
    // A withheld value is no alteration, and a file without its record or seal is not one of ours.
    expect(notAltered.sort()).toEqual(
      [
        ...Object.keys(file.disclosed as object).map((field) => `.disclosed.${field}`),
        ".record",
        ".seal",
      ].sort(),
    );
  });

  it("gives the library's answer on its own, for every changed field", () => {
    // One process for all of them: the file is the same text, imported with other arguments each time.
    const cases = [...changed(file), ...without(file)].map(([, copy]) => JSON.stringify(copy));
    writeFileSync(join(folder, "cases.json"), JSON.stringify(cases));
    const driver = `
      import { readFileSync, writeFileSync } from "node:fs";
      const cases = JSON.parse(readFileSync("cases.json", "utf8"));
      const answers = [];
      const write = process.stdout.write;
      for (const [i, text] of cases.entries()) {
        writeFileSync("case.json", text);
        process.argv = ["node", "verify", "case.json", "keys.json", "--json", "--on", "2026-03-20"];
        process.stdout.write = (line) => answers.push(JSON.parse(line));
        await import("./sedgewren-verify.mjs?" + i);
      }
      process.stdout.write = write;
      writeFileSync("answers.json", JSON.stringify(answers));
      process.exitCode = 0;`;
    const { status, stderr } = spawnSync(process.execPath, ["--input-type=module", "-e", driver], {
      cwd: folder,
      encoding: "utf8",
    });
    expect({ status, stderr }).toEqual({ status: 0, stderr: "" });
    const answers = JSON.parse(readFileSync(join(folder, "answers.json"), "utf8"));
    expect(answers).toHaveLength(cases.length);
    for (const [i, text] of cases.entries()) {
      const { inForce, ...result } = answers[i];
      expect(result).toEqual(verifyRecord(text, KEYS));
      expect(inForce === null).toBe(result.verdict !== "genuine");
    }
    for (const name of ["cases.json", "case.json", "answers.json"]) rmSync(join(folder, name));
  });

  it("one price digit changed: altered, with the part, and exit code 1", () => {
    const { status, stdout } = run(JSON.stringify(file).replace("1536.00", "1586.00"));
    expect({ status, first: stdout.split("\n")[0] }).toEqual({
      status: 1,
      first: "Altered. Does not verify: fee details.",
    });
  });

  it("a stranger's file is unknown, with exit code 2", () => {
    const { status, stdout } = run("{}");
    expect({ status, stdout }).toEqual({
      status: 2,
      stdout: "Unknown: this is not a licence file of Sedgewren.\n",
    });
    const repeated = JSON.stringify(file).replace('"origin":', '"origin":"x","origin":');
    expect(answer(repeated).result).toEqual(verifyRecord(repeated, KEYS));
    const halfCharacter = JSON.stringify(file).replace("Tide Tables", "\\ud800");
    expect(answer(halfCharacter).result).toEqual(verifyRecord(halfCharacter, KEYS));
    expect(answer(halfCharacter).result).toMatchObject({ verdict: "altered", failing: ["production.title"] });
  });

  it("takes a key's validity and a missing key as the library does", () => {
    const text = JSON.stringify(file);
    const lists = [
      KEYS.keys.slice(0, 1),
      KEYS.keys.slice(1),
      KEYS.keys.map((key) => ({ ...key, validUntil: "2026-05-01T00:00:00.000Z" })),
      KEYS.keys.map((key) => ({ ...key, validFrom: "2026-03-01T00:00:00.000Z" })),
      [...KEYS.keys, KEYS.keys[0]!],
    ];
    const verdicts = lists.map((keys) => {
      writeFileSync(join(folder, "keys.json"), JSON.stringify({ ...KEYS, keys }));
      const { result } = answer(text);
      expect(result).toEqual(verifyRecord(text, { ...KEYS, keys }));
      return result.verdict;
    });
    writeFileSync(join(folder, "keys.json"), JSON.stringify(KEYS));
    expect(verdicts).toEqual(["genuine", "unknown", "altered", "altered", "altered"]);
  });

  it("wrong use is told, with exit code 64", () => {
    expect(run("{}", "--on", "20.3.2026")).toMatchObject({
      status: 64,
      stderr: expect.stringContaining("--on needs a date"),
    });
    const { status } = spawnSync(process.execPath, ["sedgewren-verify.mjs", "missing.json", "keys.json"], {
      cwd: folder,
    });
    expect(status).toBe(64);
  });

  it("answers for a date as the library does, whatever the history", () => {
    const original = inventedFile();
    for (const [i, kind] of STATUS_KINDS.entries()) {
      const next = STATUS_KINDS[(i * 5 + 3) % STATUS_KINDS.length]!;
      const events = statusLines(original.record.number, [
        ["2026-02-20T11:02:30.000Z", "in force"],
        ["2026-03-20T11:00:00.000Z", kind],
        ["2026-04-20T11:00:00.000Z", next],
      ]);
      const status = signStatus(original.record, events, new Date("2026-05-18T09:00:00Z"), KEY);
      const text = JSON.stringify({ ...original, status });
      const term = verifyRecord(text, KEYS).term!;
      expect(answer(text).inForce).toEqual(inForceOn(events, term, "2026-03-20"));
    }
  });
});
