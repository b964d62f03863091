import { z } from "zod";

export type SearchParams = Promise<Record<string, string | string[] | undefined>>;

const Day = z.iso.date();
const Instant = z.iso.datetime({ local: true });
const Word = z.string().min(1).max(80);

export function wordOf(raw: unknown): string | null {
  const parsed = Word.safeParse(raw);
  return parsed.success ? parsed.data : null;
}

/** "2026-03-30" is the last instant of that day, "2026-03-31T23:59:59" that second, both in UTC. */
export function instantOf(raw: unknown): Date | null {
  if (Day.safeParse(raw).success) return new Date(`${raw}T23:59:59.999Z`);
  if (Instant.safeParse(raw).success) return new Date(`${raw}Z`);
  return null;
}
