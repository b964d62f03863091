import { UploadError } from "./errors";
import { type ByteRange, readStored } from "./stored-files";
import { webBody } from "./web-body";

/** One range as browsers ask for it (RFC 9110, 14.1.2); anything else is answered with the whole file. */
const RANGE = /^bytes=(\d*)-(\d*)$/;

function wantedRange(header: string | null, sizeBytes: number): ByteRange | null {
  const [, from = "", to = ""] = RANGE.exec(header ?? "") ?? [];
  if (from === "" && to === "") return null;
  if (from === "") return { startBytes: Math.max(0, sizeBytes - Number(to)) };
  return to === ""
    ? { startBytes: Number(from) }
    : { startBytes: Number(from), endBytes: Math.max(Number(from), Number(to)) };
}

/** Streams a stored file of known size through our own route, whole or one range of it. */
export async function serveStored(
  file: { key: string; sizeBytes: number; headers: Record<string, string> },
  rangeHeader: string | null,
): Promise<Response> {
  const range = wantedRange(rangeHeader, file.sizeBytes);
  try {
    const stored = await readStored(file.key, range ?? undefined);
    const headers = new Headers({
      ...file.headers,
      "content-length": String(stored.lengthBytes),
      "accept-ranges": "bytes",
    });
    if (range) {
      const last = range.startBytes + stored.lengthBytes - 1;
      headers.set("content-range", `bytes ${range.startBytes}-${last}/${stored.totalBytes}`);
    }
    return new Response(webBody(stored.body), {
      status: range ? 206 : 200,
      headers,
    });
  } catch (error) {
    if (error instanceof UploadError && error.reason === "unsatisfiable")
      return new Response(null, {
        status: 416,
        headers: { "content-range": `bytes */${file.sizeBytes}` },
      });
    throw error;
  }
}
