import { AsyncLocalStorage } from "node:async_hooks";
import pino from "pino";

const context = new AsyncLocalStorage<{ requestId: string }>();

export const log = pino({
  level: process.env.LOG_LEVEL ?? (process.env.VITEST ? "silent" : "info"),
  base: null,
  redact: {
    paths: ["password", "secret", "token", "*.password", "*.secret", "*.token", "contact"],
    censor: "[kept back]",
  },
  mixin: () => context.getStore() ?? {},
});

export function withRequestId<T>(requestId: string, work: () => T): T {
  return context.run({ requestId }, work);
}

export function requestId(): string | null {
  return context.getStore()?.requestId ?? null;
}
