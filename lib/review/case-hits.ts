import { eq } from "drizzle-orm";
import type { Reader } from "@/db/client";
import { caseGroups } from "@/db/schema/review";

export async function groupsOfCase(reader: Reader, caseId: string) {
  return reader.select().from(caseGroups).where(eq(caseGroups.caseId, caseId));
}

export async function caseHitIds(reader: Reader, caseId: string): Promise<string[]> {
  return (await groupsOfCase(reader, caseId)).flatMap((group) => group.hitIds);
}
