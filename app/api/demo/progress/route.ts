import { countListed } from "@/lib/catalogue";
import { readHealth } from "@/lib/health";
import { env } from "@/lib/kernel/env";
import { NotFound } from "@/lib/kernel/errors";
import { route } from "@/lib/web";

/** How many of the demonstration's cues are in, and whether the worker has anything left to do. */
export const GET = route({
  handle: async ({ actor }) => {
    if (env.SEDGEWREN_MODE !== "demo") throw new NotFound();
    const { cues } = await countListed(actor, {});
    const { jobs } = await readHealth(actor, {});
    const cuesTotal = env.DEMO_CUES;
    const waiting = (jobs?.ready ?? 0) + (jobs?.running ?? 0);
    return {
      cuesIn: Math.min(cues, cuesTotal),
      cuesTotal,
      waiting,
      step: waiting > 0 ? "the worker renders, screens and lists the rest" : "everything is in",
    };
  },
});
