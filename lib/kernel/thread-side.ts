import { parentPort } from "node:worker_threads";
import { Bug } from "./errors";
import type { ThreadReply } from "./thread";

type Progress = (done: number, of: number, words: string) => void;
// biome-ignore lint/suspicious/noExplicitAny: each method has its own argument type; the caller's side is typed.
type Methods = Record<string, (args: any, progress: Progress) => Promise<unknown> | unknown>;

const PROGRESS_EVERY_MS = 250;

/** The thread's side of ThreadHost: answers calls one after another. */
export function serveThread(methods: Methods): void {
  const port = parentPort;
  if (!port) throw new Bug("serveThread was called outside a worker thread");
  let queue: Promise<void> = Promise.resolve();
  const answer = async (call: { id: number; method: string; args: unknown }): Promise<void> => {
    let last = 0;
    const progress: Progress = (done, of, words) => {
      if (Date.now() - last < PROGRESS_EVERY_MS) return;
      last = Date.now();
      port.postMessage({ id: call.id, kind: "progress", done, of, words } satisfies ThreadReply);
    };
    try {
      const method = methods[call.method];
      if (!method) throw new Bug(`the thread has no method ${call.method}`);
      port.postMessage({
        id: call.id,
        kind: "result",
        value: await method(call.args, progress),
      } satisfies ThreadReply);
    } catch (error) {
      const { name, message } = error instanceof Error ? error : new Error(String(error));
      const data = Object.fromEntries(Object.entries(error as object));
      port.postMessage({ id: call.id, kind: "error", name, message, data } satisfies ThreadReply);
    }
  };
  port.on("message", (call) => {
    queue = queue.then(() => answer(call));
  });
}
