import { randomBytes } from "node:crypto";
import { request as httpRequest, type IncomingMessage } from "node:http";
import { request as httpsRequest } from "node:https";
import { Readable } from "node:stream";
import { text } from "node:stream/consumers";
import { pipeline } from "node:stream/promises";

/** What the SDK puts into a form: one file. */
async function* formBytes(file: File, head: Buffer, tail: Buffer): AsyncGenerator<Uint8Array> {
  yield head;
  yield* file.stream();
  yield tail;
}

/**
 * `fetch` for the SDK. Node's own holds a multipart body in memory as fast as it can be read, whatever the other side
 * takes; a rendering of four hours is gigabytes, so forms go out by a request that waits for the socket.
 */
export async function fetchStreaming(input: string | URL | Request, init?: RequestInit): Promise<Response> {
  const file = init?.body instanceof FormData ? init.body.get("file") : null;
  if (!(file instanceof File)) return fetch(input, init);
  const url = new URL(input instanceof Request ? input.url : input);
  const boundary = `sedgewren-${randomBytes(16).toString("hex")}`;
  const name = file.name.replace(/["\r\n\\]/g, "_");
  const head = Buffer.from(
    `--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="${name}"\r\nContent-Type: ${file.type || "application/octet-stream"}\r\n\r\n`,
  );
  const tail = Buffer.from(`\r\n--${boundary}--\r\n`);
  const headers = Object.fromEntries(new Headers(init?.headers));
  const request = (url.protocol === "http:" ? httpRequest : httpsRequest)(url, {
    method: init?.method ?? "POST",
    headers: {
      ...headers,
      "content-type": `multipart/form-data; boundary=${boundary}`,
      "content-length": head.length + file.size + tail.length,
    },
    ...(init?.signal ? { signal: init.signal } : {}),
  });
  const answered = new Promise<IncomingMessage>((resolve, reject) => {
    request.once("response", resolve);
    request.once("error", reject);
  });
  // An early refusal closes the connection before everything is sent: the answer counts, not the broken pipe.
  const sent = pipeline(Readable.from(formBytes(file, head, tail)), request).catch(() => undefined);
  const answer = await answered;
  const body = await text(answer);
  request.destroy();
  await sent;
  return new Response(body, {
    status: answer.statusCode ?? 500,
    headers: { "content-type": answer.headers["content-type"] ?? "text/plain" },
  });
}
