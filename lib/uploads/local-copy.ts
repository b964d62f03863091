import { randomUUID } from "node:crypto";
import { mkdir, rm } from "node:fs/promises";
import { extname, join } from "node:path";
import { env } from "@/lib/kernel/env";
import { copyToDisk } from "./stored-files";

/**
 * Gives `work` a copy of a stored file on this machine's disk and removes it afterwards. The copy keeps the extension of
 * `name`, never its words.
 */
export async function withLocalCopy<T>(
  key: string,
  name: string,
  work: (path: string) => Promise<T>,
): Promise<T> {
  const folder = join(env.MEDIA_DIR, "copies");
  await mkdir(folder, { recursive: true });
  const extension = extname(name).toLowerCase();
  const path = join(folder, `${randomUUID()}${/^\.[a-z0-9]{1,5}$/.test(extension) ? extension : ""}`);
  try {
    await copyToDisk(key, path);
    return await work(path);
  } finally {
    await rm(path, { force: true });
    await rm(`${path}.part`, { force: true });
  }
}
