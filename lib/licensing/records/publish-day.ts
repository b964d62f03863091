import { asc, desc, eq, min } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { dayRoots, recordLog, recordLogHead } from "@/db/schema/licensing";
import { EVERYONE } from "@/lib/kernel/actor";
import { addDays, type CivilDate, isCivilDate } from "@/lib/kernel/calendar";
import { assert } from "@/lib/kernel/errors";
import { command, open, query } from "@/lib/kernel/verb";
import { canonicalJson, type JsonValue } from "../record/canonical-json";
import { type DayRoot, signDayRoot } from "../record/day-root";
import { leafHash } from "../record/merkle-tree";
import type { Signed } from "../record/sign-record";
import type { SigningKey } from "../record/signing-key";
import { keyToSignWith, publishedKeys } from "./current-key";
import { lockLog } from "./record-log";

type RootRow = typeof dayRoots.$inferSelect;

export function signedRootOf(row: Pick<RootRow, "canonical" | "keyId" | "signature">): Signed<DayRoot> {
  return {
    statement: JSON.parse(row.canonical) as DayRoot,
    signature: { keyId: row.keyId, algorithm: "Ed25519", value: row.signature },
  };
}

async function writeRoot(
  tx: Tx,
  day: CivilDate,
  previous: DayRoot | null,
  key: SigningKey,
  now: Date,
): Promise<DayRoot> {
  const rows = await tx
    .select()
    .from(recordLog)
    .where(eq(recordLog.day, day))
    .orderBy(asc(recordLog.position));
  rows.forEach((row, index) => {
    assert(row.position === index, `LICENSING-7: place ${index} of ${day} is empty`);
  });
  const leaves = rows.map((row) => row.leaf);
  const root = signDayRoot(day, leaves, previous, key);
  await tx.insert(dayRoots).values({
    day,
    leaves: leaves.map((leaf) => leafHash(leaf).toString("hex")),
    root: root.statement.rootSha256,
    previousRoot: root.statement.previous?.sha256 ?? null,
    canonical: canonicalJson(root.statement as unknown as JsonValue),
    keyId: root.signature.keyId,
    signature: root.signature.value,
    publishedAt: now,
  });
  return root.statement;
}

/** Closes every day before `before` and publishes its root; a day without a leaf has one too, so the chain has no gap. */
export const publishDays = command({
  name: "licensing.publishDays",
  who: ["system"],
  input: z.object({ before: z.string().refine(isCivilDate, "This is not a date.") }),
  authorise: open("the worker's slot of the day calls it"),
  run: async ({ tx, input, now }) => {
    const { publishedThrough } = await lockLog(tx);
    const [first] = await tx.select({ day: min(recordLog.day) }).from(recordLog);
    let day = publishedThrough === null ? first?.day : addDays(publishedThrough, 1);
    if (!day) return { days: 0 };
    const key = await keyToSignWith(tx, now);
    const [lastRow] = await tx.select().from(dayRoots).orderBy(desc(dayRoots.day)).limit(1);
    let previous = lastRow ? signedRootOf(lastRow).statement : null;
    let days = 0;
    for (; day < input.before; day = addDays(day, 1), days++)
      previous = await writeRoot(tx, day, previous, key, now);
    if (previous && days > 0) await tx.update(recordLogHead).set({ publishedThrough: previous.day });
    return { days };
  },
  audit: ({ input, result }) => ({ subject: input.before, detail: { days: result.days } }),
});

/** The published list of keys, for the verifier that needs nothing of ours. */
export const listKeys = query({
  name: "licensing.listKeys",
  who: EVERYONE,
  input: z.object({}),
  authorise: open("anybody may check a record"),
  run: ({ reader }) => publishedKeys(reader),
});

export interface PublishedRoot {
  day: string;
  leafSha256: string[];
  root: Signed<DayRoot>;
}

export const listRoots = query({
  name: "licensing.listRoots",
  who: EVERYONE,
  input: z.object({}),
  authorise: open("the roots are published so that others keep them"),
  run: async ({ reader }): Promise<PublishedRoot[]> => {
    const rows = await reader.select().from(dayRoots).orderBy(asc(dayRoots.day));
    return rows.map((row) => ({ day: row.day, leafSha256: row.leaves, root: signedRootOf(row) }));
  },
});
