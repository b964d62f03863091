import { readFileSync, statSync, truncateSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, expect, test, vi } from "vitest";
import { copyToDisk, openUploads, storeFile, type UploadsClient } from "@/lib/uploads";
import { type ChildStandIn, freePort, spawnStandIn, TOKEN, temporaryDir } from "./support";

const SIZE_BYTES = 240_000_000;
const LIMIT_BYTES = SIZE_BYTES / 2;

const dir = temporaryDir();
let service: ChildStandIn;
let client: UploadsClient;

beforeAll(async () => {
  vi.spyOn(console, "warn").mockImplementation(() => undefined);
  service = await spawnStandIn("files", dir.path, await freePort());
  client = openUploads({
    UPLOADTHING_TOKEN: TOKEN,
    UPLOADTHING_INGEST_URL: service.url,
    UPLOADTHING_API_URL: service.url,
    UPLOADTHING_CALLBACK_URL: undefined,
    UPLOADTHING_UFS_HOST: service.url.replace("http://127.0.0.1", "localhost"),
    UPLOADTHING_UFS_APP_ID_LOCATION: "path",
    UPLOADTHING_LOG_LEVEL: "None",
    UPLOADTHING_IS_DEV: false,
  });
});

afterAll(async () => {
  await service.kill();
  dir.remove();
});

function residentBytes(pid: number): number {
  return Number(/VmRSS:\s+(\d+)/.exec(readFileSync(`/proc/${pid}/status`, "utf8"))?.[1]) * 1024;
}

/** The greatest growth of a process while `work` runs. */
async function growthDuring(pids: readonly number[], work: () => Promise<unknown>): Promise<number[]> {
  const before = pids.map(residentBytes);
  const peak = [...before];
  const sample = () => {
    for (const [index, pid] of pids.entries()) peak[index] = Math.max(peak[index]!, residentBytes(pid));
  };
  const timer = setInterval(sample, 20);
  await work();
  sample();
  clearInterval(timer);
  return peak.map((bytes, index) => bytes - before[index]!);
}

test("a large file goes into the store and back without being held in memory on either side", async () => {
  const path = join(dir.path, "long.wav");
  writeFileSync(path, "RIFF");
  truncateSync(path, SIZE_BYTES);
  const copy = join(dir.path, "copy.wav");
  const growth = await growthDuring([process.pid, service.pid], async () => {
    const key = await storeFile(path, { name: "long.wav", type: "audio/wav" }, client);
    await copyToDisk(key, copy, client);
  });
  expect(statSync(copy).size).toBe(SIZE_BYTES);
  for (const bytes of growth) expect(bytes).toBeLessThan(LIMIT_BYTES);
});
