import "@/tests/support/database";
import { eq, inArray, sql } from "drizzle-orm";
import { describe, expect, test, vi } from "vitest";
import { z } from "zod";
import { db, type Reader } from "@/db/client";
import { jobs } from "@/db/schema/infrastructure";
import { auditLog, settings } from "@/db/schema/kernel";
import { claimJobs, enqueue, runWorker } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { encode } from "@/lib/kernel/codec";
import { Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { inTransaction } from "@/lib/kernel/transaction";
import { command, open } from "@/lib/kernel/verb";
import { changeReference } from "@/lib/screening";
import { logAfter, readHead } from "@/lib/screening/fingerprints";
import { sources } from "@/tests/architecture/sources";

/*
 * The ten rules under which one MariaDB can become a cluster by configuration; each test names the rule it holds. Proved
 * elsewhere: rule 1 and 2 under load in tests/screening/admission, tests/ledger/races and tests/licensing/orders; rule 5 by
 * repetition in tests/kernel/verb; rule 6's lost leases in tests/jobs; rule 9 (two migrations at once, rights) in
 * tests/commands/mariadb; rule 10's one opener of the database in tests/architecture/edges. What no single server can show,
 * two nodes deciding at once, is not shown here.
 */
const ours = sources.filter(
  (source) => /^(lib|db)\//.test(source.path) && !source.path.startsWith("db/seed/"),
);
const actor = system("tests");

async function rowsIn<T>(reader: Pick<Reader, "execute">, query: ReturnType<typeof sql>): Promise<T[]> {
  return (await reader.execute(query))[0] as unknown as T[];
}

interface Connection {
  query(...args: unknown[]): Promise<unknown>;
}

/** Locked, never changed in its file, with the reason why that does no harm. */
const ONLY_LOCKED: Record<string, string> = {
  "lib/productions/own-production.ts shortlistItems": "its production is the guard, and is raised before it",
  "lib/accounts/roster.ts people": "two unique keys of confirmed_names decide, whatever the lock does",
  "lib/accounts/companies.ts people": "the company is new, so that nobody else can add to it",
  "lib/accounts/memberships.ts people": "across nodes the same role could be held twice, which gives nothing",
  "lib/accounts/invitations.ts people": "the invitation is the guard, and is changed",
};

describe("rule 1: the guard row is changed, never only locked", () => {
  test("every table that is read FOR UPDATE is changed in the same file, or is named with its reason", () => {
    const lockedOnly = ours.flatMap((source) =>
      [...source.text.matchAll(/\.from\((\w+)\)(?:(?!\.from\()[\s\S])*?\.for\("update"/g)]
        .map((match) => match[1] ?? "")
        .filter((table) => !new RegExp(`\\.(update|delete)\\(${table}\\)`).test(source.text))
        .map((table) => `${source.path} ${table}`),
    );
    expect([...new Set(lockedOnly)].sort()).toEqual(Object.keys(ONLY_LOCKED).sort());
  });
});

describe("rule 2: the guard is the first read, at READ COMMITTED", () => {
  test("what another writes of the operation while the guard waits is seen: the look-up comes after the guard", async () => {
    const operationId = "cluster-rule-2";
    const meanwhile = command({
      name: "tests.clusterRuleTwo",
      who: ["system"],
      input: z.object({}),
      guard: async () => {
        const now = new Date();
        const who = { actorKind: "system", subject: "rule 2", businessAt: now, systemAt: now };
        const row = { id: newId("aud"), operationId, verb: "tests.clusterRuleTwo", detail: {}, ...who };
        await db()
          .insert(auditLog)
          .values({ ...row, result: encode("the other's result") });
      },
      authorise: open("a test"),
      run: async () => "done a second time",
      audit: () => ({ subject: "rule 2" }),
    });
    expect(await meanwhile(actor, {}, { operationId })).toBe("the other's result");
  });

  test("a transaction runs at READ COMMITTED and sees what was committed since it began", async () => {
    const seen = await inTransaction(async (tx) => {
      const read = async () => (await tx.select().from(settings).where(eq(settings.name, "rule 2"))).length;
      const before = await read();
      await db().insert(settings).values({ name: "rule 2", value: 1 });
      return [
        before,
        await read(),
        (await rowsIn<{ level: string }>(tx, sql`select @@tx_isolation as level`))[0]?.level,
      ];
    });
    expect(seen).toEqual([0, 1, "READ-COMMITTED"]);
  });
});

describe("rule 3: the head's sequence is read before content", () => {
  test("what is admitted between the two reads is left for the next, not taken without its number", async () => {
    const text = ours.find((source) => source.path === "lib/screening/fingerprints.ts")?.text ?? "";
    const body = text.slice(
      text.indexOf("export const readIndexChanges"),
      text.indexOf("export const readHead"),
    );
    const places = ["headSequence(reader)", "logAfter(reader", "packedMid(reader"].map((call) =>
      body.indexOf(call),
    );
    expect(places.every((place) => place > 0)).toBe(true);
    expect(places).toEqual([...places].sort((one, other) => one - other));
    // The log is read up to that head and no further.
    expect(await logAfter(db(), 0, 0)).toEqual([]);
    await changeReference(actor, { change: "add", subjectKind: "loop", subjectId: "lop_rule_3" });
    expect((await logAfter(db(), 0, 1)).map(({ seq }) => seq)).toEqual([1]);
    expect(await logAfter(db(), 0, 0)).toEqual([]);
  });
});

/** Runs work that fails once with `fault`, and says how often it was begun. */
async function timesBegun(fault: Error): Promise<number> {
  let begun = 0;
  await inTransaction(async () => {
    begun++;
    if (begun === 1) throw fault;
  }).catch(() => undefined);
  return begun;
}

describe("rule 4: the whole transaction again", () => {
  test.each([1213, 1020, 1205, 1047, 1180, 2006, 2013])("on error %i", async (errno) => {
    // As the database layer hands it on: wrapped.
    const cause = Object.assign(new Error("from the server"), { errno });
    expect(await timesBegun(new Error("Failed query", { cause }))).toBe(2);
  });

  test.each(["PROTOCOL_CONNECTION_LOST", "ECONNRESET", "ECONNREFUSED", "EPIPE", "ETIMEDOUT"])(
    "on %s, a connection that is gone or does not answer",
    async (code) => {
      expect(await timesBegun(Object.assign(new Error("lost"), { code }))).toBe(2);
    },
  );

  test("and not on an answer that would come again: a duplicate key, a missing table, a refusal of ours", async () => {
    for (const errno of [1062, 1146]) expect(await timesBegun(Object.assign(new Error(), { errno }))).toBe(1);
    expect(await timesBegun(new Precondition("not now"))).toBe(1);
  });

  test("a connection that the server ends in the middle: what it had written is undone and written once on another", async () => {
    const connections: number[] = [];
    await inTransaction(async (tx, attempt) => {
      const [row] = await rowsIn<{ id: number }>(tx, sql`select connection_id() as id`);
      connections.push(Number(row?.id));
      await tx.insert(settings).values({ name: "rule 4", value: attempt });
      if (attempt === 0) await tx.execute(sql.raw(`kill ${Number(row?.id)}`));
      await tx.select().from(settings).where(eq(settings.name, "rule 4"));
    });
    expect(new Set(connections).size).toBe(2);
    const rows = await db().select().from(settings).where(eq(settings.name, "rule 4"));
    expect(rows.map(({ value }) => value)).toEqual([1]);
  });

  test("two that lock the same two rows crosswise both end, each having changed both", async () => {
    await db()
      .insert(settings)
      .values([
        { name: "cross a", value: 0 },
        { name: "cross b", value: 0 },
      ]);
    let met = 0;
    const raise = (names: readonly [string, string]) =>
      inTransaction(async (tx, attempt) => {
        for (const [index, name] of names.entries()) {
          await tx.update(settings).set({ value: sql`value + 1` }).where(eq(settings.name, name));
          // Once, so that each holds what the other wants next.
          if (index === 0 && attempt === 0) {
            met++;
            while (met < 2) await new Promise((resolve) => setTimeout(resolve, 5));
          }
        }
      });
    await Promise.all([raise(["cross a", "cross b"]), raise(["cross b", "cross a"])]);
    const rows = await db()
      .select()
      .from(settings)
      .where(inArray(settings.name, ["cross a", "cross b"]));
    expect(rows.map(({ value }) => Number(value))).toEqual([2, 2]);
  });

  test("every statement has a time-out", async () => {
    const [row] = await rowsIn<{ seconds: number }>(db(), sql`select @@max_statement_time as seconds`);
    expect(Number(row?.seconds)).toBeGreaterThan(0);
  });
});

/** Tables of this database with what the server knows of them. */
const tables = () =>
  rowsIn<{ name: string; engine: string; kind: string; next: number | null }>(
    db(),
    sql`select table_name as name, engine, table_type as kind, auto_increment as next
      from information_schema.tables where table_schema = database()`,
  );

const uniqueColumns = async () =>
  (
    await rowsIn<{ name: string }>(
      db(),
      sql`select concat(table_name, '.', group_concat(column_name order by seq_in_index)) as name
        from information_schema.statistics where table_schema = database() and non_unique = 0
        group by table_name, index_name`,
    )
  ).map(({ name }) => name);

describe("rule 5: an operation id under a unique key", () => {
  test("for every command, every scheduled or repeated job, every entry of the journal and every event of the processor", async () => {
    expect(await uniqueColumns()).toEqual(
      expect.arrayContaining([
        "audit_log.operation_id",
        "jobs.dedupe_key",
        "ledger_entries.idempotency_key",
        "payment_events.id",
      ]),
    );
  });

  test("an outcome that was not heard of resolves itself: the commit went through, the answer was lost", async () => {
    const lossy = command({
      name: "tests.clusterRuleFive",
      who: ["system"],
      input: z.object({}),
      authorise: open("a test"),
      run: async ({ tx }) => {
        await tx.insert(settings).values({ name: "rule 5", value: 1 });
        return "done once";
      },
      audit: () => ({ subject: "rule 5" }),
    });
    const pool = (db() as unknown as { $client: unknown }).$client as {
      getConnection: () => Promise<Connection>;
    };
    const takeConnection = pool.getConnection.bind(pool);
    const losing = vi.spyOn(pool, "getConnection").mockImplementationOnce(async () => {
      const connection = await takeConnection();
      const query = connection.query.bind(connection);
      vi.spyOn(connection, "query").mockImplementation(async (...args: unknown[]) => {
        const answer = await query(...args);
        const text = typeof args[0] === "string" ? args[0] : (args[0] as { sql: string }).sql;
        if (text === "commit") throw Object.assign(new Error("gone"), { code: "ECONNRESET" });
        return answer;
      });
      return connection;
    });
    expect(await lossy(actor, {}, { operationId: "cluster-rule-5" })).toBe("done once");
    expect(losing.mock.calls.length).toBeGreaterThan(1);
    losing.mockRestore();
    expect(await db().select().from(settings).where(eq(settings.name, "rule 5"))).toHaveLength(1);
  });
});

describe("rule 6: a job's body starts only after its claim has committed", () => {
  test("JOBS-1: another connection sees the claim while the body runs", async () => {
    await inTransaction((tx) => enqueue(tx, "mail.send", { mailId: newId("mai") }, { key: "rule 6" }));
    const seen: unknown[] = [];
    const handle = async (_payload: unknown, { jobId }: { jobId: string }) => {
      const [row] = await db().select().from(jobs).where(eq(jobs.id, jobId));
      seen.push(row?.state, row?.leaseToken !== null);
    };
    const handlers = { "mail.send": { timeoutS: 10, handle } };
    await runWorker({ handlers, signal: new AbortController().signal, untilIdle: true, idleMs: 20 });
    expect(seen).toEqual(["leased", true]);
  });

  test("a claim takes ten at a time, however many are asked for", async () => {
    await inTransaction(async (tx) => {
      for (let index = 0; index < 12; index++)
        await enqueue(tx, "mail.send", { mailId: newId("mai") }, { key: `rule 6 ${index}` });
    });
    expect(await claimJobs({ limit: 100 })).toHaveLength(10);
    expect(await claimJobs({ limit: 100 })).toHaveLength(2);
  });
});

describe("rule 7: nothing that a cluster does not have", () => {
  test("every table is InnoDB, none counts by itself, and there is no sequence", async () => {
    const all = await tables();
    expect(all.length).toBeGreaterThan(50);
    expect(all.filter(({ engine, kind }) => engine !== "InnoDB" || kind !== "BASE TABLE")).toEqual([]);
    expect(all.filter(({ next }) => next !== null)).toEqual([]);
  });

  test("every table has a primary key", async () => {
    const keyed = await rowsIn<{ name: string }>(
      db(),
      sql`select distinct table_name as name from information_schema.statistics
        where table_schema = database() and index_name = 'PRIMARY'`,
    );
    const names = new Set(keyed.map(({ name }) => name));
    expect((await tables()).filter(({ name }) => !names.has(name))).toEqual([]);
  });

  test("no source asks for a named lock, a table lock, a distributed transaction, a counter or a sequence", () => {
    const forbidden =
      /\b(get_lock|release_lock|is_free_lock)\s*\(|\block\s+tables?\b|\bxa\s+(start|begin|end|prepare|commit)\b|\bauto_increment\b|\.autoincrement\(|\bnext(val|\s+value\s+for)\b|last_insert_id|insertId/i;
    const asking = ours.filter((source) => forbidden.test(source.text)).map((source) => source.path);
    expect(asking).toEqual([]);
  });
});

describe("rule 9: migrations under a lock row", () => {
  test("one file migrates, and locks and raises its row before it looks at anything", () => {
    const migrating = sources.filter((source) => /drizzle-orm\/(mysql2\/)?migrator/.test(source.text));
    expect(migrating.map((source) => source.path)).toEqual(["lib/commands/migrate.ts"]);
    const text = migrating[0]?.text ?? "";
    const places = ["WHERE id = 1 FOR UPDATE", "SET version = version + 1", "await readApplied(owner)"].map(
      (words) => text.indexOf(words),
    );
    expect(places.every((place) => place > 0)).toBe(true);
    expect(places).toEqual([...places].sort((one, other) => one - other));
  });
});

describe("rule 10: read-your-writes through one door", () => {
  test("one file opens connections for the product, and one other for its migrations", () => {
    const opening = sources
      .filter((source) => /\bcreate(Pool|PoolCluster|Connection)\(/.test(source.text))
      .map((source) => source.path);
    expect(opening.sort()).toEqual(["db/client.ts", "lib/commands/migrate.ts"]);
  });

  test("what a command has written, the next query reads", async () => {
    for (let round = 0; round < 20; round++) {
      const { seq } = await changeReference(actor, {
        change: "add",
        subjectKind: "loop",
        subjectId: `lop_${round}`,
      });
      expect(await readHead(actor, {})).toBe(seq);
    }
  });
});
