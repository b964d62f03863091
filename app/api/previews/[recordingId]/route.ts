import { Readable } from "node:stream";
import { z } from "zod";
import { hearRecording } from "@/lib/catalogue";
import { type ByteRange, readStored, UploadError } from "@/lib/uploads";
import { route } from "@/lib/web";

/** One range as browsers ask for it (RFC 9110, 14.1.2); anything else is answered with the whole file. */
const RANGE = /^bytes=(\d*)-(\d*)$/;

async function wantedRange(header: string | null, fileKey: string): Promise<ByteRange | null> {
  const [, from = "", to = ""] = RANGE.exec(header ?? "") ?? [];
  if (from === "" && to === "") return null;
  if (from !== "")
    return to === ""
      ? { startBytes: Number(from) }
      : { startBytes: Number(from), endBytes: Math.max(Number(from), Number(to)) };
  const first = await readStored(fileKey, { startBytes: 0, endBytes: 0 });
  first.body.destroy();
  return { startBytes: Math.max(0, first.totalBytes - Number(to)) };
}

/** Streams a recording's preview; the store's own address is never shown. */
export const GET = route({
  params: z.object({ recordingId: z.string() }),
  handle: async ({ actor, params, request }) => {
    const { fileKey, type } = await hearRecording(actor, params);
    try {
      const range = await wantedRange(request.headers.get("range"), fileKey);
      const stored = await readStored(fileKey, range ?? undefined);
      const headers = new Headers({
        "content-type": type,
        "content-length": String(stored.lengthBytes),
        "accept-ranges": "bytes",
        "cache-control": "private, max-age=300",
      });
      if (range) {
        const last = range.startBytes + stored.lengthBytes - 1;
        headers.set("content-range", `bytes ${range.startBytes}-${last}/${stored.totalBytes}`);
      }
      return new Response(Readable.toWeb(stored.body) as ReadableStream<Uint8Array>, {
        status: range ? 206 : 200,
        headers,
      });
    } catch (error) {
      if (error instanceof UploadError && error.reason === "unsatisfiable")
        return new Response(null, { status: 416 });
      throw error;
    }
  },
});
