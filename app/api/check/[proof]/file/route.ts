import { z } from "zod";
import { getPublicFile } from "@/lib/licensing";
import { clientAddress, route } from "@/lib/web";

/** The signed record as the public may have it, for keeping and for the verifier that works without this site. */
export const GET = route({
  params: z.object({ proof: z.string().max(80) }),
  handle: async ({ actor, params }) => {
    const file = await getPublicFile(actor, { proof: params.proof, address: await clientAddress() });
    return new Response(JSON.stringify(file, null, 2), {
      headers: {
        "content-type": "application/json; charset=utf-8",
        "content-disposition": `attachment; filename="${file.record.number}.json"`,
        "cache-control": "no-store",
      },
    });
  },
});
