import { eq, sql } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { numberSeries } from "@/db/schema/licensing";
import { assert } from "@/lib/kernel/errors";
import { command, open } from "@/lib/kernel/verb";

async function lockSeries(tx: Tx, name: string): Promise<number> {
  await tx
    .insert(numberSeries)
    .values({ name, last: 0 })
    .onDuplicateKeyUpdate({ set: { name: sql`name` } });
  const [row] = await tx.select().from(numberSeries).where(eq(numberSeries.name, name)).for("update");
  assert(row, `no series ${name}`);
  return row.last;
}

/** LICENSING-4: the next number, taken under the series row; it is given back if the transaction does not commit. */
export async function nextInSeries(tx: Tx, name: string): Promise<number> {
  const next = (await lockSeries(tx, name)) + 1;
  await tx.update(numberSeries).set({ last: next }).where(eq(numberSeries.name, name));
  return next;
}

/** Numbers up to `last` are spoken for: brought-in licences keep theirs. */
export async function raiseSeries(tx: Tx, name: string, last: number): Promise<void> {
  if (last > (await lockSeries(tx, name)))
    await tx.update(numberSeries).set({ last }).where(eq(numberSeries.name, name));
}

export const SERIES = {
  order: "order",
  licence: (year: number) => `licence:${year}`,
  invoice: (libraryCode: string, year: number) => `invoice:${libraryCode}:${year}`,
  creditNote: (libraryCode: string, year: number) => `credit note:${libraryCode}:${year}`,
} as const;

/** Where numbering begins on an installation that had orders or licences before. A series only ever rises. */
export const openSeries = command({
  name: "licensing.openSeries",
  who: ["system"],
  input: z.object({
    name: z.string().regex(/^(order|licence:\d{4})$/, "A series of orders or of a year's licences."),
    last: z.number().int().min(0),
  }),
  authorise: open("only the commands that set an installation up call it"),
  run: async ({ tx, input }) => {
    await raiseSeries(tx, input.name, input.last);
    return null;
  },
  audit: ({ input }) => ({ subject: input.name, detail: { last: input.last } }),
});
