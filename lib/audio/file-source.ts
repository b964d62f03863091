import { open } from "node:fs/promises";
import { basename } from "node:path";
import type { ByteSource } from "./byte-source";

/** Opens a regular file for random reads. The caller closes it. */
export async function openFileSource(path: string): Promise<ByteSource> {
  const handle = await open(path, "r");
  const stat = await handle.stat();
  if (!stat.isFile()) {
    await handle.close();
    throw new TypeError("openFileSource needs a regular file");
  }
  return {
    name: basename(path),
    sizeBytes: stat.size,
    read: async (offset, length) => {
      const want = Math.max(0, Math.min(length, stat.size - offset));
      const bytes = new Uint8Array(want);
      let got = 0;
      while (got < want) {
        const { bytesRead } = await handle.read(bytes, got, want - got, offset + got);
        if (bytesRead === 0) break;
        got += bytesRead;
      }
      return got === want ? bytes : bytes.subarray(0, got);
    },
    close: () => handle.close(),
  };
}
