import { systemNow } from "@/lib/kernel/clock";
import { Limit } from "@/lib/kernel/errors";
import { blindHash } from "@/lib/kernel/field-crypto";
import { CHECKS_PER_MINUTE } from "../states";

const WINDOW_MS = 60_000;
const ADDRESSES_MAX = 10_000;

/** One map for a process, whichever part of the site asks; nothing of it is ever written down. */
const holder = globalThis as { sedgewrenChecks?: Map<string, number[]> };

/**
 * LICENSING-10: look-ups of proof codes are counted by address for a minute, in memory, under a keyed hash; with several
 * processes each counts for itself. 80 random bits are what keeps a code from being guessed; this keeps guessing slow.
 */
export function countCheck(address: string | undefined): void {
  holder.sedgewrenChecks ??= new Map();
  const counts = holder.sedgewrenChecks;
  const now = systemNow().getTime();
  const subject = blindHash(address ?? "unknown", "check");
  const recent = (counts.get(subject) ?? []).filter((at) => now - at < WINDOW_MS);
  const [oldest] = recent;
  if (oldest !== undefined && recent.length >= CHECKS_PER_MINUTE) {
    const seconds = Math.ceil((WINDOW_MS - (now - oldest)) / 1000);
    throw new Limit(
      `${CHECKS_PER_MINUTE} codes a minute can be checked from one place. Please wait ${seconds} seconds; nothing was looked up.`,
    );
  }
  if (counts.size >= ADDRESSES_MAX) counts.clear();
  counts.set(subject, [...recent, now]);
}
