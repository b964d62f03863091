import { sql } from "drizzle-orm";
import type { Tx } from "@/db/client";
import { jobs } from "@/db/schema/infrastructure";
import { setBusinessTime, systemNow } from "@/lib/kernel/clock";
import { newId } from "@/lib/kernel/ids";
import { type MessageName, type MessagePayload, messages } from "@/lib/kernel/messages";

export interface EnqueueOptions {
  /** Jobs with the same key are one job. */
  key?: string;
  runAt?: Date;
  priority?: number;
  attemptsMax?: number;
}

/** Adds a job in the caller's transaction. Returns nothing: a job is not waited for. */
export async function enqueue<N extends MessageName>(
  tx: Tx,
  name: N,
  payload: MessagePayload<N>,
  options: EnqueueOptions = {},
): Promise<void> {
  const now = systemNow();
  await tx
    .insert(jobs)
    .values({
      id: newId("job"),
      name,
      dedupeKey: options.key ? `${name}:${options.key}` : null,
      payload: messages[name].parse(payload),
      state: "ready",
      priority: options.priority ?? 50,
      runAt: options.runAt ?? now,
      businessAt: setBusinessTime(),
      attemptsMax: options.attemptsMax ?? 8,
      createdAt: now,
    })
    .onDuplicateKeyUpdate({ set: { id: sql`id` } });
}
