import { and, desc, eq } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { ledgerEntries } from "@/db/schema/ledger";
import { captureFacts } from "./sale-facts";

/** A library's name as its latest sale gave it: libraries are another room's. */
export async function libraryNames(reader: Reader, ids: readonly string[]): Promise<Map<string, string>> {
  const names = new Map<string, string>();
  for (const id of new Set(ids)) {
    const [row] = await reader
      .select({ facts: ledgerEntries.facts })
      .from(ledgerEntries)
      .where(and(eq(ledgerEntries.libraryId, id), eq(ledgerEntries.code, "capture")))
      .orderBy(desc(ledgerEntries.postedAt))
      .limit(1);
    const facts = captureFacts.safeParse(row?.facts);
    if (facts.success) names.set(id, facts.data.libraryName);
  }
  return names;
}
