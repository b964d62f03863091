import { readdir, rm, stat } from "node:fs/promises";
import { join } from "node:path";
import { env } from "@/lib/kernel/env";

/** Where work on stored files keeps copies and results for as long as it lasts. */
const WORK_FOLDERS = ["copies", "renders"];
/** Twice as long as any job may run, so that nothing of a worker that lives is taken. */
const LEFT_AFTER_MS = 2 * 3700 * 1000;

/** Removes what workers that were killed left on this machine's disk. Returns how many files. */
export async function removeLeftovers(now = Date.now()): Promise<number> {
  let removed = 0;
  for (const name of WORK_FOLDERS) {
    const folder = join(env.MEDIA_DIR, name);
    for (const entry of await readdir(folder).catch(() => [])) {
      const path = join(folder, entry);
      // Another worker may be tidying up too.
      const changedMs = await stat(path).then(
        (stats) => stats.mtimeMs,
        () => now,
      );
      if (now - changedMs < LEFT_AFTER_MS) continue;
      await rm(path, { force: true, recursive: true });
      removed++;
    }
  }
  return removed;
}
