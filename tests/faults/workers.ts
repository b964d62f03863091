import { type ChildProcess, spawn } from "node:child_process";
import { once } from "node:events";
import { fileURLToPath } from "node:url";
import { and, eq, inArray, lte } from "drizzle-orm";
import { db } from "@/db/client";
import { jobs } from "@/db/schema/infrastructure";
import { systemNow } from "@/lib/kernel/clock";
import { sleep } from "./random-instants";

const root = fileURLToPath(new URL("../..", import.meta.url));

export interface WorkerProcess {
  pid: number;
  /** Resolves when its modules are loaded. */
  loaded: Promise<void>;
  begin(): Promise<void>;
  /** SIGKILL. */
  kill(): Promise<void>;
}

export function spawnWorker(): WorkerProcess {
  const { VITEST: _vitest, NODE_OPTIONS: _options, ...environment } = process.env;
  const child: ChildProcess = spawn(process.execPath, ["--import", "tsx", "tests/faults/worker-process.ts"], {
    cwd: root,
    env: { ...environment, NODE_ENV: "production", LOG_LEVEL: "info" },
    stdio: ["pipe", "pipe", "pipe"],
  });
  const exited = once(child, "exit");
  let said = "";
  const heard: (() => void)[] = [];
  for (const stream of [child.stdout, child.stderr])
    stream?.on("data", (part: Buffer) => {
      said += part.toString();
      for (const look of heard) look();
    });
  const hears = (words: string) =>
    new Promise<void>((resolve, reject) => {
      const look = () => said.includes(words) && resolve();
      heard.push(look);
      look();
      exited.then(() => reject(new Error(`the worker ended before “${words}”: ${said.slice(-2000)}`)));
    });
  const loaded = hears("loaded\n");
  loaded.catch(() => undefined);
  return {
    pid: child.pid ?? 0,
    loaded,
    async begin() {
      await loaded;
      const ready = hears("the worker is ready");
      child.stdin?.end("begin\n");
      await ready;
    },
    async kill() {
      if (child.exitCode === null && child.signalCode === null) child.kill("SIGKILL");
      await exited;
    },
  };
}

/** What the dead worker held: its jobs by name. Their leases' minute is let pass at once, as a clock would. */
export async function lapseLeases(): Promise<string[]> {
  const held = await db().select({ name: jobs.name }).from(jobs).where(eq(jobs.state, "leased"));
  await db()
    .update(jobs)
    .set({ leaseUntil: new Date(systemNow().getTime() - 1000) })
    .where(eq(jobs.state, "leased"));
  return held.map(({ name }) => name);
}

/** Waits until no job (of these names) is left that may run; the test's own limit ends a wait in vain. */
export async function queueIsEmpty(names?: readonly string[]): Promise<void> {
  for (;;) {
    const open = await db()
      .select({ id: jobs.id })
      .from(jobs)
      .where(
        and(
          inArray(jobs.state, ["ready", "leased"]),
          lte(jobs.runAt, new Date(systemNow().getTime() + 600_000)),
          names ? inArray(jobs.name, [...names]) : undefined,
        ),
      )
      .limit(1);
    if (open.length === 0) return;
    await sleep(50);
  }
}
