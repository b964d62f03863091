import { execFile, execFileSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { promisify } from "node:util";
import { afterAll } from "vitest";

/** A folder that goes away with the test file. */
export function tempFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), "audio-"));
  afterAll(() => rmSync(folder, { recursive: true, force: true }));
  return folder;
}

export function ffmpeg(...args: string[]): void {
  execFileSync("ffmpeg", ["-nostdin", "-v", "error", "-y", ...args]);
}

export const ffmpegText = async (...args: string[]): Promise<string> =>
  (await promisify(execFile)("ffmpeg", ["-nostdin", "-hide_banner", ...args], { maxBuffer: 1 << 26 })).stderr;

/** A plain float WAV written byte by byte, so that readers are tested against something that is not the writer. */
export function writeFloatWav(path: string, rateHz: number, channels: readonly Float32Array[]): void {
  const frames = channels[0]!.length;
  const width = channels.length;
  const out = Buffer.alloc(44 + frames * width * 4);
  out.write("RIFF", 0, "latin1");
  out.writeUInt32LE(out.length - 8, 4);
  out.write("WAVEfmt ", 8, "latin1");
  out.writeUInt32LE(16, 16);
  out.writeUInt16LE(3, 20);
  out.writeUInt16LE(width, 22);
  out.writeUInt32LE(rateHz, 24);
  out.writeUInt32LE(rateHz * width * 4, 28);
  out.writeUInt16LE(width * 4, 32);
  out.writeUInt16LE(32, 34);
  out.write("data", 36, "latin1");
  out.writeUInt32LE(frames * width * 4, 40);
  for (let c = 0; c < width; c++) {
    for (let i = 0; i < frames; i++) out.writeFloatLE(channels[c]![i]!, 44 + 4 * (i * width + c));
  }
  writeFileSync(path, out);
}
