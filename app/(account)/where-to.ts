import { z } from "zod";

const ONE = z.preprocess(
  (value) => (Array.isArray(value) ? value[0] : value),
  z.string().max(400).optional(),
);

/** A place on this site to go on to; anything that would lead elsewhere is dropped. */
export function whereTo(raw: unknown): string | null {
  const parsed = ONE.safeParse(raw);
  const path = parsed.success ? parsed.data : undefined;
  return path && /^\/(?![/\\])[^\s\\]*$/.test(path) ? path : null;
}

export function wordOf(raw: unknown): string | null {
  const parsed = ONE.safeParse(raw);
  return parsed.success ? (parsed.data ?? null) : null;
}

export type SearchParams = Promise<Record<string, string | string[] | undefined>>;
