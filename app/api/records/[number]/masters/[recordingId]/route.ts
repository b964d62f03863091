import { z } from "zod";
import { env } from "@/lib/kernel/env";
import { linkToMaster } from "@/lib/licensing";
import { route } from "@/lib/web";

/** Notes the download and sends the browser to a link that works for some minutes. */
export const GET = route({
  params: z.object({ number: z.string().max(30), recordingId: z.string().max(40) }),
  handle: async ({ actor, params }) => {
    const link = await linkToMaster(actor, params);
    const path = link?.path ?? `/records/${params.number}?preparing=1`;
    return Response.redirect(new URL(path, env.SITE_URL), 303);
  },
});
