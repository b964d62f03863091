import { z } from "zod";
import { hearOwnPassage, hearPassage } from "@/lib/review";
import { streamStored } from "@/lib/uploads";
import { route } from "@/lib/web";

/** The four-channel file of one passage: a moderator's hearing is logged; a deliverer hears only listed references. */
export const GET = route({
  params: z.object({ passageId: z.string().max(40) }),
  handle: async ({ actor, params, request }) => {
    const { fileKey } =
      actor.kind === "moderator" ? await hearPassage(actor, params) : await hearOwnPassage(actor, params);
    return streamStored(request, { fileKey: fileKey ?? "", type: "audio/flac" });
  },
});
