import { closeSync, ftruncateSync, openSync, writeSync } from "node:fs";
import { join } from "node:path";
import { expect, it } from "vitest";
import { ANALYSIS_RATE_HZ, createResampler, measureFile, packContour } from "@/lib/audio";
import { tempFolder, writeFloatWav } from "./files";
import { CHORDS, song } from "./signals";

const folder = tempFolder();

function join2(parts: readonly Float32Array[]): Float32Array {
  const out = new Float32Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}

it("gives the mono streams that a resampler of its own gives, and reports progress to the end", async () => {
  const music = song({ rateHz: 44100, bpm: 110, durationS: 8.3, chords: [CHORDS.Em, CHORDS.C] });
  const path = join(folder, "a.wav");
  writeFloatWav(path, 44100, music);
  const streams = { mid: [] as Float32Array[], left: [] as Float32Array[], right: [] as Float32Array[] };
  const progress: number[] = [];
  const { facts, measures, contour } = await measureFile(path, {
    onMid: (samples) => void streams.mid.push(samples),
    onLeft: (samples) => void streams.left.push(samples),
    onRight: (samples) => void streams.right.push(samples),
    onProgress: (readS, totalS) => {
      expect(totalS).toBeCloseTo(8.3, 4);
      progress.push(readS);
    },
  });
  for (const take of ["mid", "left", "right"] as const) {
    const resampler = createResampler(44100, take);
    const expected = join2([resampler.push(music), resampler.finish()]);
    const got = join2(streams[take]);
    expect(got.length).toBe(Math.ceil(8.3 * ANALYSIS_RATE_HZ));
    for (let i = 0; i < got.length; i += 7) expect(Math.abs(got[i]! - expected[i]!)).toBeLessThan(1e-6);
  }
  expect(progress.at(-1)).toBeCloseTo(8.3, 4);
  expect(progress.length).toBeGreaterThan(5);
  expect([...progress].sort((a, b) => a - b)).toEqual(progress);
  expect(measures.durationS).toBeCloseTo(facts.declaredS!, 6);
  expect(contour.channels[0]!.peak.length).toBe(166);
});

it("gives a mono file's samples for all three streams", async () => {
  const [music] = song({ rateHz: 48000, bpm: 110, durationS: 3, chords: [CHORDS.Em] });
  const path = join(folder, "mono.wav");
  writeFloatWav(path, 48000, [music]);
  const heard: Float32Array[][] = [[], [], []];
  const { contour } = await measureFile(path, {
    onMid: (samples) => void heard[0]!.push(samples),
    onLeft: (samples) => void heard[1]!.push(samples),
    onRight: (samples) => void heard[2]!.push(samples),
  });
  const [mid, left, right] = heard.map(join2);
  expect(mid).toEqual(left);
  expect(right).toEqual(left);
  expect(contour.channels).toHaveLength(1);
});

it("AUDIO-3: memory is bounded: twenty minutes of stereo 24 bit (345 MB) need no more than 200 MB", async () => {
  // A sparse file: twenty minutes of digital silence takes no disk and the same path through the reader.
  const path = join(folder, "long.wav");
  const frames = 1200 * 48000;
  const head = Buffer.alloc(44);
  head.write("RIFF", 0, "latin1");
  head.writeUInt32LE(36 + frames * 6, 4);
  head.write("WAVEfmt ", 8, "latin1");
  head.writeUInt32LE(16, 16);
  head.writeUInt16LE(1, 20);
  head.writeUInt16LE(2, 22);
  head.writeUInt32LE(48000, 24);
  head.writeUInt32LE(48000 * 6, 28);
  head.writeUInt16LE(6, 32);
  head.writeUInt16LE(24, 34);
  head.write("data", 36, "latin1");
  head.writeUInt32LE(frames * 6, 40);
  const file = openSync(path, "w");
  writeSync(file, head);
  ftruncateSync(file, 44 + frames * 6);
  closeSync(file);
  const before = process.memoryUsage().rss;
  let most = 0;
  const { measures, contour } = await measureFile(path, {
    onMid: () => {},
    onProgress: () => {
      most = Math.max(most, process.memoryUsage().rss - before);
    },
  });
  expect(measures).toMatchObject({
    samples: frames,
    integratedLufs: null,
    headSilenceS: 1200,
    tailSilenceS: 0,
  });
  expect(packContour(contour).length).toBeLessThan(500_000);
  expect(most).toBeGreaterThan(0);
  expect(most).toBeLessThan(200 * 2 ** 20);
}, 120_000);
