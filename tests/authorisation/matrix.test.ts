import "@/tests/support/database";
import { readdirSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { beforeAll, describe, expect, test } from "vitest";
import { Expected } from "@/lib/kernel/errors";
import { registeredVerbs } from "@/lib/kernel/verb";
import { COLUMNS, type Column, REFUSALS, type Rows, type World } from "./columns";
import { makeWorld } from "./world";

const root = fileURLToPath(new URL("../..", import.meta.url));
const rooms = readdirSync(`${root}lib`, { withFileTypes: true })
  .filter((entry) => entry.isDirectory() && !["kernel", "web", "commands"].includes(entry.name))
  .map((entry) => entry.name)
  .filter((room) => readdirSync(`${root}lib/${room}`).includes("index.ts"));
for (const room of rooms) {
  await import(`${root}lib/${room}/index.ts`);
  // Verbs that only the worker calls are reached through the room's jobs.
  if (readdirSync(`${root}lib/${room}`).includes("jobs.ts")) await import(`${root}lib/${room}/jobs.ts`);
}

const rows: Rows = {};
for (const file of readdirSync(`${root}tests/authorisation/rows`)) {
  const part = (await import(`${root}tests/authorisation/rows/${file}`)) as { rows: Rows };
  Object.assign(rows, part.rows);
}

describe("the matrix", () => {
  test("has exactly one row for every verb", () => {
    expect(Object.keys(rows).sort()).toEqual([...registeredVerbs().keys()].sort());
  });

  let world: World;
  beforeAll(async () => {
    world = await makeWorld();
  });

  describe.each(Object.entries(rows))("%s", (name, row) => {
    test.each(
      COLUMNS.map((column): [Column, string] => [column, row.may.includes(column) ? "may" : "may not"]),
    )("%s %s", async (column, may) => {
      const verb = registeredVerbs().get(name);
      if (!verb) throw new Error(`no verb ${name}`);
      const input = await row.input(world, column);
      const outcome = await verb(world.actors[column], input).then(
        () => "ok",
        (error: unknown) => {
          if (error instanceof Expected) return error.code;
          throw error;
        },
      );
      if (may === "may") expect(["ok", ...(row.orAnswers ?? [])]).toContain(outcome);
      else expect(REFUSALS).toContain(outcome);
    });
  });
});
