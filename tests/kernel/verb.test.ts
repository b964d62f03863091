import "@/tests/support/database";
import { eq } from "drizzle-orm";
import { describe, expect, test } from "vitest";
import { z } from "zod";
import { db } from "@/db/client";
import { auditLog, settings } from "@/db/schema/kernel";
import { ANONYMOUS, system } from "@/lib/kernel/actor";
import { Precondition } from "@/lib/kernel/errors";
import { command, open } from "@/lib/kernel/verb";

const setSetting = command({
  name: "test.setSetting",
  who: ["system"],
  input: z.object({
    name: z.string().min(1, "a name is needed"),
    value: z.number(),
    fail: z.boolean().default(false),
  }),
  authorise: open("a verb of the tests"),
  run: async ({ tx, input }) => {
    await tx.insert(settings).values({ name: input.name, value: input.value });
    if (input.fail) throw new Precondition("changed our mind");
    return { name: input.name, at: new Date("2026-05-18T09:00:00Z"), amount: 12n };
  },
  audit: ({ input }) => ({ subject: input.name, detail: { value: input.value } }),
});

const actor = system("tests");

describe("a command", () => {
  test("writes its change and its audit row together, or neither", async () => {
    await setSetting(actor, { name: "kept", value: 1 });
    expect(await db().select().from(auditLog).where(eq(auditLog.subject, "kept"))).toHaveLength(1);
    await expect(setSetting(actor, { name: "undone", value: 1, fail: true })).rejects.toThrow(
      "changed our mind",
    );
    expect(await db().select().from(auditLog).where(eq(auditLog.subject, "undone"))).toHaveLength(0);
    expect(await db().select().from(settings).where(eq(settings.name, "undone"))).toHaveLength(0);
  });

  test("repeated with the same operation id, returns the first result and changes nothing", async () => {
    const first = await setSetting(actor, { name: "once", value: 1 }, { operationId: "op-1" });
    const second = await setSetting(actor, { name: "once", value: 1 }, { operationId: "op-1" });
    expect(second).toEqual(first);
    expect(second.amount).toBe(12n);
    expect(second.at).toBeInstanceOf(Date);
  });

  test("ten at once with one operation id are one change", async () => {
    const results = await Promise.all(
      Array.from({ length: 10 }, () =>
        setSetting(actor, { name: "racing", value: 1 }, { operationId: "op-2" }),
      ),
    );
    expect(new Set(results.map((result) => result.name)).size).toBe(1);
    expect(await db().select().from(auditLog).where(eq(auditLog.operationId, "op-2"))).toHaveLength(1);
  });

  test("refuses an actor of another kind before it parses, and input that does not fit with the field's own message", async () => {
    await expect(setSetting(ANONYMOUS, { name: "", value: 1 })).rejects.toMatchObject({
      code: "unauthenticated",
    });
    await expect(setSetting(actor, { name: "", value: 1 })).rejects.toMatchObject({
      code: "invalid",
      fields: { name: "a name is needed" },
    });
  });

  test("the application's user cannot change or delete what is append-only", async () => {
    await expect(db().update(auditLog).set({ verb: "other" })).rejects.toThrow();
    await expect(db().delete(auditLog)).rejects.toThrow();
  });
});
