import { z } from "zod";
import { foundDetail } from "@/app/(shop)/find/found";
import { route } from "@/lib/web";

/** Sections, soundings and every version's contour of one cue: what its open strip shows. */
export const GET = route({
  params: z.object({ number: z.string() }),
  handle: ({ actor, params }) => foundDetail(actor, params.number),
});
