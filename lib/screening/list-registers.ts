import { asc } from "drizzle-orm";
import { z } from "zod";
import { registerEntries, sharedLoops } from "@/db/schema/screening";
import { familiesByIds } from "@/lib/catalogue";
import { open, query } from "@/lib/kernel/verb";

/** The registers as a moderator reads them: loops with their conditions, other titles, old tunes. */
export const listRegisters = query({
  name: "screening.listRegisters",
  who: ["moderator"],
  input: z.object({}),
  authorise: open("the registers are for every library's moderators"),
  run: async ({ reader, actor }) => {
    const loops = await reader.select().from(sharedLoops).orderBy(asc(sharedLoops.code));
    const entries = await reader
      .select()
      .from(registerEntries)
      .orderBy(asc(registerEntries.code), asc(registerEntries.title));
    const families = new Map(
      (await familiesByIds(reader, [...new Set(entries.flatMap((entry) => entry.familyIds))])).map(
        (family) => [family.id, family],
      ),
    );
    return {
      loops: loops.map((loop) => ({
        id: loop.id,
        code: loop.code,
        title: loop.title,
        lengthS: loop.lengthS,
        bpm: loop.bpm,
        condition: loop.condition,
        conditionWords: loop.conditionWords,
        coverageMaxBps: loop.coverageMaxBps,
        hasSound: loop.fileKey !== null,
        createdAt: loop.createdAt,
      })),
      entries: entries.map((entry) => ({
        id: entry.id,
        kind: entry.kind as "public domain" | "other title",
        code: entry.code,
        title: entry.title,
        words: entry.words,
        createdAt: entry.createdAt,
        // Of other libraries only what is listed is named.
        cues: entry.familyIds.flatMap((id) => {
          const family = families.get(id);
          const isTheirs = actor.libraryId === null || family?.libraryId === actor.libraryId;
          return family && (isTheirs || family.state === "listed")
            ? [
                {
                  catalogueNumber: family.catalogueNumber,
                  title: family.title,
                  isListed: family.state === "listed",
                },
              ]
            : [];
        }),
      })),
    };
  },
});
export type Registers = Awaited<ReturnType<typeof listRegisters>>;
