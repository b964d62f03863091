import { countListed } from "@/lib/catalogue";
import { env } from "@/lib/kernel/env";
import { NotFound } from "@/lib/kernel/errors";
import { route } from "@/lib/web";

const CUES_TOTAL = 40;

/** How many of the demonstration's forty cues are in. */
export const GET = route({
  handle: async ({ actor }) => {
    if (env.SEDGEWREN_MODE !== "demo") throw new NotFound();
    const { cues } = await countListed(actor, {});
    return {
      cuesIn: Math.min(cues, CUES_TOTAL),
      cuesTotal: CUES_TOTAL,
      step: cues < CUES_TOTAL ? "the worker renders, screens and lists the rest" : "all cues are in",
    };
  },
});
