import { readFileSync, truncateSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { checkStems, Truncated } from "@/lib/audio";
import { ffmpeg, tempFolder, writeFloatWav } from "./files";
import { CHORDS, noise, song } from "./signals";

const folder = tempFolder();
const at = (name: string): string => join(folder, name);
const RATE = 48000;

const drums = [noise(RATE * 3, 1), noise(RATE * 3, 2)].map((c) =>
  c.map((v, i) => 0.2 * v * Math.exp(-(i % 12000) / 800)),
);
const keys = song({ rateHz: RATE, bpm: 100, durationS: 3, chords: [CHORDS.Am] });
const sum = (gain = 1, shift = 0): Float32Array[] =>
  [0, 1].map((c) => keys[c]!.map((v, i) => v + gain * (drums[c]![i - shift] ?? 0)));
writeFloatWav(at("drums.wav"), RATE, drums);
writeFloatWav(at("keys.wav"), RATE, keys);
ffmpeg("-i", at("keys.wav"), "-c:a", "flac", "-sample_fmt", "s32", at("keys.flac"));
const stems = [at("drums.wav"), at("keys.wav")];

// Common practice: the sum of the stems nulls against the mix to −30 dB or better.
describe("T06: stems", () => {
  it("pass where they add up, whatever their containers", async () => {
    writeFloatWav(at("mix.wav"), RATE, sum());
    const row = await checkStems(at("mix.wav"), [at("drums.wav"), at("keys.flac")]);
    expect(row).toMatchObject({ code: "T06", verdict: "pass" });
    expect(row.measured).toContain("−1");
  });

  it("are a question at a small difference, unless bus processing is declared", async () => {
    writeFloatWav(at("near.wav"), RATE, sum(0.8));
    expect(await checkStems(at("near.wav"), stems)).toMatchObject({ verdict: "warn" });
    expect(await checkStems(at("near.wav"), stems, { busProcessingDeclared: true })).toMatchObject({
      verdict: "pass",
    });
  });

  it("go back where one is missing, or another length", async () => {
    expect(await checkStems(at("mix.wav"), [at("drums.wav")])).toMatchObject({ verdict: "return" });
    writeFloatWav(
      at("short.wav"),
      RATE,
      keys.map((c) => c.subarray(0, RATE * 2)),
    );
    const row = await checkStems(at("mix.wav"), [at("drums.wav"), at("short.wav")]);
    expect(row).toMatchObject({ verdict: "return" });
    expect(row.measured).toBe("stem 2.000\u00a0s at 48.0\u00a0kHz, mix 3.000\u00a0s at 48.0\u00a0kHz");
  });

  it("that are cut short are refused, not padded", async () => {
    writeFileSync(at("cut.wav"), readFileSync(at("keys.wav")));
    truncateSync(at("cut.wav"), 400_000);
    await expect(checkStems(at("mix.wav"), [at("drums.wav"), at("cut.wav")])).rejects.toBeInstanceOf(
      Truncated,
    );
  });
});
