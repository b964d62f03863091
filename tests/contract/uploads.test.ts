import { createHash, createHmac, randomBytes } from "node:crypto";
import { mkdtempSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { createServer, request as httpRequest, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { join } from "node:path";
import { Readable } from "node:stream";
import { buffer } from "node:stream/consumers";
import { afterAll, afterEach, beforeAll, beforeEach, expect, test, vi } from "vitest";
import { startFiles } from "@/fixtures/services/files/files";
import type { StandIn } from "@/fixtures/services/server";
import { Forbidden } from "@/lib/kernel/errors";
import {
  type ArrivedFile,
  copyToDisk,
  deleteStored,
  makeUploadHandlers,
  openUploads,
  readStored,
  signedReadUrl,
  storeFile,
  UploadError,
  type UploadGate,
  type UploadsClient,
  type UploadsConfig,
} from "@/lib/uploads";
import { API_KEY, control, TOKEN, temporaryDir } from "./support";

const dir = temporaryDir();
const arrivals: { file: ArrivedFile; context: Record<string, string> }[] = [];
let waiting: (() => void)[] = [];
let failures = 0;
let site: Server;
let siteUrl = "";
let service: StandIn;
let client: UploadsClient;

/** The site's upload address, on the real handler of the SDK. */
async function startSite(configOf: () => UploadsConfig): Promise<void> {
  const gate: UploadGate = {
    admit: async ({ headers, subjectId, files }) => {
      if (headers.get("x-person") === "stranger") throw new Forbidden("This delivery is not yours.");
      return {
        context: { subjectId, person: headers.get("x-person") ?? "" },
        fileIds: files.map((file) => `ver_${file.name}`),
      };
    },
    arrived: async (file, context) => {
      if (file.name === "fails-once.wav" && failures++ === 0) throw new Error("the database is away");
      arrivals.push({ file, context });
      for (const resolve of waiting.splice(0)) resolve();
      return { versionId: file.customId ?? "" };
    },
  };
  let handlers: ReturnType<typeof makeUploadHandlers> | undefined;
  site = createServer(async (request, response) => {
    handlers ??= makeUploadHandlers({ master: gate, paper: gate, confidential: gate }, configOf());
    const body = await buffer(request);
    const answer = await handlers.POST(
      new Request(`${siteUrl}${request.url}`, {
        method: "POST",
        headers: request.headers as Record<string, string>,
        body,
      }) as never,
    );
    response.writeHead(answer.status, { "content-type": "application/json" });
    response.end(await answer.text());
  });
  await new Promise<void>((resolve) => site.listen(0, "127.0.0.1", resolve));
  siteUrl = `http://127.0.0.1:${(site.address() as AddressInfo).port}`;
}

beforeAll(async () => {
  let config: UploadsConfig | undefined;
  await startSite(() => config as UploadsConfig);
  service = await startFiles({
    port: 0,
    dataDir: dir.path,
    token: TOKEN,
    siteOrigins: [siteUrl],
    callbackWaitMs: 5000,
  });
  config = {
    UPLOADTHING_TOKEN: TOKEN,
    UPLOADTHING_INGEST_URL: service.url,
    UPLOADTHING_API_URL: service.url,
    UPLOADTHING_CALLBACK_URL: `${siteUrl}/api/uploadthing`,
    UPLOADTHING_UFS_HOST: service.url.replace("http://127.0.0.1", "localhost"),
    UPLOADTHING_UFS_APP_ID_LOCATION: "path",
    UPLOADTHING_LOG_LEVEL: "None",
    UPLOADTHING_IS_DEV: false,
  };
  client = openUploads(config);
});

afterAll(async () => {
  await service.close();
  await new Promise((resolve) => site.close(resolve));
  dir.remove();
});

beforeEach(() => {
  // The SDK warns of fields of its own answers that it reads itself.
  vi.spyOn(console, "warn").mockImplementation((message: unknown) => {
    if (!String(message).includes("[uploadthing][deprecated]")) throw new Error(String(message));
  });
});

afterEach(() => {
  vi.restoreAllMocks();
  arrivals.length = 0;
  waiting = [];
});

async function announce(
  file: { name: string; size: number; type: string },
  slug = "master",
  person = "ailsa",
): Promise<Response> {
  return fetch(`${siteUrl}/api/uploadthing?actionType=upload&slug=${slug}`, {
    method: "POST",
    headers: { "content-type": "application/json", "x-person": person },
    body: JSON.stringify({ files: [{ ...file, lastModified: 1 }], input: { subjectId: "del_1" } }),
  });
}

async function presign(file: {
  name: string;
  size: number;
  type: string;
}): Promise<{ url: string; key: string }> {
  const answer = await announce(file);
  const [presigned] = (await answer.json()) as { url: string; key: string }[];
  if (!presigned) throw new Error("nothing was signed");
  return presigned;
}

function multipart(bytes: Buffer): { body: Buffer<ArrayBuffer>; type: string } {
  const head =
    '--edge\r\nContent-Disposition: form-data; name="file"; filename="blob"\r\nContent-Type: application/octet-stream\r\n\r\n';
  return {
    body: Buffer.concat([Buffer.from(head), bytes, Buffer.from("\r\n--edge--\r\n")]),
    type: "multipart/form-data; boundary=edge",
  };
}

function put(url: string, bytes: Buffer, startBytes = 0): Promise<Response> {
  const { body, type } = multipart(bytes);
  return fetch(url, {
    method: "PUT",
    headers: { "content-type": type, range: `bytes=${startBytes}-` },
    body,
  });
}

/** Sends the start of a body and hangs up, as a pause does; resolves when the store says that it holds something. */
async function putAndHangUp(url: string, bytes: Buffer, sentBytes: number): Promise<number> {
  const { body, type } = multipart(bytes);
  const request = httpRequest(url, {
    method: "PUT",
    headers: { "content-type": type, "content-length": body.length, range: "bytes=0-" },
  });
  request.on("error", () => undefined);
  await new Promise<void>((resolve) => request.write(body.subarray(0, sentBytes), () => resolve()));
  let held = 0;
  while (held < sentBytes / 2) held = await heldBytes(url);
  request.destroy();
  return heldBytes(url);
}

async function heldBytes(url: string): Promise<number> {
  return Number((await fetch(url, { method: "HEAD" })).headers.get("x-ut-range-start"));
}

async function reasonOf(work: Promise<unknown>): Promise<string> {
  const error = await work.then(
    () => undefined,
    (caught: unknown) => caught,
  );
  if (!(error instanceof UploadError)) throw new Error(`expected an UploadError, got ${String(error)}`);
  return error.reason;
}

async function upload(bytes: Buffer, name: string): Promise<string> {
  const { url, key } = await presign({ name, size: bytes.length, type: "audio/wav" });
  const answer = await put(url, bytes);
  if (answer.status !== 200) throw new Error(await answer.text());
  return key;
}

test("UPLOADS-2: a finished upload reaches the gate with its context, its own id and its key", async () => {
  const bytes = randomBytes(200_000);
  const { url, key } = await presign({ name: "Lantern Steps.wav", size: bytes.length, type: "audio/wav" });
  const answer = (await (await put(url, bytes)).json()) as { serverData: unknown; fileHash: string };
  expect(answer.serverData).toEqual({ versionId: "ver_Lantern Steps.wav" });
  expect(answer.fileHash).toBe(createHash("md5").update(bytes).digest("hex"));
  expect(arrivals).toEqual([
    {
      file: {
        key,
        name: "Lantern Steps.wav",
        sizeBytes: bytes.length,
        type: "audio/wav",
        customId: "ver_Lantern Steps.wav",
      },
      context: { subjectId: "del_1", person: "ailsa" },
    },
  ]);
  const stored = await readStored(key, undefined, client);
  expect((await buffer(stored.body)).equals(bytes)).toBe(true);
  expect(stored).toMatchObject({ lengthBytes: bytes.length, totalBytes: bytes.length, type: "audio/wav" });
});

test("UPLOADS-2: a forged or altered message of arrival is refused and reaches no gate", async () => {
  const body = JSON.stringify({
    status: "uploaded",
    metadata: { context: { subjectId: "del_1" } },
    origin: service.url,
    file: {
      name: "a.wav",
      size: 1,
      type: "audio/wav",
      lastModified: 1,
      customId: null,
      key: "forged",
      url: "",
      appUrl: "",
      ufsUrl: "",
      fileHash: "",
    },
  });
  const sign = (text: string, key: string) =>
    `hmac-sha256=${createHmac("sha256", key).update(text).digest("hex")}`;
  const post = (signature: string | null) =>
    fetch(`${siteUrl}/api/uploadthing?slug=master`, {
      method: "POST",
      headers: {
        "content-type": "application/json",
        "uploadthing-hook": "callback",
        ...(signature ? { "x-uploadthing-signature": signature } : {}),
      },
      body,
    });
  expect((await post(null)).status).toBe(400);
  expect((await post(sign(body, "sk_live_other"))).status).toBe(400);
  expect((await post(sign(body.replace("forged", "other"), API_KEY))).status).toBe(400);
  expect(arrivals).toEqual([]);
});

test("the gate's own sentence reaches the browser; a wrong kind and too large a file are refused", async () => {
  const refused = await announce({ name: "a.wav", size: 10, type: "audio/wav" }, "master", "stranger");
  expect(refused.status).toBe(403);
  expect(await refused.json()).toEqual({ message: "This delivery is not yours." });
  const tooLarge = await announce({ name: "a.wav", size: 9 * 1024 ** 3, type: "audio/wav" });
  expect(tooLarge.status).toBe(400);
  expect(await tooLarge.json()).toEqual({ message: "Invalid config: FileSizeMismatch" });
  expect((await announce({ name: "a.wav", size: 10, type: "audio/wav" }, "unknown")).status).toBe(404);
});

test("UPLOADS-3: an upload that was cut off goes on from the bytes the store holds", async () => {
  const bytes = randomBytes(3_000_000);
  const { url, key } = await presign({ name: "long.wav", size: bytes.length, type: "audio/wav" });
  const held = await putAndHangUp(url, bytes, 2_000_000);
  expect(held).toBeGreaterThan(1_000_000);
  expect(held).toBeLessThan(2_000_001);
  const beyond = await put(url, bytes.subarray(0, 10), bytes.length);
  expect(beyond.status).toBe(400);
  const answer = await put(url, bytes.subarray(held), held);
  expect(((await answer.json()) as { fileHash: string }).fileHash).toBe(
    createHash("md5").update(bytes).digest("hex"),
  );
  expect(arrivals).toHaveLength(1);
  // The answer may have been lost: the client asks how far it was and sends nothing more.
  expect(await heldBytes(url)).toBe(bytes.length);
  expect((await put(url, Buffer.alloc(0), bytes.length)).status).toBe(200);
  expect(arrivals).toHaveLength(1);
  expect((await buffer((await readStored(key, undefined, client)).body)).equals(bytes)).toBe(true);
});

test("a boundary that looks like the file's own bytes does not end it early", async () => {
  const bytes = Buffer.concat([
    randomBytes(70_000),
    Buffer.from("\r\n--edg"),
    randomBytes(5),
    Buffer.from("\r\n--edgf\r\n"),
    randomBytes(70_000),
  ]);
  const key = await upload(bytes, "boundary.wav");
  expect((await buffer((await readStored(key, undefined, client)).body)).equals(bytes)).toBe(true);
});

test("more or fewer bytes than declared, a tampered address and a late one are refused", async () => {
  const { url } = await presign({ name: "size.wav", size: 1000, type: "audio/wav" });
  expect((await put(url, randomBytes(1001))).status).toBe(400);
  expect((await put(url, randomBytes(999))).status).toBe(400);
  expect(await heldBytes(url)).toBe(0);
  expect((await put(url.replace("size.wav", "other.wav"), randomBytes(1000))).status).toBe(403);
  expect((await put(url.slice(0, url.indexOf("&signature=")), randomBytes(1000))).status).toBe(403);
  const expired = url.replace(/expires=\d+/, `expires=${Date.now() - 1000}`);
  const unsigned = expired.slice(0, expired.indexOf("&signature="));
  const signature = createHmac("sha256", API_KEY).update(unsigned).digest("hex");
  expect(
    (await put(`${unsigned}&signature=${encodeURIComponent(`hmac-sha256=${signature}`)}`, randomBytes(1000)))
      .status,
  ).toBe(403);
});

test("UPLOADS-1: a file is read by a signed address only, whole or in ranges", async () => {
  const bytes = randomBytes(100_000);
  const key = await upload(bytes, "ranges.wav");
  const url = await signedReadUrl(key, 60, client);
  const unsigned = url.slice(0, url.indexOf("?"));
  expect((await fetch(unsigned)).status).toBe(403);
  expect((await fetch(url.replace(/expires=(\d)/, "expires=9$1"))).status).toBe(403);
  expect((await fetch(url.replace(key, `${key}x`))).status).toBe(403);
  const other = openUploads({
    ...client.config,
    UPLOADTHING_TOKEN: Buffer.from(
      JSON.stringify({ apiKey: "sk_live_other", appId: "contract", regions: ["lo1"] }),
    ).toString("base64"),
  });
  expect(await reasonOf(readStored(key, undefined, other))).toBe("forbidden");
  // Forms of range and of their answers: RFC 9110, section 14.
  const rangeOf = async (header: string) => {
    const answer = await fetch(url, { headers: { range: header } });
    return {
      status: answer.status,
      range: answer.headers.get("content-range"),
      bytes: Buffer.from(await answer.arrayBuffer()),
    };
  };
  expect(await rangeOf("bytes=0-0")).toEqual({
    status: 206,
    range: "bytes 0-0/100000",
    bytes: bytes.subarray(0, 1),
  });
  expect(await rangeOf("bytes=99990-200000")).toEqual({
    status: 206,
    range: "bytes 99990-99999/100000",
    bytes: bytes.subarray(99_990),
  });
  expect(await rangeOf("bytes=-10")).toEqual({
    status: 206,
    range: "bytes 99990-99999/100000",
    bytes: bytes.subarray(99_990),
  });
  expect((await rangeOf("bytes=100000-")).status).toBe(416);
  const part = await readStored(key, { startBytes: 500, endBytes: 599 }, client);
  expect(part).toMatchObject({ lengthBytes: 100, totalBytes: 100_000 });
  expect(await buffer(part.body)).toEqual(bytes.subarray(500, 600));
  expect(await reasonOf(readStored("nosuchkeyatall", undefined, client))).toBe("missing");
});

test("UPLOADS-5: a copy that is cut off goes on, and appears only when it is whole", async () => {
  const bytes = randomBytes(2_000_000);
  const key = await upload(bytes, "copy.wav");
  const target = mkdtempSync(join(dir.path, "copy-"));
  const path = join(target, "copy.wav");
  await control(service.url, {
    rules: [
      { match: "GET /a/", act: "cut", afterBytes: 700_000 },
      { match: "GET /a/", act: "fail", status: 503 },
    ],
  });
  expect(await copyToDisk(key, path, client)).toEqual({ sizeBytes: bytes.length });
  expect(readFileSync(path).equals(bytes)).toBe(true);
  await control(service.url, { rules: [{ match: "GET /a/", act: "drop", times: 3 }] });
  expect(await reasonOf(copyToDisk(key, join(target, "never.wav"), client))).toBe("unreachable");
  expect(await reasonOf(copyToDisk("nosuchkeyatall", join(target, "never.wav"), client))).toBe("missing");
  expect(readdirSync(target)).toEqual(["copy.wav"]);
});

test("a file of ours is stored privately, tried again after a failure, read back and deleted", async () => {
  const bytes = randomBytes(1_500_000);
  const path = join(dir.path, "preview.mp3");
  writeFileSync(path, bytes);
  await control(service.url, { rules: [{ match: "PUT /", act: "fail", status: 500 }] });
  const key = await storeFile(path, { name: "rec_1 preview.mp3", type: "audio/mpeg" }, client);
  const stored = await readStored(key, undefined, client);
  expect(stored.type).toBe("audio/mpeg");
  expect((await buffer(stored.body)).equals(bytes)).toBe(true);
  const url = await signedReadUrl(key, 60, client);
  expect((await fetch(url.slice(0, url.indexOf("?")))).status).toBe(403);
  const listed = await client.api.listFiles({ limit: 1 });
  expect(listed.files[0]).toMatchObject({
    key,
    name: "rec_1 preview.mp3",
    size: bytes.length,
    status: "Uploaded",
  });
  await deleteStored([key], client);
  await deleteStored([key], client);
  expect(await reasonOf(readStored(key, undefined, client))).toBe("missing");
});

test("an empty file is stored, read and copied as one", async () => {
  const path = join(dir.path, "empty.bin");
  writeFileSync(path, "");
  const key = await storeFile(path, { name: "empty.bin", type: "application/octet-stream" }, client);
  const copy = join(dir.path, "empty.copy");
  expect(await copyToDisk(key, copy, client)).toEqual({ sizeBytes: 0 });
  expect(readFileSync(copy)).toHaveLength(0);
});

test("the site may be told of a file twice, and late", async () => {
  await control(service.url, {
    rules: [
      { match: "outgoing callback master", act: "repeat", count: 1 },
      { match: "outgoing callback master", act: "hold" },
    ],
  });
  const first = await upload(randomBytes(100), "twice.wav");
  while (arrivals.length < 2) await new Promise<void>((resolve) => waiting.push(resolve));
  expect(arrivals.map(({ file }) => file.key)).toEqual([first, first]);
  const { url, key } = await presign({ name: "late.wav", size: 100, type: "audio/wav" });
  const sending = put(url, randomBytes(100));
  while ((await control(service.url, { release: "in order" })) === 0)
    await new Promise((resolve) => setTimeout(resolve, 20));
  expect((await sending).status).toBe(200);
  expect(arrivals.at(-1)?.file.key).toBe(key);
});

test("a file that the gate could not take in is announced again until it is taken", async () => {
  const key = await upload(randomBytes(100), "fails-once.wav");
  expect(failures).toBe(2);
  expect(arrivals.map(({ file }) => file.key)).toEqual([key]);
});

test("only the site's own pages may upload from a browser", async () => {
  const { url } = await presign({ name: "cors.wav", size: 10, type: "audio/wav" });
  const ask = (origin: string) =>
    fetch(url, {
      method: "OPTIONS",
      headers: {
        origin,
        "access-control-request-method": "PUT",
        "access-control-request-headers": "b3,range,traceparent",
      },
    });
  const own = await ask(siteUrl);
  expect(own.headers.get("access-control-allow-origin")).toBe(siteUrl);
  expect(own.headers.get("access-control-allow-headers")).toBe("b3,range,traceparent");
  expect((await ask("https://elsewhere.example")).headers.get("access-control-allow-origin")).toBeNull();
});

test("a body that comes in many pieces and without a length is stored whole", async () => {
  const sizeBytes = 16_000_000;
  const { url, key } = await presign({ name: "large.wav", size: sizeBytes, type: "audio/wav" });
  const chunk = Buffer.alloc(1_000_000, 7);
  const head = multipart(Buffer.alloc(0)).body.toString().split("\r\n\r\n")[0];
  const body = Readable.from(
    (function* () {
      yield Buffer.from(`${head}\r\n\r\n`);
      for (let sent = 0; sent < sizeBytes; sent += chunk.length) yield chunk;
      yield Buffer.from("\r\n--edge--\r\n");
    })(),
  );
  const answer = await fetch(url, {
    method: "PUT",
    headers: { "content-type": "multipart/form-data; boundary=edge" },
    body,
    duplex: "half",
  } as never);
  expect(answer.status).toBe(200);
  expect((await readStored(key, { startBytes: 0, endBytes: 0 }, client)).totalBytes).toBe(sizeBytes);
});
