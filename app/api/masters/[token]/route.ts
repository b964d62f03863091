import { z } from "zod";
import { readMaster } from "@/lib/licensing";
import { serveStored } from "@/lib/uploads";
import { route } from "@/lib/web";

/** Streams one master, whole or a range of it; the store's own address is never shown. */
export const GET = route({
  params: z.object({ token: z.string().max(600) }),
  handle: async ({ actor, params, request }) => {
    const master = await readMaster(actor, params);
    return serveStored(
      {
        key: master.fileKey,
        sizeBytes: master.sizeBytes,
        headers: {
          "content-type": "audio/wav",
          "content-disposition": `attachment; filename="master.wav"; filename*=UTF-8''${encodeURIComponent(master.fileName)}`,
          "cache-control": "private, no-store",
          etag: `"${master.sha256}"`,
        },
      },
      request.headers.get("range"),
    );
  },
});
