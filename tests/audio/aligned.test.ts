import { execFileSync } from "node:child_process";
import { join } from "node:path";
import { beforeAll, describe, expect, it } from "vitest";
import { decodeWhole, probe, renderAligned, TooLong } from "@/lib/audio";
import { ffmpeg, ffmpegText, tempFolder, writeFloatWav } from "./files";
import { CHORDS, song } from "./signals";

const folder = tempFolder();
const at = (name: string): string => join(folder, name);
const RATE = 48000;
const SECONDS = 16;
const START = 3;
const END = 13;

const ratioOf = (semitones: number): number => 2 ** (semitones / 12);

beforeAll(() => {
  const music = song({
    rateHz: RATE,
    bpm: 104,
    durationS: SECONDS,
    chords: [CHORDS.C, CHORDS.Am, CHORDS.F, CHORDS.G],
  });
  writeFloatWav(at("a.wav"), RATE, music);
  ffmpeg("-i", at("a.wav"), "-b:a", "128k", at("same.mp3"));
  // ffmpeg reads the same samples at another clock: an exact ratio of whole rates, 49600 / 48000 = 1.03333.
  ffmpeg("-i", at("a.wav"), "-af", "asetrate=49600,aresample=44100,volume=-5dB", at("fast.wav"));
  ffmpeg("-i", at("a.wav"), "-af", "atempo=1.1", at("tempo.wav"));
  ffmpeg("-i", at("a.wav"), "-af", `rubberband=pitch=${ratioOf(2)}`, at("pitch.wav"));
  ffmpeg("-i", at("a.wav"), "-ac", "1", "-af", "volume=6dB", at("mono.wav"));
});

const spanOf = (speed: number, offsetS: number) => ({
  bStartS: START / speed + offsetS,
  bEndS: END / speed + offsetS,
});

async function render(b: string, speed: number, pitchSemitones: number, offsetS = 0) {
  const made = await renderAligned({
    aPath: at("a.wav"),
    aStartS: START,
    aEndS: END,
    bPath: at(b),
    ...spanOf(speed, offsetS),
    speed,
    pitchSemitones,
    outPath: at("pair.flac"),
  });
  const { channels } = await decodeWhole(at("pair.flac"));
  return { made, channels };
}

/** Loudness of two of the four channels by ffmpeg's ebur128, an independent meter. */
async function loudness(side: "a" | "b"): Promise<number> {
  const map = side === "a" ? "0|1" : "2|3";
  const text = await ffmpegText(
    "-i",
    at("pair.flac"),
    "-af",
    `channelmap=${map}:stereo,ebur128`,
    "-f",
    "null",
    "-",
  );
  return Number(/I:\s*(-?[\d.]+)/.exec(text.slice(text.lastIndexOf("Summary:")))![1]);
}

/** Rises of the 10 ms amplitude of the differenced signal, every millisecond: where hits begin. */
function hits(x: Float32Array): Float64Array {
  const hop = 48;
  const envelope = Float64Array.from({ length: Math.floor(x.length / hop) - 10 }, (_, t) => {
    let energy = 0;
    for (let i = t * hop + 1; i < t * hop + 480; i++) energy += (x[i]! - x[i - 1]!) ** 2;
    return Math.sqrt(energy);
  });
  return envelope.map((value, t) => Math.max(0, value - (envelope[t - 10] ?? value)));
}

/** Milliseconds by which b's hits come after a's. */
function hitLagMs(a: Float32Array, b: Float32Array): number {
  const [x, y] = [hits(a), hits(b)];
  let best = { lag: 0, sum: -1 };
  for (let lag = -80; lag <= 80; lag++) {
    let sum = 0;
    for (let t = 100; t < x.length - 100; t++) sum += x[t]! * y[t + lag]!;
    if (sum > best.sum) best = { lag, sum };
  }
  return best.lag;
}

