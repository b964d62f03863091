import { z } from "zod";
import { Invalid } from "@/lib/kernel/errors";
import { verifyFile } from "@/lib/licensing";
import { clientAddress, route } from "@/lib/web";

const BYTES_MAX = 4_000_000;

/**
 * A licence file in the body, as text so that a name written twice is seen: read, answered, and not kept. Sent as
 * application/json it is checked too, but then as a parser read it.
 */
export const POST = route({
  search: z.object({ on: z.string().max(10).optional() }),
  handle: async ({ actor, body, search, request }) => {
    const declared = Number(request.headers.get("content-length") ?? 0);
    if (declared > BYTES_MAX) throw new Invalid("The file is too large to be a licence file.");
    const text = body === null && !request.bodyUsed ? await request.text() : JSON.stringify(body);
    return verifyFile(actor, {
      text,
      ...(search.on ? { on: search.on } : {}),
      address: await clientAddress(),
    });
  },
});
