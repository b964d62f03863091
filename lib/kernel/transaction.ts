import { db, type Tx } from "@/db/client";

/** Deadlock, record changed, lock wait time-out: the whole transaction again. */
const AGAIN = new Set([1213, 1020, 1205]);
/** Node not ready, commit failed, connection gone: the whole transaction on another connection. */
const ELSEWHERE = new Set([1047, 1180, 1927, 2006, 2013]);
const LOST = new Set(["PROTOCOL_CONNECTION_LOST", "ECONNRESET", "ECONNREFUSED", "EPIPE", "ETIMEDOUT"]);
const ATTEMPTS = 6;

export function errnoOf(error: unknown): number | null {
  for (let cause: unknown = error; cause instanceof Error; cause = cause.cause) {
    const errno = (cause as { errno?: unknown }).errno;
    if (typeof errno === "number") return errno;
  }
  return null;
}

export const isDuplicateKey = (error: unknown): boolean => errnoOf(error) === 1062;

function isRetryable(error: unknown): boolean {
  const errno = errnoOf(error);
  if (errno !== null && (AGAIN.has(errno) || ELSEWHERE.has(errno))) return true;
  for (let cause: unknown = error; cause instanceof Error; cause = cause.cause) {
    if (LOST.has(String((cause as { code?: unknown }).code))) return true;
    if (cause.message.includes("closed state")) return true;
  }
  return false;
}

/**
 * Runs `work` in one READ COMMITTED transaction and repeats the whole of it where the database asks for that.
 * `attempt` counts from 0: work whose outcome may be unknown looks itself up from the second attempt on. With
 * `again: "duplicate"` a duplicate key is repeated too: the other holder of the same operation id may have been first.
 */
export async function inTransaction<T>(
  work: (tx: Tx, attempt: number) => Promise<T>,
  options: { again?: "duplicate" } = {},
): Promise<T> {
  for (let attempt = 0; ; attempt++) {
    try {
      return await db().transaction((tx) => work(tx, attempt), { isolationLevel: "read committed" });
    } catch (error) {
      const mayBeTheSameOperation = options.again === "duplicate" && attempt < 2 && isDuplicateKey(error);
      if (attempt + 1 >= ATTEMPTS || !(isRetryable(error) || mayBeTheSameOperation)) throw error;
      await new Promise((resolve) => setTimeout(resolve, (20 << attempt) * (0.5 + Math.random())));
    }
  }
}
