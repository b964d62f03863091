import { count, eq } from "drizzle-orm";
import { z } from "zod";
import { families, recordings } from "@/db/schema/catalogue";
import { EVERYONE } from "@/lib/kernel/actor";
import { open, query } from "@/lib/kernel/verb";

/** How many cues are on sale, and how many recordings: what a catalogue says of itself. */
export const countListed = query({
  name: "catalogue.countListed",
  who: EVERYONE,
  input: z.object({}),
  authorise: open("a catalogue's size is public"),
  run: async ({ reader }) => {
    const [cues] = await reader.select({ count: count() }).from(families).where(eq(families.state, "listed"));
    const [held] = await reader
      .select({ count: count() })
      .from(recordings)
      .where(eq(recordings.state, "listed"));
    return { cues: cues?.count ?? 0, recordings: held?.count ?? 0 };
  },
});
