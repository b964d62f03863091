import { chmodSync, existsSync, readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { expect, it } from "vitest";
import { decodeWhole } from "@/lib/audio";
import { runFfmpeg } from "@/lib/audio/native";
import { ffmpeg, tempFolder, writeFloatWav } from "./files";
import { sine } from "./signals";

const room = fileURLToPath(new URL("../../lib/audio/", import.meta.url));
const folder = tempFolder();

function importsOf(file: string): string[] {
  const text = readFileSync(join(room, file), "utf8");
  return [...text.matchAll(/^(?:import|export)[^;]*?from "([^"]+)"/gms)].map((match) => match[1]!);
}

function reach(file: string, seen = new Map<string, string[]>()): Map<string, string[]> {
  if (seen.has(file)) return seen;
  seen.set(file, importsOf(file));
  for (const name of seen.get(file)!) if (name.startsWith("./")) reach(`${name.slice(2)}.ts`, seen);
  return seen;
}

it("the browser's door reaches no Node API", () => {
  const outside = [...reach("browser.ts").values()].flat().filter((name) => !name.startsWith("./"));
  expect(new Set(outside)).toEqual(new Set(["@wasm-audio-decoders/flac", "audio-decode", "fft.js"]));
});

it("contour.ts and states.ts import nothing", () => {
  expect(importsOf("contour.ts")).toEqual([]);
  expect(importsOf("states.ts")).toEqual([]);
});

it("the room imports nothing of the project", () => {
  for (const file of readdirSync(room).filter((name) => name.endsWith(".ts"))) {
    for (const name of importsOf(file))
      expect(name, `${file} imports ${name}`).not.toMatch(/^(@\/|\.\.\/|next|react)/);
  }
});

it("AUDIO-6: a native child sees no environment and, under root, is nobody", async () => {
  process.env.AUDIO_SECRET = "sesame";
  let output = "";
  const asRoot = process.getuid?.() === 0;
  // ffmpeg's concat of its own status: /proc/self/environ and status are files that it can be asked to copy.
  const copy = async (path: string): Promise<string> => {
    output = "";
    await runFfmpeg({
      args: ["-f", "data", "-i", `file:${path}`, "-map", "0", "-c", "copy", "-f", "data", "pipe:1"],
      timeoutMs: 20_000,
      drain: async (stdout) => {
        for await (const chunk of stdout) output += String(chunk);
      },
    });
    return output;
  };
  expect(await copy("/proc/self/environ")).not.toContain("sesame");
  const status = await copy("/proc/self/status");
  expect(status).toContain("ffmpeg");
  expect(/Uid:\s+(\d+)/.exec(status)![1]).toBe(asRoot ? "65534" : String(process.getuid!()));
  delete process.env.AUDIO_SECRET;
});

it("a native child that overruns its time is ended", async () => {
  const endless = ["-re", "-f", "lavfi", "-i", "anullsrc", "-f", "null", "-"];
  await expect(runFfmpeg({ args: endless, timeoutMs: 300 })).rejects.toThrow(/SIGKILL/);
});

it("a file that only its owner may read is decoded all the same", async () => {
  writeFloatWav(join(folder, "a.wav"), 48000, [sine(48000, 500, 1, 0.3)]);
  ffmpeg("-i", join(folder, "a.wav"), "-c:a", "aac", join(folder, "end.m4a"));
  chmodSync(join(folder, "end.m4a"), 0o600);
  const { channels } = await decodeWhole(join(folder, "end.m4a"));
  expect(channels[0]!.length).toBe(48000);
  expect(existsSync(join(folder, "end.m4a"))).toBe(true);
});
