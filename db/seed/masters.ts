import { statSync } from "node:fs";
import { basename, join } from "node:path";
import type { MasterKey } from "@/fixtures/audio";
import { env } from "@/lib/kernel/env";
import { ThreadHost } from "@/lib/kernel/thread";
import { storeFile } from "@/lib/uploads";

let thread: ThreadHost | null = null;

/** Renders a master of the demonstration on a thread of its own, or takes it from the cache. */
export async function renderMaster(key: MasterKey): Promise<string> {
  thread ??= new ThreadHost(new URL("./render-thread.ts", import.meta.url), 2048);
  return thread.call<string>(
    "render",
    {
      folder: join(env.MEDIA_DIR, "demonstration"),
      key: { ...key, ...(env.DEMO_CUE_SECONDS ? { seconds: env.DEMO_CUE_SECONDS } : {}) },
    },
    { timeoutS: 600 },
  );
}

export async function storeMaster(
  key: MasterKey,
  name: string,
): Promise<{ fileKey: string; sizeBytes: number }> {
  const path = await renderMaster(key);
  const fileKey = await storeFile(path, { name: `${name}-${basename(path)}`, type: "audio/flac" });
  return { fileKey, sizeBytes: statSync(path).size };
}

export async function closeDemonstration(): Promise<void> {
  await thread?.close();
  thread = null;
}
