import { stopChild, stopGroup } from "./children.mjs";
import { writePrivateFile } from "./env-file.mjs";
import { say, tailOf } from "./progress.mjs";
import { describeProcess, isSameProcessAlive, readLock } from "./run-lock.mjs";

const RESTARTS_MAX = 5;
const RESTART_WINDOW_MS = 10 * 60_000;
const RESTART_DELAY_MS = 1_000;

const sleep = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

/**
 * Keeps a set of children running: one that ends by itself is started again, at most five times in ten
 * minutes, then `onGivenUp` is told. What runs is written to `recordPath`, so that the next start can end
 * what a killed start left behind.
 */
export class Supervisor {
  #children = new Map();
  #isStopping = false;

  constructor({ recordPath, onGivenUp }) {
    this.recordPath = recordPath;
    this.onGivenUp = onGivenUp;
  }

  run(name, start) {
    const entry = { start, restarts: [], child: start() };
    this.#children.set(name, entry);
    this.#record();
    void this.#watch(name, entry);
    return entry.child;
  }

  async #watch(name, entry) {
    for (;;) {
      const { code, signal } = await entry.child.exited;
      if (this.#isStopping) return;
      await stopChild(entry.child);
      const nowMs = performance.now();
      entry.restarts = entry.restarts.filter((atMs) => nowMs - atMs < RESTART_WINDOW_MS);
      const how = signal === null ? `with code ${code}` : `by ${signal}`;
      if (entry.restarts.length >= RESTARTS_MAX) {
        say(
          `\n  The ${name} ended again (${how}) and is not started any more:\n${tailOf(entry.child.output)}`,
        );
        this.onGivenUp(name);
        return;
      }
      entry.restarts.push(nowMs);
      say(`\n  The ${name} ended ${how}; starting it again. Its log: ${entry.child.output}`);
      await sleep(RESTART_DELAY_MS * entry.restarts.length);
      if (this.#isStopping) return;
      entry.child = entry.start();
      this.#record();
    }
  }

  #record() {
    const running = [...this.#children].map(([name, { child }]) => ({ name, ...describeProcess(child.pid) }));
    writePrivateFile(this.recordPath, JSON.stringify(running));
  }

  async stop() {
    this.#isStopping = true;
    await Promise.all([...this.#children.values()].map(({ child }) => stopChild(child)));
    writePrivateFile(this.recordPath, "[]");
  }
}

/** Ends what a start that was itself killed left running. Returns the names. */
export async function endLeftovers(recordPath) {
  const leftovers = (readLock(recordPath) ?? []).filter((described) => isSameProcessAlive(described));
  await Promise.all(leftovers.map(({ pid }) => stopGroup(pid)));
  return leftovers.map(({ name }) => name);
}
