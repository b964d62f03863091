import { join } from "node:path";
import { expect, it } from "vitest";
import { measureFile } from "@/lib/audio";
import { ffmpegText, tempFolder, writeFloatWav } from "./files";
import { CHORDS, noise, song, tones } from "./signals";

// The other meter is ffmpeg's ebur128 filter, an independent implementation of BS.1770 and Tech 3342.
const folder = tempFolder();

/** Averaged twice: up to half the sample rate any two interpolation filters differ. */
function softNoise(length: number, seed: number): Float32Array {
  const once = noise(length, seed).map((value, i, all) => 0.5 * (value + (all[i - 1] ?? 0)));
  return once.map((value, i) => 0.5 * (value + (once[i - 1] ?? 0)));
}

const CASES: Record<string, { rateHz: number; make: () => Float32Array[] }> = {
  song: {
    rateHz: 48000,
    make: () => song({ rateHz: 48000, bpm: 96, durationS: 16, chords: [CHORDS.C, CHORDS.F] }),
  },
  "noise that swells": {
    rateHz: 44100,
    make: () =>
      [3, 8].map((seed) =>
        softNoise(44100 * 30, seed).map((v, i) => v * (0.02 + 0.4 * (i / (44100 * 30)) ** 2)),
      ),
  },
  "mono steps": {
    rateHz: 48000,
    make: () => [
      tones(48000, 440, [
        [-30, 8],
        [-12, 8],
        [null, 4],
        [-20, 8],
      ]),
    ],
  },
};

it.each(Object.entries(CASES))("agrees with ffmpeg on %s", async (name, { rateHz, make }) => {
  const path = join(folder, `${name}.wav`);
  writeFloatWav(path, rateHz, make());
  const { measures } = await measureFile(path);
  const text = await ffmpegText("-i", path, "-af", "ebur128=peak=true", "-f", "null", "-");
  const summary = text.slice(text.lastIndexOf("Summary:"));
  const number = (key: string): number => Number(new RegExp(`${key}:\\s*(-?[\\d.]+)`).exec(summary)![1]);
  // ffmpeg prints one decimal.
  expect(Math.abs(measures.integratedLufs! - number("I"))).toBeLessThanOrEqual(0.1);
  expect(Math.abs(measures.rangeLu! - number("LRA"))).toBeLessThanOrEqual(0.3);
  expect(Math.abs(measures.truePeakDbtp! - number("Peak"))).toBeLessThanOrEqual(0.25);
});
