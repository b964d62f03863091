import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { axisInstant, axisSteps, edgeAnchor, percent, versionInstant } from "@/components/contour/axis";
import type { ContourData } from "@/components/contour/contour-data";
import { contourPaths, UNITS_PER_PX } from "@/components/contour/contour-paths";
import { referenceInstant, undrawnSpans } from "@/components/contour/passages";

function flat(seconds: number, peak: number, rms: number, core: number, channels = 2): ContourData {
  const bins = seconds * 20;
  const channel = { peak: Array(bins).fill(peak), rms: Array(bins).fill(rms), core: Array(bins).fill(core) };
  return { seconds, binsPerSecond: 20, channels: Array(channels).fill(channel) };
}

interface Walked {
  points: [number, number][];
  closed: number;
}

/** Reads the drawn path back as SVG defines it: q, and t with its control reflected (SVG 2, 9.3.7). */
function walk(path: string): Walked {
  const points: [number, number][] = [];
  let at: [number, number] = [0, 0];
  let control: [number, number] = [0, 0];
  let closed = 0;
  for (const [, letter, body] of path.matchAll(/([Mqtz])([^Mqtz]*)/g)) {
    const n = [...(body ?? "").matchAll(/-?\d+(?:\.\d+)?/g)].map(([value]) => Number(value));
    if (letter === "M") at = [n[0]!, n[1]!];
    if (letter === "z") closed += 1;
    const step = letter === "q" ? 4 : 2;
    for (let i = 0; (letter === "q" || letter === "t") && i < n.length; i += step) {
      control =
        letter === "q"
          ? [at[0] + n[i]!, at[1] + n[i + 1]!]
          : [2 * at[0] - control[0], 2 * at[1] - control[1]];
      const to: [number, number] = [at[0] + n[i + step - 2]!, at[1] + n[i + step - 1]!];
      for (let s = 0; s <= 4; s++) {
        const t = s / 4;
        const along = (k: 0 | 1) => (1 - t) ** 2 * at[k] + 2 * t * (1 - t) * control[k] + t ** 2 * to[k];
        points.push([along(0), along(1)]);
      }
      at = to;
    }
  }
  return { points, closed };
}

const reach = (path: string, mid: number) => Math.max(...walk(path).points.map(([, y]) => Math.abs(y - mid)));

describe("a contour is drawn from what was measured", () => {
  it("full scale reaches the edge, half scale half-way, left above and right below", () => {
    const paths = contourPaths(flat(10, 255, 128, 0), { width: 200, height: 40 });
    expect([paths.viewWidth, paths.viewHeight]).toEqual([2000, 400]);
    expect(reach(paths.peak, 200)).toBeCloseTo(200, 0);
    expect(Math.abs(reach(paths.rms, 200) - 100)).toBeLessThanOrEqual(2);
    const sides = contourPaths(
      { ...flat(10, 0, 0, 0), channels: [flat(10, 255, 0, 0).channels[0]!, flat(10, 51, 0, 0).channels[0]!] },
      { width: 200, height: 40 },
    );
    const ys = walk(sides.peak).points.map(([, y]) => y);
    expect(Math.min(...ys)).toBe(0);
    expect(Math.abs(Math.max(...ys) - 240)).toBeLessThanOrEqual(2);
  });

  it("a mono recording is drawn alike on both sides", () => {
    const ys = walk(contourPaths(flat(10, 100, 50, 20, 1), { width: 100, height: 40 }).peak).points.map(
      ([, y]) => y,
    );
    expect(200 - Math.min(...ys)).toBeCloseTo(Math.max(...ys) - 200, 6);
  });

  it("silence draws nothing, and a pause parts a contour into islands", () => {
    expect(contourPaths(flat(10, 0, 0, 0), { width: 200, height: 40 })).toMatchObject({
      peak: "",
      rms: "",
      core: "",
    });
    const peak = Array.from({ length: 200 }, (_, bin) => (bin > 80 && bin < 120 ? 0 : 200));
    const data = { seconds: 10, binsPerSecond: 20, channels: [{ peak, rms: peak, core: peak }] };
    expect(walk(contourPaths(data, { width: 200, height: 40 }).peak).closed).toBe(2);
  });

  it("one loud bin is not lost, however narrow the strip", () => {
    const peak = Array.from({ length: 4000 }, (_, bin) => (bin === 1234 ? 255 : 10));
    const data = { seconds: 200, binsPerSecond: 20, channels: [{ peak, rms: peak, core: peak }] };
    const { points } = walk(contourPaths(data, { width: 150, height: 40 }).peak);
    const [x] = points.reduce((top, point) => (point[1] < top[1] ? point : top));
    expect(Math.abs(x / (150 * UNITS_PER_PX) - 1234.5 / 4000)).toBeLessThan(0.02);
  });

  it("a stretch is drawn on its own scale of seconds", () => {
    const paths = contourPaths(flat(100, 200, 100, 50), { height: 30, fromS: 20, toS: 50, pxPerSecond: 4 });
    expect(paths.viewWidth).toBe(30 * 4 * UNITS_PER_PX);
    const xs = walk(paths.peak).points.map(([x]) => x);
    expect([Math.min(...xs), Math.max(...xs)]).toEqual([0, 1200]);
  });

  it("core lies within RMS and RMS within peak, and nothing leaves the strip", () => {
    const bins = fc.array(fc.tuple(fc.nat(255), fc.nat(255), fc.nat(255)), { minLength: 20, maxLength: 300 });
    fc.assert(
      fc.property(bins, fc.integer({ min: 40, max: 600 }), (levels, width) => {
        const sorted = levels.map((three) => [...three].sort((a, b) => b - a));
        const [peak, rms, core] = [0, 1, 2].map((k) => sorted.map((three) => three[k]!));
        const channels = [{ peak: peak!, rms: rms!, core: core! }];
        const paths = contourPaths(
          { seconds: levels.length / 20, binsPerSecond: 20, channels },
          { width, height: 60 },
        );
        for (const path of [paths.peak, paths.rms, paths.core]) expect(path).not.toContain("NaN");
        expect(reach(paths.peak || "M0 300", 300)).toBeLessThanOrEqual(300);
        const outline = new Map(
          walk(paths.peak).points.map(([x, y]) => [`${Math.round(x)} ${y < 300}`, Math.abs(y - 300)]),
        );
        for (const [x, y] of walk(paths.rms).points) {
          const outer = outline.get(`${Math.round(x)} ${y < 300}`);
          if (outer !== undefined) expect(Math.abs(y - 300)).toBeLessThanOrEqual(outer + 4);
        }
      }),
      { numRuns: 60 },
    );
  });

  it("a strip of a three-minute cue stays small enough to send by the dozen", () => {
    const wave = Array.from({ length: 3600 }, (_, bin) => Math.round(120 + 100 * Math.sin(bin * 1.7)));
    const data = {
      seconds: 180,
      binsPerSecond: 20,
      channels: [0, 1].map(() => ({ peak: wave, rms: wave, core: wave })),
    };
    const { peak, rms, core } = contourPaths(data, { width: 760, height: 32 });
    expect(peak.length + rms.length + core.length).toBeLessThan(16_000);
  });
});

