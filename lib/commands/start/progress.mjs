import { closeSync, fstatSync, openSync, readSync } from "node:fs";

const TICK_MS = 1_000;
const PLAIN_FIRST_LINE_MS = 2_000;
const PLAIN_LINE_EVERY_MS = 20_000;

// A reader that went away (a closed pipe or terminal) must not keep us from ending what we started.
process.stdout.on("error", () => {});

/** An expected failure: its message is all the person needs, so no stack is shown. */
export class Stop extends Error {}

export function say(line = "") {
  process.stdout.write(`${line}\n`);
}

export function secondsSince(startMs) {
  return `${((performance.now() - startMs) / 1000).toFixed(1)} s`;
}

/**
 * Runs one named stage and prints what it does and how long it took. `body` gets `report`, which
 * replaces the running text. On a terminal the line is redrawn; elsewhere a stage that takes long says
 * so after two seconds and then every twenty, so that a log shows life without flooding.
 */
export async function stage(name, body) {
  const startMs = performance.now();
  const terminal = process.stdout.isTTY === true;
  let text = "";
  let nextLineMs = startMs + PLAIN_FIRST_LINE_MS;
  const draw = () => {
    const line = `  ${name}${text === "" ? " …" : `: ${text}`}  ${secondsSince(startMs)}`;
    if (terminal) process.stdout.write(`\r\x1b[2K${line.slice(0, (process.stdout.columns ?? 80) - 1)}`);
    else if (performance.now() >= nextLineMs) {
      nextLineMs = performance.now() + PLAIN_LINE_EVERY_MS;
      say(line);
    }
  };
  const timer = setInterval(draw, TICK_MS);
  draw();
  const clear = () => {
    clearInterval(timer);
    if (terminal) process.stdout.write("\r\x1b[2K");
  };
  try {
    const result = await body((next) => {
      text = next;
      if (terminal) draw();
    });
    clear();
    const outcome = typeof result === "string" ? `: ${result}` : "";
    say(`  ${name}${outcome}  (${secondsSince(startMs)})`);
    return result;
  } catch (error) {
    clear();
    say(`  ${name}: stopped after ${secondsSince(startMs)}`);
    throw error;
  }
}

/** The last lines of a log, read from its end so that a long log costs nothing. */
export function tailOf(path, lines = 20) {
  try {
    const file = openSync(path, "r");
    try {
      const sizeBytes = fstatSync(file).size;
      const length = Math.min(sizeBytes, 16_384);
      const buffer = Buffer.alloc(length);
      readSync(file, buffer, 0, length, sizeBytes - length);
      return buffer.toString("utf8").trimEnd().split("\n").slice(-lines).join("\n");
    } finally {
      closeSync(file);
    }
  } catch {
    return `(nothing was written to ${path})`;
  }
}
