import { and, count, desc, eq, inArray, sql } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { jobs } from "@/db/schema/infrastructure";
import type { MessageName } from "@/lib/kernel/messages";

export type JobState = {
  name: string;
  state: string;
  progress: { words: string; done: number; of: number } | null;
};

/** Unfinished jobs about one thing, found by a value in their payload. */
export async function jobsFor(
  reader: Reader,
  names: readonly MessageName[],
  field: string,
  value: string,
): Promise<JobState[]> {
  return reader
    .select({ name: jobs.name, state: jobs.state, progress: jobs.progress })
    .from(jobs)
    .where(
      and(
        inArray(jobs.name, [...names]),
        inArray(jobs.state, ["ready", "leased", "failed"]),
        sql`json_value(${jobs.payload}, ${`$.${field}`}) = ${value}`,
      ),
    );
}

export async function listFailedJobs(reader: Reader, limit = 100) {
  return reader
    .select({
      id: jobs.id,
      name: jobs.name,
      payload: jobs.payload,
      attempts: jobs.attempts,
      lastError: jobs.lastError,
      finishedAt: jobs.finishedAt,
    })
    .from(jobs)
    .where(eq(jobs.state, "failed"))
    .orderBy(desc(jobs.finishedAt))
    .limit(limit);
}

export async function queueDepth(reader: Reader): Promise<Record<string, number>> {
  const rows = await reader.select({ state: jobs.state, count: count() }).from(jobs).groupBy(jobs.state);
  return Object.fromEntries(rows.map((row) => [row.state, row.count]));
}
