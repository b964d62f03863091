import { openAsBlob } from "node:fs";
import { open, rename, rm } from "node:fs/promises";
import { Readable } from "node:stream";
import type { ReadableStream as WebReadableStream } from "node:stream/web";
import { UploadError } from "./errors";
import { type UploadsClient, UTFile, uploadsClient } from "./uploadthing";

export interface ByteRange {
  startBytes: number;
  /** Last byte wanted, included; left out: to the end. */
  endBytes?: number;
}

export interface StoredBytes {
  body: Readable;
  /** Bytes in this answer. */
  lengthBytes: number;
  /** Bytes of the whole file. */
  totalBytes: number;
  type: string;
}

const READ_TRIES = 3;
const STORE_TRIES = 3;

/** An address that reads one file for a short time. Never shown to a browser: our own routes stream. */
export async function signedReadUrl(
  key: string,
  expiresInS = 300,
  client: UploadsClient = uploadsClient(),
): Promise<string> {
  const { ufsUrl } = await client.api.generateSignedURL(key, { expiresIn: expiresInS });
  return ufsUrl;
}

function refusalOf(status: number, key: string): UploadError {
  if (status === 403) return new UploadError("forbidden", `the store refused the signed address of ${key}`);
  if (status === 404) return new UploadError("missing", `the store has no file ${key}`);
  if (status === 416) return new UploadError("unsatisfiable", `${key} has no such bytes`);
  return new UploadError(
    status >= 500 || status === 429 ? "unreachable" : "refused",
    `reading ${key}: the store answered ${status}`,
  );
}

/** Not awaited: where the framework keeps a second copy of an answer, cancelling one of them never settles. */
function leave(answer: Response): void {
  answer.body?.cancel().catch(() => undefined);
}

/** The bytes of one stored file, streamed; the caller must consume or destroy `body`. Throws UploadError. */
export async function readStored(
  key: string,
  range?: ByteRange,
  client: UploadsClient = uploadsClient(),
): Promise<StoredBytes> {
  const url = await signedReadUrl(key, 300, client);
  const headers: Record<string, string> = range
    ? { range: `bytes=${range.startBytes}-${range.endBytes ?? ""}` }
    : {};
  const answer = await fetch(url, { headers, redirect: "error" }).catch((error: unknown) => {
    throw new UploadError("unreachable", `reading ${key}: no answer`, { cause: error });
  });
  if (!answer.ok || !answer.body) {
    leave(answer);
    throw refusalOf(answer.status, key);
  }
  if (range && answer.status !== 206 && range.startBytes > 0) {
    leave(answer);
    throw new UploadError("refused", `the store ignored the range of ${key}`);
  }
  const lengthBytes = Number(answer.headers.get("content-length"));
  const total = /\/(\d+)$/.exec(answer.headers.get("content-range") ?? "")?.[1];
  return {
    body: Readable.fromWeb(answer.body as WebReadableStream),
    lengthBytes,
    totalBytes: total === undefined ? lengthBytes : Number(total),
    type: answer.headers.get("content-type") ?? "application/octet-stream",
  };
}

/**
 * Copies one stored file to `path`, going on from the last byte after a broken connection. The file appears under its
 * name only when it is whole.
 */
export async function copyToDisk(
  key: string,
  path: string,
  client: UploadsClient = uploadsClient(),
): Promise<{ sizeBytes: number }> {
  const draft = `${path}.part`;
  const handle = await open(draft, "w");
  let writtenBytes = 0;
  try {
    for (let tries = 1; ; tries++) {
      try {
        const stored = await readStored(key, { startBytes: writtenBytes }, client);
        for await (const part of stored.body as AsyncIterable<Buffer>) {
          await handle.write(part, 0, part.length, writtenBytes);
          writtenBytes += part.length;
        }
        if (writtenBytes !== stored.totalBytes) throw new UploadError("unreachable", `${key} ended early`);
        break;
      } catch (error) {
        if (isEmpty(error, writtenBytes)) break;
        const isFinal = error instanceof UploadError && !error.isRetryable;
        if (isFinal || tries === READ_TRIES) throw error;
      }
    }
    await handle.sync();
  } catch (error) {
    await rm(draft, { force: true });
    throw error;
  } finally {
    await handle.close();
  }
  await rename(draft, path);
  return { sizeBytes: writtenBytes };
}

/** A file of no bytes has no byte 0 to ask for. */
function isEmpty(error: unknown, writtenBytes: number): boolean {
  return writtenBytes === 0 && error instanceof UploadError && error.reason === "unsatisfiable";
}

/**
 * Puts a file made by us (a preview, a rendering) into the store, privately; returns its key. The file is streamed from
 * disk. Keys are made from name, size and time, so give each file a name of its own.
 */
export async function storeFile(
  path: string,
  { name, type }: { name: string; type: string },
  client: UploadsClient = uploadsClient(),
): Promise<string> {
  const bytes = await openAsBlob(path, { type });
  for (let tries = 1; ; tries++) {
    // A new try makes a new key, so a half-stored one is never taken for whole.
    const file = new UTFile([bytes], name, { type });
    const result = await client.api.uploadFiles(file, { acl: "private", contentDisposition: "attachment" });
    if (result.data) return result.data.key;
    if (tries === STORE_TRIES)
      throw new UploadError("unreachable", `storing ${name}: ${result.error.message}`);
  }
}

/** Deletes files for good; those that are gone already do not matter. */
export async function deleteStored(
  keys: readonly string[],
  client: UploadsClient = uploadsClient(),
): Promise<void> {
  if (keys.length === 0) return;
  const { success } = await client.api.deleteFiles([...keys]).catch((error: unknown) => {
    throw new UploadError("unreachable", "deleting files: no answer", { cause: error });
  });
  if (!success) throw new UploadError("refused", "the store did not delete the files");
}
