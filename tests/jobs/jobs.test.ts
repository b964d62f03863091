import "@/tests/support/database";
import { eq, like } from "drizzle-orm";
import { describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { jobs } from "@/db/schema/infrastructure";
import { claimJobs, completeJob, enqueue, failJob, releaseLapsedLeases, runWorker } from "@/lib/jobs";
import { businessNow, withBusinessClock } from "@/lib/kernel/clock";
import { newId } from "@/lib/kernel/ids";
import { inTransaction } from "@/lib/kernel/transaction";

const put = (key: string, options = {}) =>
  inTransaction((tx) => enqueue(tx, "mail.send", { mailId: newId("mai") }, { key, ...options }));
const clear = () => db().update(jobs).set({ state: "done" });

describe("jobs", () => {
  test("JOBS-3: enqueueing the same key twice is one job", async () => {
    await put("twice");
    await put("twice");
    expect(await db().select().from(jobs).where(eq(jobs.dedupeKey, "mail.send:twice"))).toHaveLength(1);
    await clear();
  });

  test("a job that was enqueued in a transaction that failed does not exist", async () => {
    await expect(
      inTransaction(async (tx) => {
        await enqueue(tx, "mail.send", { mailId: newId("mai") }, { key: "undone" });
        throw new Error("changed our mind");
      }),
    ).rejects.toThrow("changed our mind");
    expect(await db().select().from(jobs).where(eq(jobs.dedupeKey, "mail.send:undone"))).toHaveLength(0);
  });

  test("JOBS-5: twenty jobs claimed by eight at once are claimed once each, lowest priority number first", async () => {
    for (let index = 0; index < 20; index++) await put(`race-${index}`, { priority: index });
    const claims = await Promise.all(Array.from({ length: 8 }, () => claimJobs({ limit: 10 })));
    const ids = claims.flat().map((job) => job.id);
    expect(new Set(ids).size).toBe(ids.length);
    const rest = await claimJobs({ limit: 10 });
    expect(ids.length + rest.length).toBe(20);
    await clear();
  });

  test("JOBS-2: a job whose lease was lost is not completed by the old holder", async () => {
    await put("lost");
    const [job] = await claimJobs({ limit: 1 });
    if (!job) throw new Error("nothing claimed");
    await db()
      .update(jobs)
      .set({ leaseUntil: new Date(Date.now() - 1000) })
      .where(eq(jobs.id, job.id));
    expect(await releaseLapsedLeases()).toBe(1);
    expect(await completeJob(job)).toBe(false);
    const [again] = await claimJobs({ limit: 1 });
    expect(again?.id).toBe(job.id);
    expect(again && (await completeJob(again))).toBe(true);
  });

  test("JOBS-4: a job that keeps failing becomes failed and stays visible with its error", async () => {
    await put("failing", { attemptsMax: 2 });
    for (let attempt = 0; attempt < 2; attempt++) {
      await db()
        .update(jobs)
        .set({ runAt: new Date(0) })
        .where(eq(jobs.dedupeKey, "mail.send:failing"));
      const [job] = await claimJobs({ limit: 1 });
      if (job) await failJob(job, new Error("the far end is down"));
    }
    const [row] = await db().select().from(jobs).where(like(jobs.dedupeKey, "%failing"));
    expect(row?.state).toBe("failed");
    expect(row?.lastError).toContain("the far end is down");
  });

  test("JOBS-6: a job enqueued at a set business time runs at that business time", async () => {
    const march = new Date("2026-03-14T12:00:00Z");
    await withBusinessClock(march, () => put("dated"));
    const seen: Date[] = [];
    const stop = new AbortController();
    await runWorker({
      handlers: {
        "mail.send": {
          timeoutS: 5,
          handle: async () => {
            seen.push(businessNow());
          },
        },
      },
      signal: stop.signal,
      untilIdle: true,
    });
    expect(seen).toHaveLength(1);
    expect(Math.abs((seen[0]?.getTime() ?? 0) - march.getTime())).toBeLessThan(60_000);
  });
});
