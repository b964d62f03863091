import { z } from "zod";
import { readMaster } from "@/lib/licensing";
import { streamStored } from "@/lib/uploads";
import { route } from "@/lib/web";

/** Streams one master, whole or a range of it; the store's own address is never shown. */
export const GET = route({
  params: z.object({ token: z.string().max(600) }),
  handle: async ({ actor, params, request }) => {
    const master = await readMaster(actor, params);
    return streamStored(request, {
      fileKey: master.fileKey,
      type: "audio/wav",
      downloadName: master.fileName,
      etag: master.sha256,
    });
  },
});
