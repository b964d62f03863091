import { and, eq } from "drizzle-orm";
import { db } from "@/db/client";
import { families } from "@/db/schema/catalogue";
import { cueByNumber } from "./drafts";
import { planner, planStep, priorityOf } from "./plan";
import { type DemoWorld, libraryOf } from "./world";

export async function familyOfCue(world: DemoWorld, number: number): Promise<string | null> {
  const cue = cueByNumber(number);
  const [row] = await db()
    .select({ id: families.id, state: families.state })
    .from(families)
    .where(and(eq(families.libraryId, libraryOf(world, cue.library)), eq(families.title, cue.title)));
  return row?.state === "listed" ? row.id : null;
}

const LATER_S = 8;

/** What it rests on is not there yet: it comes round again. */
export async function later(item: string): Promise<void> {
  await planStep(planner, { item, priority: priorityOf(item), inS: LATER_S, turn: Date.now() });
}