describe("the time axis", () => {
  it("places are shares of the width", () => {
    expect(percent(70, 190)).toBe("36.842%");
    expect(percent(0, 190)).toBe("0%");
  });

  it.each([
    [30.4, 5],
    [154, 10],
    [3600, 300],
  ])("%d seconds are graduated by %d", (seconds, blockS) => {
    expect(axisSteps(seconds).blockS).toBe(blockS);
  });

  it("labels at the ends do not leave the drawing", () => {
    expect([edgeAnchor(0), edgeAnchor(0.5), edgeAnchor(1)]).toEqual(["start", "middle", "end"]);
  });

  // A 60 cut from A, from D and E, and from the end of a cue of 2:34.
  const pieces = [
    { fromS: 0, toS: 13.3, atS: 0 },
    { fromS: 13.3, toS: 46.6, atS: 80 },
    { fromS: 46.6, toS: 60, atS: 140.6 },
  ];

  it("the same instant of a cutdown is where that piece comes from", () => {
    expect(versionInstant(pieces, 10)).toBe(10);
    expect(versionInstant(pieces, 90)).toBeCloseTo(23.3, 9);
    expect(axisInstant(pieces, 50)).toBeCloseTo(144, 9);
  });

  it("an instant that was cut out goes on at the next piece", () => {
    expect(versionInstant(pieces, 40)).toBe(13.3);
    expect(versionInstant(pieces, 200)).toBe(46.6);
  });

  it("there and back is the same instant, within every piece", () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 59.9, noNaN: true }), (versionS) => {
        expect(versionInstant(pieces, axisInstant(pieces, versionS))).toBeCloseTo(versionS, 6);
      }),
    );
  });

  it("a version of the same length needs no pieces", () => {
    expect(versionInstant(undefined, 42)).toBe(42);
    expect(axisInstant(undefined, 42)).toBe(42);
  });
});

describe("passages on one axis", () => {
  const passages = [
    { number: 1, aFromS: 10, aToS: 20, bFromS: 30, bToS: 40.3 },
    { number: 2, aFromS: 50, aToS: 60, bFromS: 80, bToS: 90.3 },
  ];

  it("an instant of A has its instant of B inside a passage, and none outside", () => {
    expect(referenceInstant(passages, 15)).toBeCloseTo(35.15, 9);
    expect(referenceInstant(passages, 60)).toBeCloseTo(90.3, 9);
    expect(referenceInstant(passages, 30)).toBeNull();
  });

  it("what is not drawn is everything between, before and after", () => {
    expect(
      undrawnSpans(
        [
          { fromS: 80, toS: 90 },
          { fromS: 30, toS: 40 },
        ],
        100,
      ),
    ).toEqual([
      { fromS: 0, toS: 30 },
      { fromS: 40, toS: 80 },
      { fromS: 90, toS: 100 },
    ]);
    expect(undrawnSpans([{ fromS: 0, toS: 100 }], 100)).toEqual([]);
    expect(undrawnSpans([], 100)).toEqual([{ fromS: 0, toS: 100 }]);
  });
});
