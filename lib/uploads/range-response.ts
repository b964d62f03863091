import { UploadError } from "./errors";
import { type ByteRange, readStored } from "./stored-files";
import { webBody } from "./web-body";

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

/** Streams a stored file through our own route, with ranges; the store's own address is never shown. */
export async function streamStored(
  request: Request,
  file: { fileKey: string; type: string; downloadName?: string; maxAgeS?: number; etag?: string },
): Promise<Response> {
  try {
    const range = await wantedRange(request.headers.get("range"), file.fileKey);
    const stored = await readStored(file.fileKey, range ?? undefined);
    const headers = new Headers({
      "content-type": file.type,
      "content-length": String(stored.lengthBytes),
      "accept-ranges": "bytes",
      "cache-control": file.maxAgeS ? `private, max-age=${file.maxAgeS}` : "private, no-store",
    });
    if (file.downloadName)
      headers.set(
        "content-disposition",
        `attachment; filename="${file.downloadName.replace(/[^\w.-]/g, "_")}"; filename*=UTF-8''${encodeURIComponent(file.downloadName)}`,
      );
    if (file.etag) headers.set("etag", `"${file.etag}"`);
    if (range)
      headers.set(
        "content-range",
        `bytes ${range.startBytes}-${range.startBytes + stored.lengthBytes - 1}/${stored.totalBytes}`,
      );
    return new Response(webBody(stored.body), {
      status: range ? 206 : 200,
      headers,
    });
  } catch (error) {
    if (error instanceof UploadError && error.reason === "unsatisfiable")
      return new Response(null, { status: 416 });
    throw error;
  }
}
