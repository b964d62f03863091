import { spawn } from "node:child_process";
import { closeSync, openSync } from "node:fs";
import { setPriority } from "node:os";
import { Stop } from "./progress.mjs";

const GRACE_MS = 15_000;

const sleep = (ms) => new Promise((resolve) => setTimeout(resolve, ms));

// Every process group started here and not yet known to be gone; what is left at the end is ended.
const started = new Set();
const tasks = new Set();
let isClosed = false;

function remember(child) {
  if (child.pid !== undefined) started.add(child.pid);
}

function assertOpen() {
  if (isClosed) throw new Stop("Interrupted.");
}

function groupIsAlive(pid) {
  try {
    process.kill(-pid, 0);
    return true;
  } catch (error) {
    return error.code === "EPERM";
  }
}

function signalGroup(pid, signal) {
  try {
    process.kill(-pid, signal);
  } catch (error) {
    if (error.code !== "ESRCH") throw error;
  }
}

/**
 * Starts a program as the head of its own process group, so that ending it ends what it started in turn,
 * a Ctrl-C at the terminal reaches only us, and nothing that we did not start is ever signalled.
 * `output` is a log path, or "inherit".
 */
export function startChild({ name, command, args, env, cwd, output, niceness = 0 }) {
  assertOpen();
  const log = output === "inherit" ? null : openSync(output, "a");
  const child = spawn(command, args, {
    cwd,
    env,
    detached: true,
    stdio: ["ignore", log ?? "inherit", log ?? "inherit"],
  });
  remember(child);
  if (log !== null) closeSync(log);
  const exited = new Promise((resolve) => {
    child.once("exit", (code, signal) => resolve({ code, signal }));
    child.once("error", (error) => resolve({ code: null, signal: null, error }));
  });
  if (niceness > 0 && child.pid !== undefined) {
    try {
      setPriority(child.pid, niceness);
    } catch (error) {
      if (error.code !== "ESRCH" && error.errno === undefined) throw error;
    }
  }
  return {
    name,
    pid: child.pid,
    output,
    exited,
    isRunning: () => child.exitCode === null && child.signalCode === null,
  };
}

/** SIGTERM to the whole group, a wait, then SIGKILL to what is left of it. */
export async function stopChild(child, { graceMs = GRACE_MS } = {}) {
  if (child.pid === undefined) return;
  signalGroup(child.pid, "SIGTERM");
  const deadlineMs = performance.now() + graceMs;
  while (groupIsAlive(child.pid) && performance.now() < deadlineMs) await sleep(50);
  if (groupIsAlive(child.pid)) signalGroup(child.pid, "SIGKILL");
  await Promise.race([child.exited, sleep(2_000)]);
}

export function killChild(child) {
  if (child.pid !== undefined) signalGroup(child.pid, "SIGKILL");
}

/**
 * Refuses anything new and ends what runs to its own end (an installation, a build, a migration): the
 * first thing when a start is interrupted, while what those still need is there.
 */
export async function stopTasks() {
  isClosed = true;
  await Promise.all([...tasks].map(stopGroup));
}

/** Ends every group started here that still lives. */
export async function stopAllChildren() {
  isClosed = true;
  await Promise.all([...started].filter(groupIsAlive).map((pid) => stopGroup(pid)));
}

// The last resort, when this process ends without its clean-up; a signal is all that can still be sent.
process.on("exit", () => {
  for (const pid of started) if (groupIsAlive(pid)) signalGroup(pid, "SIGTERM");
});

/** Ends a process group that an earlier start left behind. */
export async function stopGroup(pid) {
  await stopChild({ pid, exited: Promise.resolve() });
}

/** Runs a program to its end, handing each line of its output on; resolves with its exit code. */
export function runToEnd({ command, args, env, cwd, onLine = () => {} }) {
  assertOpen();
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { cwd, env, detached: true, stdio: ["ignore", "pipe", "pipe"] });
    remember(child);
    tasks.add(child.pid);
    for (const stream of [child.stdout, child.stderr]) {
      let rest = "";
      stream.setEncoding("utf8");
      stream.on("data", (chunk) => {
        const lines = (rest + chunk).split(/\r?\n|\r/);
        rest = lines.pop() ?? "";
        for (const line of lines) onLine(line);
      });
      stream.on("end", () => {
        if (rest !== "") onLine(rest);
      });
    }
    child.once("error", (error) => {
      tasks.delete(child.pid);
      reject(error);
    });
    child.once("close", (code, signal) => {
      tasks.delete(child.pid);
      resolve({ code: code ?? 1, signal });
    });
  });
}
