import { existsSync, mkdirSync, renameSync, statSync } from "node:fs";
import { dirname, join } from "node:path";
import { runToEnd, startChild } from "./children.mjs";
import { childEnvironment } from "./environment.mjs";
import { projectDir } from "./paths.mjs";
import { Stop, tailOf } from "./progress.mjs";

const LOG_LIMIT_BYTES = 10_000_000;
const WORKER_NICENESS = 5;

const nextBin = join(projectDir, "node_modules/next/dist/bin/next");
const tsxBin = join(projectDir, "node_modules/tsx/dist/cli.mjs");
const script = (path) => ["--import", "tsx", join(projectDir, path)];

const sleep = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

/** A log that has grown large makes way for a new one; one old one is kept. */
export function openLog(path) {
  mkdirSync(dirname(path), { recursive: true });
  if (existsSync(path) && statSync(path).size > LOG_LIMIT_BYTES) renameSync(path, `${path}.old`);
  return path;
}

async function runScript({ path, values, onLine = () => {} }) {
  const lines = [];
  const { code } = await runToEnd({
    command: process.execPath,
    args: script(path),
    cwd: projectDir,
    env: childEnvironment({ ...values, NODE_ENV: "production" }),
    onLine(line) {
      lines.push(line);
      onLine(line);
    },
  });
  if (code !== 0) throw new Stop(`${path} ended with ${code}:\n${lines.slice(-30).join("\n")}`);
  return lines;
}

export async function migrate(values) {
  const lines = await runScript({ path: "lib/commands/migrate.ts", values });
  return lines.at(-1) ?? "";
}

/** The demo's people and what the worker still has to bring; the seed does nothing where they are in. */
export async function seed(values, report) {
  let outcome = { signIns: [] };
  await runScript({
    path: "db/seed/seed.ts",
    values,
    onLine(line) {
      const parsed = parseSeedLine(line);
      if (parsed === null) report(line.trim());
      else outcome = parsed;
    },
  });
  return outcome;
}

/** The seed ends with one line of JSON that lists the demo's sign-ins; every other line is progress. */
export function parseSeedLine(line) {
  if (!line.startsWith("{")) return null;
  try {
    const value = JSON.parse(line);
    return Array.isArray(value.signIns) ? value : null;
  } catch {
    return null;
  }
}

export function startServices({ values, servicesDir, log }) {
  return startChild({
    name: "stand-ins",
    command: process.execPath,
    args: script("fixtures/services/start.ts"),
    cwd: projectDir,
    env: childEnvironment({ ...values, SERVICES_DIR: servicesDir }),
    output: openLog(log),
  });
}

export function startSite({ values, port, distDir, log, isDev = false }) {
  return startChild({
    name: "site",
    command: process.execPath,
    args: [nextBin, isDev ? "dev" : "start", "-H", "127.0.0.1", "-p", String(port)],
    cwd: projectDir,
    env: childEnvironment({
      ...values,
      NODE_ENV: isDev ? "development" : "production",
      ...(isDev ? {} : { NEXT_DIST_DIR: distDir }),
    }),
    output: isDev ? "inherit" : openLog(log),
  });
}

export function startWorker({ values, log, isDev = false }) {
  const worker = join(projectDir, "lib/commands/worker.ts");
  return startChild({
    name: "worker",
    command: process.execPath,
    args: isDev ? [tsxBin, "watch", "--clear-screen=false", worker] : script("lib/commands/worker.ts"),
    cwd: projectDir,
    env: childEnvironment({ ...values, NODE_ENV: isDev ? "development" : "production" }),
    output: isDev ? "inherit" : openLog(log),
    // Pages go before audio work on a small machine.
    niceness: WORKER_NICENESS,
  });
}

async function statusOf(url) {
  try {
    const response = await fetch(url, { redirect: "manual", signal: AbortSignal.timeout(30_000) });
    await response.body?.cancel();
    return response.status;
  } catch {
    return null;
  }
}

/** Waits until every address answers with something better than a server error, or the child is gone. */
export async function waitForAnswers({ child, urls, limitMs = 180_000 }) {
  const deadlineMs = performance.now() + limitMs;
  for (const url of urls) {
    for (;;) {
      if (!child.isRunning()) throw new Stop(`The ${child.name} ended at once:\n${tailOf(child.output, 30)}`);
      const status = await statusOf(url);
      if (status !== null && status < 500) break;
      if (performance.now() > deadlineMs) {
        throw new Stop(
          `The ${child.name} did not answer at ${url} (last: ${status ?? "no answer"}):\n${tailOf(child.output, 30)}`,
        );
      }
      await sleep(200);
    }
  }
}

export const serviceUrls = (values) => [
  values.UPLOADTHING_INGEST_URL,
  values.STRIPE_API_BASE,
  values.RESEND_BASE_URL,
];

/** How much of the demo world is in, or null while the site cannot say. */
export async function readProgress(siteUrl) {
  try {
    const response = await fetch(`${siteUrl}/api/demo/progress`, { signal: AbortSignal.timeout(10_000) });
    if (!response.ok) return null;
    const { cuesIn, cuesTotal, waiting, step } = await response.json();
    return Number.isInteger(cuesIn) && Number.isInteger(cuesTotal)
      ? { cuesIn, cuesTotal, waiting: waiting ?? 0, step: step ?? "" }
      : null;
  } catch {
    return null;
  }
}