describe("renderAligned", () => {
  it("makes one four-channel FLAC, quad, that begins from silence", async () => {
    const { made, channels } = await render("same.mp3", 1, 0);
    expect(await probe(at("pair.flac"))).toMatchObject({
      container: "FLAC",
      channels: 4,
      sampleRateHz: RATE,
      declaredS: END - START,
    });
    const stream = execFileSync("ffprobe", [
      "-v",
      "error",
      "-of",
      "json",
      "-show_streams",
      at("pair.flac"),
    ]).toString();
    expect(JSON.parse(stream).streams[0].channel_layout).toBe("quad");
    expect(made).toMatchObject({ startA: START, durationS: END - START, method: "unaltered" });
    for (const channel of channels) {
      expect(Math.max(...channel.subarray(0, 480).map(Math.abs))).toBeLessThan(0.01);
      expect(channel.reduce((most, v) => Math.max(most, Math.abs(v)), 0)).toBeLessThanOrEqual(
        10 ** (-1 / 20),
      );
    }
  });

  it("cancels the same recording as an MP3 and says by how much", async () => {
    const { made, channels } = await render("same.mp3", 1, 0, 0.02);
    expect(Math.abs(made.startB - START)).toBeLessThan(1 / RATE);
    expect(made.residualDb).toBeLessThan(-25);
    let left = 0;
    let level = 0;
    for (let i = 0; i < channels[0]!.length; i++) {
      left += (channels[0]![i]! - made.differenceGain * channels[2]![i]!) ** 2;
      level += channels[0]![i]! ** 2;
    }
    expect(Math.abs(10 * Math.log10(left / level) - made.residualDb)).toBeLessThan(1.5);
  });

  it("undoes varispeed to the sample, from a rough speed and place, whatever the rates", async () => {
    const speed = 49600 / 48000;
    const { made, channels } = await render("fast.wav", speed * 1.0002, 12 * Math.log2(speed) + 0.01, -0.03);
    expect(made.method).toBe("varispeed undone");
    expect(Math.abs(made.speed - speed)).toBeLessThan(2e-6);
    expect(Math.abs(made.startB - START / speed)).toBeLessThan(1 / RATE);
    expect(made.residualDb).toBeLessThan(-32);
    expect(Math.abs((await loudness("a")) - (await loudness("b")))).toBeLessThanOrEqual(0.5);
    expect(Math.abs(hitLagMs(channels[0]!, channels[2]!))).toBeLessThanOrEqual(10);
  });

  it.each([
    ["tempo.wav", 1.1, 0],
    ["pitch.wav", 1, 2],
  ])("undoes %s: hits within 10 ms, loudness within 0.5 LU", async (name, speed, pitch) => {
    const { made, channels } = await render(name, speed, pitch, 0.03);
    expect(made.method).toBe("tempo and pitch undone");
    expect(Math.abs(hitLagMs(channels[0]!, channels[2]!))).toBeLessThanOrEqual(10);
    expect(Math.abs((await loudness("a")) - (await loudness("b")))).toBeLessThanOrEqual(0.5);
    expect(Math.abs(made.startB - START / speed)).toBeLessThan(0.01);
    // Waveforms that were re-made do not cancel, and the figure does not claim that they do.
    expect(made.residualDb).toBeGreaterThan(-12);
  });

  it("puts a mono recording on both of its sides, matched in level", async () => {
    const { made, channels } = await render("mono.wav", 1, 0);
    expect(channels[2]).toEqual(channels[3]);
    expect(made.gainDb).toBeLessThan(-4);
    expect(Math.abs((await loudness("a")) - (await loudness("b")))).toBeLessThanOrEqual(0.5);
  });

  it("refuses spans and ratios that make no sense, and stretches over the limit", async () => {
    const base = {
      aPath: at("a.wav"),
      bPath: at("a.wav"),
      aStartS: 1,
      aEndS: 9,
      bStartS: 1,
      bEndS: 9,
      speed: 1,
      pitchSemitones: 0,
      outPath: at("no.flac"),
    };
    await expect(renderAligned({ ...base, aEndS: 0.5 })).rejects.toBeInstanceOf(RangeError);
    await expect(renderAligned({ ...base, speed: 9 })).rejects.toBeInstanceOf(RangeError);
    await expect(renderAligned({ ...base, limitS: 5 })).rejects.toBeInstanceOf(TooLong);
  });
});
