import { createHash } from "node:crypto";
import { readFileSync } from "node:fs";
import { createServer, type Server } from "node:http";
import type { AddressInfo } from "node:net";
import { join } from "node:path";
import { buffer } from "node:stream/consumers";
import { fileURLToPath } from "node:url";
import { type Browser, chromium, type Page } from "@playwright/test";
import { build } from "vite";
import { afterAll, beforeAll, beforeEach, expect, test } from "vitest";
import type { StartUpload, UploadProgress, UploadTask } from "@/components/uploads/upload-client";
import { startFiles } from "@/fixtures/services/files/files";
import type { StandIn } from "@/fixtures/services/server";
import {
  type ArrivedFile,
  makeUploadHandlers,
  openUploads,
  readStored,
  type UploadGate,
  type UploadsConfig,
} from "@/lib/uploads";
import { TOKEN, temporaryDir } from "./support";

const root = fileURLToPath(new URL("../..", import.meta.url));
const SIZE_BYTES = 24_000_000;
const PAGE = `<!doctype html><title>Upload</title>
<script type="module">import { startUpload } from "/upload-client.js"; window.startUpload = startUpload</script>`;
const dir = temporaryDir();
const arrivals: ArrivedFile[] = [];
let service: StandIn;
let site: Server;
let siteUrl = "";
let config: UploadsConfig;
let browser: Browser;
let page: Page;
let announced = 0;

/** The browser's half as it ships, behind a page that has nothing else. */
async function bundle(): Promise<void> {
  await build({
    root,
    configFile: false,
    logLevel: "silent",
    define: { "process.env.NODE_ENV": '"production"' },
    build: {
      outDir: join(dir.path, "page"),
      lib: {
        entry: join(root, "components/uploads/upload-client.ts"),
        formats: ["es"],
        fileName: "upload-client",
      },
    },
  });
}

async function startSite(): Promise<void> {
  const gate: UploadGate = {
    admit: async ({ subjectId }) => ({ context: { subjectId } }),
    arrived: async (file) => {
      arrivals.push(file);
      return { versionId: `ver_of_${file.name}` };
    },
  };
  let handlers: ReturnType<typeof makeUploadHandlers> | undefined;
  site = createServer(async (request, response) => {
    if (request.url?.startsWith("/api/uploadthing")) {
      if (request.url.includes("actionType=upload")) announced += 1;
      handlers ??= makeUploadHandlers({ master: gate, paper: gate, confidential: gate }, config);
      const answer = await handlers.POST(
        new Request(siteUrl + request.url, {
          method: "POST",
          headers: request.headers as Record<string, string>,
          body: await buffer(request),
        }) as never,
      );
      response.writeHead(answer.status, { "content-type": "application/json" });
      return response.end(await answer.text());
    }
    const isScript = request.url === "/upload-client.js";
    response.writeHead(200, { "content-type": isScript ? "text/javascript" : "text/html" });
    response.end(isScript ? readFileSync(join(dir.path, "page/upload-client.js")) : PAGE);
  });
  await new Promise<void>((resolve) => site.listen(0, "127.0.0.1", resolve));
  siteUrl = `http://127.0.0.1:${(site.address() as AddressInfo).port}`;
}

beforeAll(async () => {
  await bundle();
  await startSite();
  service = await startFiles({ port: 0, dataDir: dir.path, token: TOKEN, siteOrigins: [siteUrl] });
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
  browser = await chromium.launch({
    executablePath: process.env.CHROMIUM_PATH ?? "/usr/bin/chromium",
    args: [
      "--no-sandbox",
      "--disable-gpu",
      "--disable-quic",
      "--no-first-run",
      "--disable-background-networking",
      "--disable-component-update",
      "--disable-sync",
    ],
  });
});

beforeEach(async () => {
  arrivals.length = 0;
  announced = 0;
  page = await (await browser.newContext()).newPage();
  await page.goto(siteUrl);
});

