import { z } from "zod";
import { hearRecording } from "@/lib/catalogue";
import { streamStored } from "@/lib/uploads";
import { route } from "@/lib/web";

/** Streams a recording's preview with ranges; the store's own address is never shown. */
export const GET = route({
  params: z.object({ recordingId: z.string() }),
  handle: async ({ actor, params, request }) => {
    const { fileKey, type } = await hearRecording(actor, params);
    return streamStored(request, { fileKey, type, maxAgeS: 300 });
  },
});
