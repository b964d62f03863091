/** Random access to bytes, the same for a file on disk (file-source.ts) and a Blob in a browser. */
export interface ByteSource {
  readonly name: string;
  readonly sizeBytes: number;
  /** Returns up to `length` bytes from `offset`; fewer only at the end. The result is the caller's own. */
  read(offset: number, length: number): Promise<Uint8Array>;
  close(): Promise<void>;
}

export function blobSource(blob: Blob, name: string): ByteSource {
  return {
    name,
    sizeBytes: blob.size,
    read: async (offset, length) =>
      new Uint8Array(await blob.slice(offset, Math.min(blob.size, offset + length)).arrayBuffer()),
    close: async () => {},
  };
}

/** Sequential chunks from `offset` to `end`, for decoders that take a stream. */
export async function* sourceChunks(
  source: ByteSource,
  offset: number,
  end: number = source.sizeBytes,
  chunkBytes = 1 << 16,
): AsyncGenerator<Uint8Array> {
  for (let at = offset; at < end; ) {
    const chunk = await source.read(at, Math.min(chunkBytes, end - at));
    if (chunk.length === 0) return;
    at += chunk.length;
    yield chunk;
  }
}

/** Big- and little-endian reads over one header's bytes. Out of range throws RangeError, as DataView does. */
export function viewOf(bytes: Uint8Array): DataView {
  return new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
}

export function latin1(bytes: Uint8Array, start: number, length: number): string {
  let text = "";
  const end = Math.min(bytes.length, start + length);
  for (let i = start; i < end; i++) text += String.fromCharCode(bytes[i]!);
  return text;
}

/** Text up to the first NUL, trimmed; UTF-8 where it is valid UTF-8, else Latin-1. */
export function headerText(bytes: Uint8Array, start: number, length: number): string {
  const slice = bytes.subarray(start, Math.min(bytes.length, start + length));
  const nul = slice.indexOf(0);
  const body = nul < 0 ? slice : slice.subarray(0, nul);
  try {
    return new TextDecoder("utf-8", { fatal: true }).decode(body).trim();
  } catch {
    return latin1(body, 0, body.length).trim();
  }
}
