import { eq, inArray, sql } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { signInAttempts } from "@/db/schema/accounts";
import { systemNow } from "@/lib/kernel/clock";
import { Limit } from "@/lib/kernel/errors";
import { blindHash } from "@/lib/kernel/field-crypto";
import { command, open } from "@/lib/kernel/verb";

const WINDOW_MS = 60 * 60_000;
/** A turn further off than this is refused with the seconds to wait, so that no request hangs. */
const WAIT_IN_REQUEST_MS = 5_000;

export interface Pace {
  /** Attempts in an hour before any slowing. */
  free: number;
  /** After those the n-th attempt costs 2^(n−1) seconds, at most these. */
  slowestS: number;
  /** Attempts come one after the other, so that many at once are no faster. */
  inTurn: boolean;
}

type Paces = Record<"pair" | "account" | "address", Pace>;

/**
 * A password is slowed hard, and in turn, only for one account from one address. The account from everywhere and the
 * address for every account cost a short flat wait, so that a stranger who tries somebody's password can never keep
 * that person out. Codes are tried by whoever has the password or the mailbox already, so there the account itself
 * takes turns. Links are limited to keep a mailbox from being flooded.
 */
const PACES = {
  password: {
    pair: { free: 4, slowestS: 30, inTurn: true },
    account: { free: 12, slowestS: 3, inTurn: false },
    address: { free: 60, slowestS: 3, inTurn: false },
  },
  code: {
    pair: { free: 5, slowestS: 30, inTurn: true },
    account: { free: 8, slowestS: 300, inTurn: true },
    address: { free: 60, slowestS: 3, inTurn: false },
  },
  link: {
    pair: { free: 3, slowestS: 120, inTurn: true },
    account: { free: 6, slowestS: 120, inTurn: true },
    address: { free: 60, slowestS: 10, inTurn: true },
  },
} as const satisfies Record<string, Paces>;
export type Door = keyof typeof PACES;

/** What the attempt of this number, counted from 1, costs in seconds. */
export function waitS(attempt: number, pace: Pace): number {
  return attempt <= pace.free ? 0 : Math.min(2 ** Math.min(attempt - pace.free - 1, 20), pace.slowestS);
}

const SUBJECTS = ["pair", "account", "address"] as const;

function hashOf(subject: (typeof SUBJECTS)[number], door: Door, account: string, address: string): string {
  const value = { pair: `${account}\0${address}`, account, address }[subject];
  return blindHash(value, `sign-in:${door}:${subject}`);
}

async function takeTurn(tx: Tx, subjectHash: string, pace: Pace, now: Date): Promise<number> {
  const nowMs = now.getTime();
  await tx
    .insert(signInAttempts)
    .values({ subjectHash, windowStart: now, attempts: 0, nextAt: now })
    .onDuplicateKeyUpdate({ set: { subjectHash: sql`subject_hash` } });
  const [row] = await tx
    .select()
    .from(signInAttempts)
    .where(eq(signInAttempts.subjectHash, subjectHash))
    .for("update");
  const isNewWindow = !row || nowMs - row.windowStart.getTime() > WINDOW_MS;
  const attempts = isNewWindow ? 1 : row.attempts + 1;
  const waitMs = pace.inTurn && !isNewWindow ? Math.max(0, row.nextAt.getTime() - nowMs) : 0;
  if (waitMs > WAIT_IN_REQUEST_MS) throw tooSoon(waitMs);
  const costMs = waitS(pace.inTurn ? attempts + 1 : attempts, pace) * 1000;
  await tx
    .update(signInAttempts)
    .set({
      attempts,
      windowStart: isNewWindow ? now : row.windowStart,
      nextAt: pace.inTurn ? new Date(nowMs + waitMs + costMs) : now,
    })
    .where(eq(signInAttempts.subjectHash, subjectHash));
  return pace.inTurn ? waitMs : costMs;
}

export function tooSoon(waitMs: number): Limit {
  const seconds = Math.ceil(waitMs / 1000);
  return new Limit(
    `This was tried many times. Please wait ${seconds} seconds and try again; nothing is locked.`,
  );
}

/** Counts an attempt before it is made, and answers how long to hold the answer back. */
export async function countAttempt(tx: Tx, door: Door, account: string, address: string): Promise<number> {
  const now = systemNow();
  let waitMs = 0;
  for (const subject of SUBJECTS) {
    const turnMs = await takeTurn(tx, hashOf(subject, door, account, address), PACES[door][subject], now);
    waitMs = Math.max(waitMs, turnMs);
  }
  return waitMs;
}

export const takeAttempt = command({
  name: "accounts.takeAttempt",
  who: ["system"],
  input: z.object({
    door: z.enum(["password", "code"]),
    account: z.string().max(254),
    address: z.string().max(100),
  }),
  authorise: open("called by the doors themselves, for known and unknown accounts alike"),
  run: async ({ tx, input }) => ({
    waitMs: await countAttempt(tx, input.door, input.account, input.address),
  }),
  audit: ({ input }) => ({
    subject: hashOf("account", input.door, input.account, "").slice(0, 40),
    detail: { door: input.door },
  }),
});

/** After a success the account starts afresh; the address keeps its count. */
export async function forgetAttempts(tx: Tx, door: Door, account: string, address: string): Promise<void> {
  const hashes = (["pair", "account"] as const).map((subject) => hashOf(subject, door, account, address));
  await tx.delete(signInAttempts).where(inArray(signInAttempts.subjectHash, hashes));
}

export const pause = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));