afterAll(async () => {
  await browser.close();
  await service.close();
  site.closeAllConnections();
  await new Promise((resolve) => site.close(resolve));
  dir.remove();
});

/** The same bytes in the page and here: a counter's low byte, stirred so that no two stretches look alike. */
function fileBytes(): Buffer {
  const bytes = Buffer.alloc(SIZE_BYTES);
  for (let index = 0; index < SIZE_BYTES; index++) bytes[index] = Math.imul(index, 2654435761) >>> 24;
  return bytes;
}

/** Makes the file in the page and starts its upload there as `window.task`. */
async function start(name: string): Promise<void> {
  await page.waitForFunction(() => "startUpload" in window);
  await page.evaluate(
    async ([name, size]) => {
      const bytes = new Uint8Array(size);
      for (let index = 0; index < size; index++) bytes[index] = Math.imul(index, 2654435761) >>> 24;
      const state = window as unknown as Window;
      state.progress = [];
      state.task = await state.startUpload({
        slug: "master",
        subjectId: "del_1",
        file: new File([bytes], name, { type: "audio/wav", lastModified: 1_700_000_000_000 }),
        onProgress: (progress) => state.progress.push(progress),
      });
    },
    [name, SIZE_BYTES] as const,
  );
}

interface Window {
  startUpload(upload: StartUpload): Promise<UploadTask>;
  task: UploadTask;
  progress: UploadProgress[];
}

const sentBeyond = (bytes: number) =>
  page.waitForFunction(
    (wanted) => ((window as unknown as Window).progress.at(-1)?.sentBytes ?? 0) > wanted,
    bytes,
  );
const done = () => page.evaluate(() => (window as unknown as Window).task.done);
const lastProgress = () => page.evaluate(() => (window as unknown as Window).progress.at(-1));

/** A line slow enough that an upload can be caught in the middle of it. */
async function slowDown(bytesPerS: number): Promise<void> {
  const session = await page.context().newCDPSession(page);
  await session.send("Network.enable");
  await session.send("Network.emulateNetworkConditions", {
    offline: false,
    latency: 0,
    downloadThroughput: -1,
    uploadThroughput: bytesPerS,
  });
}

async function expectStored(key: string): Promise<void> {
  const stored = await buffer((await readStored(key, undefined, openUploads(config))).body);
  const digest = (bytes: Buffer) => createHash("sha256").update(bytes).digest("hex");
  expect(digest(stored)).toBe(digest(fileBytes()));
}

test("UPLOADS-3: in a browser an upload is paused, goes on, and arrives whole", async () => {
  await slowDown(8_000_000);
  await start("paused.wav");
  await sentBeyond(4_000_000);
  await page.evaluate(() => (window as unknown as Window).task.pause());
  expect((await lastProgress())?.secondsLeft).toBeNull();
  await page.evaluate(() => (window as unknown as Window).task.resume());
  const { key, answer } = await done();
  expect(answer).toEqual({ versionId: "ver_of_paused.wav" });
  expect(await lastProgress()).toMatchObject({ sentBytes: SIZE_BYTES, totalBytes: SIZE_BYTES });
  await expectStored(key);
  expect(arrivals.map((file) => file.key)).toEqual([key]);
});

test("UPLOADS-3: after a reload the same file, picked again, goes on from what the store holds", async () => {
  await slowDown(8_000_000);
  await start("reloaded.wav");
  await sentBeyond(6_000_000);
  await page.reload();
  await start("reloaded.wav");
  const first = await page.waitForFunction(() => (window as unknown as Window).progress[0]);
  expect(((await first.jsonValue()) as { sentBytes: number }).sentBytes).toBeGreaterThan(1_000_000);
  const { key } = await done();
  await expectStored(key);
  expect(announced).toBe(1);
  expect(await page.evaluate(() => localStorage.length)).toBe(0);
});
