import { Worker } from "node:worker_threads";

/*
 * Heavy audio work runs on a thread of its own, so that leases are renewed and pages are served meanwhile. A thread that
 * crashes, runs out of memory or hangs is ended and started again for the next call.
 */
type Waiting = {
  resolve: (value: never) => void;
  reject: (error: Error) => void;
  onProgress?: ((done: number, of: number, words: string) => void) | undefined;
  timer: NodeJS.Timeout;
};

export interface CallOptions {
  timeoutS: number;
  onProgress?: (done: number, of: number, words: string) => void;
  transfer?: ArrayBuffer[];
}

export type ThreadReply =
  | { id: number; kind: "result"; value: unknown }
  | { id: number; kind: "error"; name: string; message: string; data?: unknown }
  | { id: number; kind: "progress"; done: number; of: number; words: string };

/** An error thrown on the thread, with the name and data it had there. */
export class ThreadError extends Error {
  constructor(
    name: string,
    message: string,
    readonly data: unknown,
  ) {
    super(message);
    this.name = name;
  }
}

export class ThreadHost {
  private worker: Worker | null = null;
  private waiting = new Map<number, Waiting>();
  private lastId = 0;
  /** Raised with each start: what a caller put into the thread's memory is gone when it changes. */
  generation = 0;

  constructor(
    private readonly script: URL,
    private readonly memoryMb: number,
  ) {}

  call<T>(method: string, args: unknown, options: CallOptions): Promise<T> {
    this.worker ??= this.start();
    const id = ++this.lastId;
    return new Promise<T>((resolve, reject) => {
      const timer = setTimeout(
        () => this.end(new Error(`${method} ran longer than ${options.timeoutS} s`)),
        options.timeoutS * 1000,
      );
      this.waiting.set(id, {
        resolve: resolve as Waiting["resolve"],
        reject,
        onProgress: options.onProgress,
        timer,
      });
      this.worker?.postMessage({ id, method, args }, options.transfer ?? []);
    });
  }

  async close(): Promise<void> {
    const worker = this.worker;
    this.worker = null;
    await worker?.terminate();
  }

  private start(): Worker {
    this.generation++;
    const worker = new Worker(new URL("./thread-start.mjs", import.meta.url), {
      workerData: { script: this.script.href },
      resourceLimits: { maxOldGenerationSizeMb: this.memoryMb },
    });
    worker.on("message", (reply: ThreadReply) => this.receive(reply));
    worker.on(
      "error",
      (error) =>
        this.worker === worker && this.end(error instanceof Error ? error : new Error(String(error))),
    );
    worker.on("exit", () => this.worker === worker && this.end(new Error("the thread ended unexpectedly")));
    worker.unref();
    return worker;
  }

  private receive(reply: ThreadReply): void {
    const waiting = this.waiting.get(reply.id);
    if (!waiting) return;
    if (reply.kind === "progress") {
      waiting.onProgress?.(reply.done, reply.of, reply.words);
      return;
    }
    this.waiting.delete(reply.id);
    clearTimeout(waiting.timer);
    if (reply.kind === "result") waiting.resolve(reply.value as never);
    else waiting.reject(new ThreadError(reply.name, reply.message, reply.data));
  }

  private end(error: Error): void {
    const worker = this.worker;
    this.worker = null;
    for (const waiting of this.waiting.values()) {
      clearTimeout(waiting.timer);
      waiting.reject(error);
    }
    this.waiting.clear();
    void worker?.terminate();
  }
}
