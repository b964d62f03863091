import { AsyncLocalStorage } from "node:async_hooks";
import { env } from "./env";
import { Bug } from "./errors";

const override = new AsyncLocalStorage<{ at: Date; startedMs: number }>();

/** The machine's clock: sign-in, links, leases, webhooks, limits. */
export function systemNow(): Date {
  return new Date();
}

/** The clock of the trade: terms, deadlines, holds, statements. In a demonstration it starts on the demo day and runs on. */
export function businessNow(): Date {
  const set = override.getStore();
  if (set) return new Date(set.at.getTime() + (Date.now() - set.startedMs));
  if (env.SEDGEWREN_MODE === "live" || !env.BUSINESS_CLOCK_START) return new Date();
  const start = Date.parse(env.BUSINESS_CLOCK_START);
  const anchor = env.BUSINESS_CLOCK_ANCHOR ? Date.parse(env.BUSINESS_CLOCK_ANCHOR) : Date.now();
  return new Date(start + (Date.now() - anchor));
}

/** Runs `work` with the business clock set to `at` and running on from there. Demonstrations and tests only. */
export function withBusinessClock<T>(at: Date, work: () => Promise<T>): Promise<T> {
  if (env.SEDGEWREN_MODE === "live") throw new Bug("the business clock cannot be set in live mode");
  return override.run({ at, startedMs: Date.now() }, work);
}

/** The set business time, if one is set: jobs enqueued meanwhile run at that time too. */
export function setBusinessTime(): Date | null {
  return override.getStore() ? businessNow() : null;
}
