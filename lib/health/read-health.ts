import { sql } from "drizzle-orm";
import { z } from "zod";
import { queueDepth } from "@/lib/jobs";
import { EVERYONE } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { open, query } from "@/lib/kernel/verb";

/** Public on purpose: it tells a monitor whether the service works, and nothing of what it holds. */
export const readHealth = query({
  name: "health.readHealth",
  who: EVERYONE,
  input: z.object({}),
  authorise: open("a monitor has no account"),
  run: async ({ reader }) => {
    try {
      await reader.execute(sql`select 1`);
      const depth = await queueDepth(reader);
      return { ok: true, database: "reachable", jobs: { ready: depth.ready ?? 0, running: depth.leased ?? 0, failed: depth.failed ?? 0 }, at: systemNow().toISOString() };
    } catch {
      return { ok: false, database: "not reachable", jobs: null, at: systemNow().toISOString() };
    }
  },
});
