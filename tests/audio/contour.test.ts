import { describe, expect, it } from "vitest";
import { createContour, packContour, reduceContour, unpackContour } from "@/lib/audio/contour";
import { noise, sine } from "./signals";

function contourOf(channels: readonly Float32Array[], rateHz: number, block = 777) {
  const meter = createContour(rateHz, channels.length, channels[0]!.length / rateHz);
  for (let i = 0; i < channels[0]!.length; i += block)
    meter.push(channels.map((c) => c.subarray(i, i + block)));
  return meter.finish();
}

describe("contours", () => {
  it("has twenty bins a second, with the peak, the RMS and the core of each", () => {
    const contour = contourOf([sine(48000, 1000, 2, 0.5), new Float32Array(96000)], 48000);
    expect(contour).toMatchObject({ seconds: 2, binsPerSecond: 20 });
    const [left, right] = contour.channels;
    expect(left!.peak).toHaveLength(40);
    for (let bin = 0; bin < 40; bin++) {
      expect(left!.peak[bin]).toBe(128);
      expect(Math.abs(left!.rms[bin]! - 255 * 0.5 * Math.SQRT1_2)).toBeLessThanOrEqual(0.51);
      expect(Math.abs(left!.core[bin]! - left!.rms[bin]!)).toBeLessThanOrEqual(1);
    }
    expect([...right!.peak, ...right!.rms, ...right!.core].every((value) => value === 0)).toBe(true);
  });

  it("keeps the core low where a bin is mostly quiet", () => {
    const short = new Float32Array(48000);
    for (let i = 0; i < 48000; i += 2400) short.set(sine(48000, 2000, 0.01, 0.9), i);
    const { channels } = contourOf([short], 48000);
    for (let bin = 0; bin < 20; bin++) {
      expect(channels[0]!.peak[bin]).toBeGreaterThan(220);
      expect(channels[0]!.core[bin]).toBe(0);
    }
  });

  it("does not depend on how the stream is cut, at rates whose bins are no whole samples", () => {
    const input = [noise(44100, 2)];
    expect(contourOf(input, 44100, 1)).toEqual(contourOf(input, 44100, 44100));
    expect(contourOf(input, 11025, 13).channels[0]!.peak).toHaveLength(80);
  });

  it("comes back from its bytes as it was, and refuses other bytes", () => {
    const contour = contourOf([noise(50000, 3), noise(50000, 4)], 48000);
    const packed = packContour(contour);
    expect(unpackContour(packed)).toEqual(contour);
    expect(() => unpackContour(packed.subarray(0, packed.length - 1))).toThrow(RangeError);
    expect(() => unpackContour(new Uint8Array(64))).toThrow(RangeError);
  });

  it("reduces to fewer bins without losing a peak", () => {
    const contour = contourOf([noise(96000, 5).map((v, i) => v * (i === 50001 ? 1 : 0.3))], 48000);
    const small = reduceContour(contour, 7);
    expect(small.channels[0]!.peak).toHaveLength(7);
    expect(Math.max(...small.channels[0]!.peak)).toBe(Math.max(...contour.channels[0]!.peak));
    expect(small.seconds).toBe(contour.seconds);
    expect(reduceContour(contour, 1000)).toBe(contour);
  });

  it("makes longer bins beyond an hour, so that the bytes stay bounded", () => {
    const meter = createContour(8000, 1, 4 * 3600);
    const hour = new Float32Array(8000 * 60);
    for (let minute = 0; minute < 240; minute++) meter.push([hour]);
    const { channels, binsPerSecond } = meter.finish();
    expect(binsPerSecond).toBe(5);
    expect(channels[0]!.peak).toHaveLength(72000);
  });
});
