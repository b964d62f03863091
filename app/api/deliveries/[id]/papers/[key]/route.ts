import { z } from "zod";
import { readPaper } from "@/lib/deliveries";
import { readStored, webBody } from "@/lib/uploads";
import { route } from "@/lib/web";

/** Papers come from strangers' machines: they are handed on as files, never shown as pages of this site. */
export const GET = route({
  params: z.object({ id: z.string().max(40), key: z.string().max(120) }),
  handle: async ({ actor, params }) => {
    const paper = await readPaper(actor, { deliveryId: params.id, key: params.key });
    const stored = await readStored(paper.key);
    return new Response(webBody(stored.body), {
      headers: {
        "content-type": "application/octet-stream",
        "content-length": String(stored.lengthBytes),
        "content-disposition": `attachment; filename*=UTF-8''${encodeURIComponent(paper.name)}`,
        "cache-control": "private, no-store",
      },
    });
  },
});
