import { describe, expect, it } from "vitest";
import { BINS, SpectrumStream } from "@/lib/fingerprint/spectrum";
import { makeRandom, tone } from "./music";

const FRAME = 2048;
const HOP = 256;

function spectra(samples: Float32Array): Float32Array[] {
  const out: Float32Array[] = [];
  const stream = new SpectrumStream((power) => out.push(power.slice()));
  stream.push(samples);
  stream.finish();
  return out;
}

/** Direct transform in doubles: the definition itself. */
function directPower(samples: Float32Array, from: number, bin: number): number {
  let re = 0;
  let im = 0;
  for (let i = 0; i < FRAME; i++) {
    const windowed = samples[from + i]! * (0.5 - 0.5 * Math.cos((2 * Math.PI * i) / FRAME));
    re += windowed * Math.cos((2 * Math.PI * bin * i) / FRAME);
    im -= windowed * Math.sin((2 * Math.PI * bin * i) / FRAME);
  }
  return re * re + im * im;
}

describe("spectrum", () => {
  it("has one frame per hop and none shorter than a frame", () => {
    for (const n of [0, 2047, 2048, 2303, 2304, 2559, 2560, 10_000]) {
      expect(spectra(new Float32Array(n)).length).toBe(n < FRAME ? 0 : 1 + Math.floor((n - FRAME) / HOP));
    }
  });

  it("equals the discrete Fourier transform by its definition", () => {
    const random = makeRandom(3);
    const samples = Float32Array.from({ length: FRAME + 3 * HOP }, () => 2 * random() - 1);
    const found = spectra(samples);
    for (let frame = 0; frame < found.length; frame++) {
      const strongest = found[frame]!.reduce((top, value) => Math.max(top, value), 0);
      for (let bin = 0; bin < BINS; bin += 17) {
        const wanted = directPower(samples, frame * HOP, bin);
        expect(Math.abs(found[frame]![bin]! - wanted)).toBeLessThan(1e-5 * strongest);
      }
    }
  });

  it("puts a tone of a whole number of bins into that bin, at (A·N/4)² for Hann", () => {
    for (const bin of [20, 101, 512, 900]) {
      const [power] = spectra(tone((bin * 11_025) / FRAME, 0.25, 0.5));
      const top = power!.indexOf(power!.reduce((most, value) => Math.max(most, value), 0));
      expect(top).toBe(bin);
      expect(power![bin]! / ((0.5 * FRAME) / 4) ** 2).toBeCloseTo(1, 4);
    }
  });

  it("gives zeros for silence and keeps a constant out of all bins but the lowest two", () => {
    expect(spectra(new Float32Array(5000)).every((power) => power.every((value) => value === 0))).toBe(true);
    const [power] = spectra(new Float32Array(FRAME).fill(0.5));
    expect(power![0]).toBeCloseTo((0.5 * FRAME * 0.5) ** 2, 0);
    for (let bin = 2; bin < BINS; bin++) expect(power![bin]!).toBeLessThan(1e-6);
  });
});
