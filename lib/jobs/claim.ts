import { randomUUID } from "node:crypto";
import { and, asc, eq, inArray, lte, notInArray, sql } from "drizzle-orm";
import { db } from "@/db/client";
import { jobs } from "@/db/schema/infrastructure";
import { systemNow } from "@/lib/kernel/clock";
import { inTransaction } from "@/lib/kernel/transaction";

export type ClaimedJob = {
  id: string;
  name: string;
  payload: unknown;
  businessAt: Date | null;
  attempts: number;
  attemptsMax: number;
  leaseToken: string;
};

const LEASE_S = 60;
const CLAIM_MAX = 10;
const leaseEnd = () => new Date(systemNow().getTime() + LEASE_S * 1000);

/** JOBS-1, JOBS-5: claims in a short transaction of its own. */
export async function claimJobs(options: {
  limit: number;
  names?: readonly string[];
  except?: readonly string[];
}): Promise<ClaimedJob[]> {
  const limit = Math.min(options.limit, CLAIM_MAX);
  if (limit < 1) return [];
  return inTransaction(async (tx) => {
    const wanted = [eq(jobs.state, "ready"), lte(jobs.runAt, systemNow())];
    if (options.names) wanted.push(inArray(jobs.name, [...options.names]));
    if (options.except?.length) wanted.push(notInArray(jobs.name, [...options.except]));
    const rows = await tx
      .select()
      .from(jobs)
      .where(and(...wanted))
      .orderBy(asc(jobs.priority), asc(jobs.runAt), asc(jobs.id))
      .limit(limit)
      .for("update", { skipLocked: true });
    const claimed: ClaimedJob[] = [];
    for (const row of rows) {
      const leaseToken = randomUUID();
      await tx
        .update(jobs)
        .set({ state: "leased", leaseToken, leaseUntil: leaseEnd(), attempts: row.attempts + 1 })
        .where(eq(jobs.id, row.id));
      claimed.push({
        id: row.id,
        name: row.name,
        payload: row.payload,
        businessAt: row.businessAt,
        attempts: row.attempts + 1,
        attemptsMax: row.attemptsMax,
        leaseToken,
      });
    }
    return claimed;
  });
}

const mine = (job: { id: string; leaseToken: string }) =>
  and(eq(jobs.id, job.id), eq(jobs.leaseToken, job.leaseToken), eq(jobs.state, "leased"));

/** JOBS-2. False when the lease was lost: another worker has the job. */
export async function completeJob(job: { id: string; leaseToken: string }): Promise<boolean> {
  const [result] = await db()
    .update(jobs)
    .set({ state: "done", leaseToken: null, leaseUntil: null, progress: null, finishedAt: systemNow() })
    .where(mine(job));
  return result.affectedRows === 1;
}

export async function failJob(job: ClaimedJob, error: unknown): Promise<void> {
  const lastError =
    error instanceof Error
      ? `${error.name}: ${error.message}\n${error.stack ?? ""}`.slice(0, 4000)
      : String(error);
  const spent = job.attempts >= job.attemptsMax;
  const delayS = Math.min(600, 2 ** job.attempts) * (0.75 + Math.random() / 2);
  await db()
    .update(jobs)
    .set({
      state: spent ? "failed" : "ready",
      runAt: new Date(systemNow().getTime() + delayS * 1000),
      leaseToken: null,
      leaseUntil: null,
      lastError,
      finishedAt: spent ? systemNow() : null,
    })
    .where(mine(job));
}

export async function heartbeat(job: { id: string; leaseToken: string }): Promise<boolean> {
  const [result] = await db().update(jobs).set({ leaseUntil: leaseEnd() }).where(mine(job));
  return result.affectedRows === 1;
}

export async function reportProgress(
  job: { id: string; leaseToken: string },
  progress: { words: string; done: number; of: number },
): Promise<void> {
  await db().update(jobs).set({ progress }).where(mine(job));
}

/** JOBS-4: jobs of dead workers become ready again, or failed when their attempts are used up. */
export async function releaseLapsedLeases(): Promise<number> {
  const [result] = await db()
    .update(jobs)
    .set({
      state: sql`if(${jobs.attempts} >= ${jobs.attemptsMax}, 'failed', 'ready')`,
      lastError: sql`coalesce(${jobs.lastError}, 'the worker stopped while it held this job')`,
      leaseToken: null,
      leaseUntil: null,
    })
    .where(and(eq(jobs.state, "leased"), lte(jobs.leaseUntil, systemNow())));
  return result.affectedRows;
}
