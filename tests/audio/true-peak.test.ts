import { describe, expect, it } from "vitest";
import { TruePeakMeter } from "@/lib/audio/true-peak";
import { noise, sine } from "./signals";

const RATE = 48000;

function peakDb(signal: Float32Array, block = 5000): number {
  const meter = new TruePeakMeter(RATE, 1, Number.POSITIVE_INFINITY);
  for (let i = 0; i < signal.length; i += block) meter.push([signal.subarray(i, i + block)]);
  return 20 * Math.log10(meter.finish().peak);
}

function faded(signal: Float32Array, fadeS: number, rateHz = RATE): Float32Array {
  const n = Math.round(fadeS * rateHz);
  return signal.map((value, i) => value * Math.min(1, i / n, (signal.length - 1 - i) / n));
}

// EBU Tech 3341 v4 (November 2023), Table 1, cases 15–23: tolerance +0.2 / −0.4 dB.
describe("EBU Tech 3341 true peak", () => {
  it.each([
    [15, 4, 0.5, 0, -6],
    [16, 4, 0.5, 45, -6],
    [17, 6, 0.5, 60, -6],
    [18, 8, 0.5, 67.5, -6],
    [19, 4, 1.41, 45, 3],
  ])("case %d: a sine of fs/%d", (_case, part, amplitude, phaseDeg, expectedDb) => {
    const signal = faded(sine(RATE, RATE / part, 1, amplitude, phaseDeg), 0.01);
    const off = peakDb(signal) - expectedDb;
    expect(off).toBeLessThanOrEqual(0.2);
    expect(off).toBeGreaterThanOrEqual(-0.4);
  });

  it.each([
    [20, 0],
    [21, 1],
    [22, 2],
    [23, 3],
  ])("case %d: one full-scale period between samples, offset %d", (_case, offset) => {
    const off = peakDb(burst(offset)) - 0;
    expect(off).toBeLessThanOrEqual(0.2);
    expect(off).toBeGreaterThanOrEqual(-0.4);
  });
});

/** At 4 fs: 0.5 of fs/6, one period of fs/4 at full scale, 0.5 of fs/6; faded, low-passed, every fourth sample. */
function burst(offset: number): Float32Array {
  const side = Array.from({ length: 24 * 500 }, (_, n) => 0.5 * Math.sin((2 * Math.PI * n) / 24));
  const middle = Array.from({ length: 16 }, (_, n) => Math.sin((2 * Math.PI * n) / 16));
  const wide = faded(Float32Array.from([...side, ...middle, ...side]), 2000 / 192000, 192000);
  const taps = Float64Array.from({ length: 255 }, (_, i) => {
    const t = i - 127;
    const cutoff = (0.95 * (RATE / 2)) / 192000;
    const sinc = t === 0 ? 2 * cutoff : Math.sin(2 * Math.PI * cutoff * t) / (Math.PI * t);
    return sinc * (0.54 + 0.46 * Math.cos((Math.PI * t) / 127));
  });
  const out: number[] = [];
  for (let i = offset; i < wide.length; i += 4) {
    let sum = 0;
    for (let k = 0; k < taps.length; k++) sum += taps[k]! * (wide[i + k - 127] ?? 0);
    out.push(sum);
  }
  return Float32Array.from(out);
}

describe("TruePeakMeter", () => {
  it("skips blocks without changing the reading: any block size gives the same peak", () => {
    const signal = noise(30000, 9).map((value, i) => value * 0.2 * (1 + Math.sin(i / 900)));
    const readings = [1, 63, 4096, 30000].map((block) => peakDb(signal, block));
    for (const reading of readings) expect(reading).toBeCloseTo(readings[0]!, 9);
  });

  it("is never under the sample peak's neighbourhood nor more than a real interpolation finds (direct sum)", () => {
    const signal = noise(2000, 4).map((value) => value * 0.5);
    let direct = 0;
    for (let i = 200; i < 1800; i++) {
      for (let p = 0; p < 16; p++) {
        let sum = 0;
        for (let k = -200; k < 200; k++) {
          const t = k - p / 16;
          const window = 0.5 + 0.5 * Math.cos((Math.PI * t) / 200);
          sum += signal[i + k]! * (t === 0 ? 1 : Math.sin(Math.PI * t) / (Math.PI * t)) * window;
        }
        direct = Math.max(direct, Math.abs(sum));
      }
    }
    const inner = signal.map((value, i) => (i < 200 || i >= 1800 ? value * 0.5 : value));
    // White noise reaches up to half the sample rate, where any finite filter differs: half a decibel.
    expect(Math.abs(peakDb(inner) - 20 * Math.log10(direct))).toBeLessThan(0.5);
  });

  it("lists the places over 0 dBTP", () => {
    const meter = new TruePeakMeter(RATE, 1, 1);
    const signal = new Float32Array(RATE * 3);
    const loud = sine(RATE, RATE / 4, 0.01, 1.2, 45);
    signal.set(faded(loud, 0.002), RATE);
    signal.set(faded(loud, 0.002), 2 * RATE);
    meter.push([signal]);
    const { overs, overCount } = meter.finish();
    expect(overCount).toBe(2);
    expect(overs[0]!.atS).toBeCloseTo(1, 1);
    expect(overs[1]!.atS).toBeCloseTo(2, 1);
  });
});
