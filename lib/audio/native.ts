import { type ChildProcess, spawn } from "node:child_process";
import { type FileHandle, open } from "node:fs/promises";
import { isAbsolute, resolve } from "node:path";
import type { Readable, Writable } from "node:stream";
import { EncodeFailed } from "./errors";

/** The unprivileged user and group `nobody` of Debian. Only a parent that is root can change to it. */
const NOBODY = 65534;
const STDERR_CHARS_MAX = 4000;

const SAFE_ARGS = [
  "-nostdin",
  "-hide_banner",
  "-loglevel",
  "error",
  "-protocol_whitelist",
  "file,pipe",
] as const;

export interface NativeRun {
  /** ffmpeg's arguments after the safe ones; never built from text of an upload. */
  args: readonly string[];
  /** Opened by the parent and handed over as descriptor 0. */
  input?: FileHandle;
  /** Opened by the parent and handed over as descriptor 3, for outputs that must be sought in. */
  output?: FileHandle;
  /** Writes the child's standard input. */
  feed?: (stdin: Writable) => Promise<void>;
  /** Reads the child's standard output. */
  drain?: (stdout: Readable) => Promise<void>;
  timeoutMs: number;
}

/** Name by which the child reaches a descriptor with seeking. */
export function descriptorPath(fd: number): string {
  return `file:/proc/self/fd/${fd}`;
}

/**
 * Runs ffmpeg on bytes that nobody has vouched for: argument array, empty environment, no protocol but files and
 * pipes, no standard input commands, an unprivileged user where the parent is root, and a time limit.
 *
 * Throws:  EncodeFailed with the end of what the child said, if it fails, is killed or overruns `timeoutMs`
 */
export async function runFfmpeg(run: NativeRun): Promise<void> {
  const asRoot = process.getuid?.() === 0;
  const child = spawn("ffmpeg", [...SAFE_ARGS, ...run.args], {
    env: { PATH: "/usr/bin:/bin" } as unknown as NodeJS.ProcessEnv,
    cwd: "/",
    ...(asRoot ? { uid: NOBODY, gid: NOBODY } : {}),
    stdio: [run.input ? run.input.fd : "pipe", "pipe", "pipe", run.output ? run.output.fd : "ignore"],
  });
  let said = "";
  child.stderr?.on("data", (chunk: Buffer) => {
    said = (said + chunk.toString("utf8")).slice(-STDERR_CHARS_MAX);
  });
  const timer = setTimeout(() => child.kill("SIGKILL"), run.timeoutMs);
  try {
    const ended = exitOf(child);
    const moves: Promise<unknown>[] = [ended];
    if (child.stdin) {
      // The child may stop reading early; its exit code says why, not the broken pipe.
      child.stdin.on("error", () => {});
      moves.push(run.feed ? run.feed(child.stdin) : Promise.resolve(child.stdin.end()));
    }
    if (child.stdout)
      moves.push(run.drain ? run.drain(child.stdout) : Promise.resolve(child.stdout.resume()));
    await Promise.all(moves);
    const { code, signal } = await ended;
    if (code !== 0)
      throw new EncodeFailed(`ffmpeg ended with ${signal ?? code}: ${said.trim() || "no message"}`);
  } catch (error) {
    child.kill("SIGKILL");
    if (error instanceof EncodeFailed) throw error;
    throw new EncodeFailed(`ffmpeg could not be run to its end: ${said.trim() || String(error)}`, error);
  } finally {
    clearTimeout(timer);
  }
}

function exitOf(child: ChildProcess): Promise<{ code: number | null; signal: NodeJS.Signals | null }> {
  return new Promise((done, fail) => {
    child.once("error", fail);
    child.once("close", (code, signal) => done({ code, signal }));
  });
}

/**
 * Opens a file for the child to write and lets the unprivileged user reopen it for as long as the child runs.
 */
export async function withOutput<T>(path: string, use: (output: FileHandle) => Promise<T>): Promise<T> {
  const output = await open(isAbsolute(path) ? path : resolve(path), "w+", 0o644);
  const asRoot = process.getuid?.() === 0;
  try {
    if (asRoot) await output.chown(NOBODY, NOBODY);
    return await use(output);
  } finally {
    if (asRoot) await output.chown(0, 0);
    await output.close();
  }
}

/** Waits for the pipe to take the bytes, or for the child to go away. */
export function writeTo(stream: Writable, bytes: Uint8Array): Promise<void> {
  return new Promise((done) => {
    if (stream.destroyed || stream.writableEnded) return done();
    stream.write(bytes, () => done());
  });
}
