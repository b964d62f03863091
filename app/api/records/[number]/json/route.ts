import { z } from "zod";
import { getLicenceFile } from "@/lib/licensing";
import { route } from "@/lib/web";

/** The licensee's own signed file, nothing left out. */
export const GET = route({
  params: z.object({ number: z.string().max(40) }),
  handle: async ({ actor, params }) => {
    const file = await getLicenceFile(actor, { number: params.number });
    return new Response(JSON.stringify(file, null, 2), {
      headers: {
        "content-type": "application/json; charset=utf-8",
        "content-disposition": `attachment; filename="${file.record.number}.json"`,
        "cache-control": "no-store",
      },
    });
  },
});
