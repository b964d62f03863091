import { withBusinessClock } from "@/lib/kernel/clock";
import { log, withRequestId } from "@/lib/kernel/log";
import { type MessageName, messages } from "@/lib/kernel/messages";
import {
  type ClaimedJob,
  claimJobs,
  completeJob,
  failJob,
  heartbeat,
  releaseLapsedLeases,
  reportProgress,
} from "./claim";
import type { Handlers, JobHandler } from "./handlers";

export interface WorkerOptions {
  handlers: Handlers;
  /** Light jobs that run beside the one heavy job. */
  lightAtOnce?: number;
  idleMs?: number;
  signal: AbortSignal;
  /** Called about once a minute: puts scheduled slots into the queue. */
  onTick?: () => Promise<void>;
  /** Stop when nothing is ready: for tests and for commands that drain the queue. */
  untilIdle?: boolean;
}

const TICK_MS = 30_000;

/** Claims and runs jobs until the signal; drains what is running before it returns. */
export async function runWorker(options: WorkerOptions): Promise<void> {
  const heavyNames = Object.entries(options.handlers).flatMap(([name, handler]) =>
    handler?.heavy ? [name] : [],
  );
  const lightNames = Object.keys(options.handlers).filter((name) => !heavyNames.includes(name));
  const running = new Set<Promise<void>>();
  let heavyRunning = 0;
  let lightRunning = 0;
  let lastTick = 0;

  const start = (job: ClaimedJob, done: () => void) => {
    const work = runJob(job, options.handlers, options.signal).finally(() => {
      done();
      running.delete(work);
    });
    running.add(work);
  };

  while (!options.signal.aborted) {
    // Taken before the claims: a job that ends after them may have enqueued another.
    const wasIdle = running.size === 0;
    try {
      if (Date.now() - lastTick > TICK_MS) {
        lastTick = Date.now();
        await releaseLapsedLeases();
        await options.onTick?.();
      }
      const heavy =
        heavyRunning === 0 && heavyNames.length ? await claimJobs({ limit: 1, names: heavyNames }) : [];
      const room = (options.lightAtOnce ?? 4) - lightRunning;
      const light = lightNames.length ? await claimJobs({ limit: room, names: lightNames }) : [];
      for (const job of heavy) {
        heavyRunning++;
        start(job, () => heavyRunning--);
      }
      for (const job of light) {
        lightRunning++;
        start(job, () => lightRunning--);
      }
      if (heavy.length + light.length > 0) continue;
      if (options.untilIdle && wasIdle) break;
    } catch (error) {
      log.error({ error: String(error) }, "the worker could not reach the queue; it tries again");
      await pause(1000, options.signal);
    }
    await Promise.race([pause(options.idleMs ?? 400, options.signal), ...(options.untilIdle ? running : [])]);
  }
  await Promise.allSettled(running);
}

async function runJob(job: ClaimedJob, handlers: Handlers, stop: AbortSignal): Promise<void> {
  const definition = handlers[job.name as MessageName];
  const abort = new AbortController();
  const onStop = () => abort.abort(new Error("the worker is stopping"));
  stop.addEventListener("abort", onStop, { once: true });
  const beat = setInterval(() => {
    heartbeat(job).then(
      (held) => held || abort.abort(new Error("the lease was lost")),
      (error) => log.warn({ job: job.name, error: String(error) }, "heartbeat missed"),
    );
  }, 15_000);
  try {
    if (!definition) throw new Error(`no room handles the job ${job.name}`);
    const payload = messages[job.name as MessageName].parse(job.payload);
    const context = {
      jobId: job.id,
      attempt: job.attempts,
      isLast: job.attempts >= job.attemptsMax,
      progress: progressWriter(job),
      signal: abort.signal,
    };
    const handle = definition.handle as JobHandler<MessageName>;
    const body = () => withTimeout(handle(payload as never, context), definition.timeoutS, abort);
    await withRequestId(job.id, () => (job.businessAt ? withBusinessClock(job.businessAt, body) : body()));
    await completeJob(job);
  } catch (error) {
    log.error(
      {
        job: job.name,
        id: job.id,
        attempt: job.attempts,
        error: error instanceof Error ? error.stack : String(error),
      },
      "job failed",
    );
    await failJob(job, error).catch((cause) =>
      log.error({ error: String(cause) }, "the failure could not be stored; the lease will lapse"),
    );
  } finally {
    clearInterval(beat);
    stop.removeEventListener("abort", onStop);
  }
}

function progressWriter(job: ClaimedJob) {
  let last = 0;
  return (words: string, done: number, of: number) => {
    if (Date.now() - last < 500) return;
    last = Date.now();
    reportProgress(job, { words, done, of }).catch(() => undefined);
  };
}

async function withTimeout(work: Promise<void>, seconds: number, abort: AbortController): Promise<void> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<never>((_resolve, reject) => {
    timer = setTimeout(() => {
      const error = new Error(`the job ran longer than ${seconds} s`);
      abort.abort(error);
      reject(error);
    }, seconds * 1000);
  });
  try {
    await Promise.race([work, late]);
  } finally {
    clearTimeout(timer);
  }
}

const pause = (ms: number, signal: AbortSignal) =>
  new Promise<void>((resolve) => {
    const end = () => {
      clearTimeout(timer);
      signal.removeEventListener("abort", end);
      resolve();
    };
    const timer = setTimeout(end, ms);
    signal.addEventListener("abort", end, { once: true });
  });
