import { linkSync, readFileSync, rmSync, unlinkSync, writeFileSync } from "node:fs";

/** Ticks since boot at which a process began: with the id it names one process even after ids are reused. */
export function startedAt(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, "utf8");
    return stat.slice(stat.lastIndexOf(")") + 2).split(" ")[19] ?? null;
  } catch {
    return null;
  }
}

export function describeProcess(pid) {
  return { pid, startedAt: startedAt(pid) };
}

/** Whether exactly the process that was described still runs (a zombie counts as gone). */
export function isSameProcessAlive(described) {
  if (!Number.isInteger(described?.pid) || described.startedAt === null) return false;
  if (startedAt(described.pid) !== described.startedAt) return false;
  try {
    const stat = readFileSync(`/proc/${described.pid}/stat`, "utf8");
    return stat.slice(stat.lastIndexOf(")") + 2).charAt(0) !== "Z";
  } catch {
    return false;
  }
}

export function readLock(path) {
  try {
    return JSON.parse(readFileSync(path, "utf8"));
  } catch (error) {
    if (error.code === "ENOENT" || error instanceof SyntaxError) return null;
    throw error;
  }
}

/** One process at a time removes a dead holder's lock, or a slow one would remove its successor's. */
function removeStale(path, draft) {
  const breaker = `${path}.breaking`;
  try {
    linkSync(draft, breaker);
  } catch (error) {
    if (error.code !== "EEXIST") throw error;
    if (!isSameProcessAlive(readLock(breaker))) rmSync(breaker, { force: true });
    return;
  }
  try {
    if (!isSameProcessAlive(readLock(path))) rmSync(path, { force: true });
  } finally {
    rmSync(breaker, { force: true });
  }
}

const pause = (ms) => Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, ms);

/**
 * Takes the lock file at `path` for this process. Returns `{ release }`, or `{ holder }` when a living
 * process holds it. A lock whose holder is gone is removed and taken. The file appears complete or not
 * at all (hard link), so nobody reads a half-written holder.
 */
export function takeLock(path, details = {}) {
  const draft = `${path}.${process.pid}`;
  writeFileSync(draft, JSON.stringify({ ...describeProcess(process.pid), ...details }), { mode: 0o600 });
  try {
    for (let attempt = 0; attempt < 100; attempt += 1) {
      try {
        linkSync(draft, path);
        return {
          release() {
            if (readLock(path)?.pid === process.pid) rmSync(path, { force: true });
          },
        };
      } catch (error) {
        if (error.code !== "EEXIST") throw error;
      }
      const holder = readLock(path);
      if (holder !== null && isSameProcessAlive(holder)) return { holder };
      removeStale(path, draft);
      pause(5);
    }
    throw new Error(`could not take ${path}: it is taken and dropped again and again`);
  } finally {
    unlinkSync(draft);
  }
}
