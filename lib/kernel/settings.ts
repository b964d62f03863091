import { inArray } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { settings } from "@/db/schema/kernel";

/** What an administrator has set, by name; names that were never set are left out. Each room knows its own defaults. */
export async function readSettings(
  reader: Reader,
  names: readonly string[],
): Promise<ReadonlyMap<string, unknown>> {
  if (names.length === 0) return new Map();
  const rows = await reader
    .select({ name: settings.name, value: settings.value })
    .from(settings)
    .where(inArray(settings.name, [...names]));
  return new Map(rows.map((row) => [row.name, row.value]));
}
