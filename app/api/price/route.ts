import { z } from "zod";
import { Invalid } from "@/lib/kernel/errors";
import { priceUse } from "@/lib/licensing";
import { Use } from "@/lib/licensing/rate-card";
import { route } from "@/lib/web";

function useOf(text: string): Use {
  try {
    const parsed = Use.safeParse(JSON.parse(text));
    if (parsed.success) return parsed.data;
  } catch {
    // Not JSON: answered like a use that does not fit.
  }
  throw new Invalid("The use is not complete.");
}

/** The price of one use of one cue, with every factor. */
export const GET = route({
  search: z.object({
    family: z.string().max(40),
    use: z.string().max(2000),
    production: z.string().max(40).optional(),
  }),
  handle: ({ actor, search }) =>
    priceUse(actor, {
      familyId: search.family,
      use: useOf(search.use),
      ...(search.production ? { productionId: search.production } : {}),
    }),
});
