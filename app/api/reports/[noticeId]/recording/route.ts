import { z } from "zod";
import { hearReported } from "@/lib/reports";
import { readStored, streamStored } from "@/lib/uploads";
import { route } from "@/lib/web";
import { soundType } from "./sound-type";

/** The confidential recording of a report, for the marketplace's moderators; each request is a hearing in the log. */
export const GET = route({
  params: z.object({ noticeId: z.string().max(40) }),
  handle: async ({ actor, params, request }) => {
    const { fileKey } = await hearReported(actor, params);
    const head: Uint8Array[] = [];
    const { body } = await readStored(fileKey, { startBytes: 0, endBytes: 15 });
    for await (const bytes of body) head.push(bytes as Uint8Array);
    return streamStored(request, { fileKey, type: soundType(Buffer.concat(head)) });
  },
});
