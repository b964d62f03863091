import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  comparability,
  createFingerprinter,
  ENGINE_VERSION,
  fingerprint,
  mirrorFingerprint,
} from "@/lib/fingerprint";
import { crc32 } from "@/lib/fingerprint/crc32";
import { packFingerprint } from "@/lib/fingerprint/pack";
import { composeScore, join, render, silence, slice, tone } from "./music";

const music = render(composeScore(1, 20));
const whole = fingerprint(music);

/** A short tone in silence: its one peak is where the tone is loudest. */
function ping(hz: number, atS: number, lengthS: number): Float32Array {
  const out = silence(lengthS);
  for (let i = 0; i < out.length; i++) {
    const s = i / 11_025 - atS;
    out[i] = 0.5 * Math.exp(-((s / 0.05) ** 2)) * Math.sin((2 * Math.PI * hz * i) / 11_025);
  }
  return out;
}

describe("landmarks", () => {
  it("stand at the pitch and moment of a ping: p = 12·log2(f / 55 Hz), the middle of the frame", () => {
    for (const [hz, atS] of [
      [220, 1.3],
      [440, 2],
      [1234.5, 1.777],
      [3000, 2.22],
    ] as const) {
      const fp = fingerprint(ping(hz, atS, 4));
      const loudest = fp.ranks.findIndex((ranks) => (ranks & 31) === 0);
      const timeS = ((fp.timeUnits[loudest]! / 32) * 256 + 1024) / 11_025;
      expect(Math.abs(timeS - atS)).toBeLessThan(0.005);
      expect(Math.abs(fp.pitchUnits[loudest]! / 128 - 12 * Math.log2(hz / 55))).toBeLessThan(0.03);
    }
  });

  it("are some fifty a second in music, ordered by time", () => {
    const perS = whole.timeUnits.length / 20;
    expect(perS).toBeGreaterThan(25);
    expect(perS).toBeLessThanOrEqual(75);
    for (let i = 1; i < whole.timeUnits.length; i++) {
      expect(whole.timeUnits[i]!).toBeGreaterThanOrEqual(whole.timeUnits[i - 1]!);
    }
  });

  it("do not change with polarity, nor with gain that is a power of two", () => {
    for (const gain of [-1, 0.25, 2]) expect(fingerprint(music.map((value) => gain * value))).toEqual(whole);
  });

  it("hardly change with any other gain", () => {
    const louder = fingerprint(music.map((value) => 0.3 * value));
    const known = new Set(Array.from(whole.timeUnits, (time, i) => `${time}:${whole.pitchUnits[i]}`));
    const same = Array.from(louder.timeUnits).filter((time, i) =>
      known.has(`${time}:${louder.pitchUnits[i]}`),
    );
    expect(same.length).toBeGreaterThan(0.98 * whole.timeUnits.length);
  });

  it("shift with silence put in front, and change in nothing else (common practice, no source)", () => {
    const hops = 40;
    const shifted = fingerprint(join(new Float32Array(hops * 256), music));
    const own = new Map(
      Array.from(shifted.timeUnits, (time, i) => [`${time}:${shifted.pitchUnits[i]}`, shifted.ranks[i]]),
    );
    let checked = 0;
    for (let i = 0; i < whole.timeUnits.length; i++) {
      if (whole.timeUnits[i]! < 100 * 32) continue;
      expect(own.get(`${whole.timeUnits[i]! + hops * 32}:${whole.pitchUnits[i]}`)).toBe(whole.ranks[i]);
      checked++;
    }
    expect(checked).toBeGreaterThan(400);
  });

  it("are local: what changes two seconds away leaves them as they were (common practice, no source)", () => {
    const other = render(composeScore(2, 20));
    const changed = fingerprint(join(slice(music, 0, 12), slice(other, 12, 20)));
    const untilUnits = Math.floor((10 * 11_025) / 256) * 32;
    const until = (fp: typeof whole) =>
      Array.from(fp.timeUnits, (time, i) => [time, fp.pitchUnits[i], fp.ranks[i]]).filter(
        ([time]) => time! < untilUnits,
      );
    expect(until(changed)).toEqual(until(whole));
    expect(until(whole).length).toBeGreaterThan(250);
  });
});

describe("streaming", () => {
  it("in chunks of any length equals the whole", () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 1, max: 40_000 }), { minLength: 1, maxLength: 12 }),
        (lengths) => {
          const stream = createFingerprinter();
          let at = 0;
          for (let i = 0; at < music.length; i++) {
            const length = lengths[i % lengths.length]!;
            stream.push(music.subarray(at, at + length));
            at += length;
          }
          expect(stream.finish()).toEqual(whole);
        },
      ),
      { numRuns: 8 },
    );
  });

  it("refuses more sound after the end", () => {
    const stream = createFingerprinter();
    stream.finish();
    expect(() => stream.push(new Float32Array(1))).toThrow("push after finish");
    expect(() => stream.finish()).toThrow("finish was called twice");
  });

  it("names the first sample that is no number", () => {
    for (const [value, name] of [
      [Number.NaN, "NaN"],
      [Number.POSITIVE_INFINITY, "Infinity"],
      [Number.NEGATIVE_INFINITY, "-Infinity"],
    ] as const) {
      const stream = createFingerprinter();
      stream.push(new Float32Array(3000));
      const chunk = new Float32Array(100);
      chunk[7] = value;
      expect(() => stream.push(chunk)).toThrow(`sample 3007 is ${name}; samples must be finite numbers`);
    }
  });
});

describe("what cannot be compared", () => {
  it("is silence, all of it or most of it", () => {
    const none = fingerprint(silence(30));
    expect(none.timeUnits.length).toBe(0);
    expect(comparability(none)).toEqual({ comparable: false, reason: "silence" });
    expect(none.notComparable).toEqual([{ startS: 0, endS: 30, reason: "silence" }]);
  });

  it("is listed: twenty seconds of music before seventy of silence compare for twenty", () => {
    const fp = fingerprint(join(music, silence(70)));
    expect(comparability(fp)).toEqual({ comparable: true });
    expect(fp.contentS).toBeGreaterThan(19);
    expect(fp.contentS).toBeLessThan(21);
    expect(fp.notComparable.at(-1)).toMatchObject({ endS: 90, reason: "silence" });
  });

  it("is a steady tone and a constant", () => {
    expect(comparability(fingerprint(tone(440, 30)))).toEqual({ comparable: false, reason: "tone" });
    expect(comparability(fingerprint(silence(30).fill(0.25))).comparable).toBe(false);
  });

  it("is a piece under five seconds", () => {
    expect(comparability(fingerprint(slice(music, 3, 4.8)))).toEqual({
      comparable: false,
      reason: "too short",
    });
  });

  it("is an input shorter than one frame, and an empty one", () => {
    for (const n of [0, 1, 2047]) {
      const fp = fingerprint(music.subarray(0, n));
      expect(fp.timeUnits.length).toBe(0);
      expect(comparability(fp).comparable).toBe(false);
    }
  });

  it("is not music", () => {
    expect(comparability(whole)).toEqual({ comparable: true });
    expect(whole.notComparable).toEqual([]);
  });
});

describe("mirror", () => {
  it("of the landmarks holds nearly all landmarks of the reversed sound", () => {
    const reversed = fingerprint(music.slice().reverse());
    const mirrored = mirrorFingerprint(whole);
    let near = 0;
    for (let i = 0; i < mirrored.timeUnits.length; i++) {
      const found = reversed.timeUnits.some(
        (time, j) =>
          Math.abs(time - mirrored.timeUnits[i]!) <= 16 &&
          Math.abs(reversed.pitchUnits[j]! - mirrored.pitchUnits[i]!) <= 13,
      );
      if (found) near++;
    }
    expect(near).toBeGreaterThan(0.85 * mirrored.timeUnits.length);
  });

  it("twice is the original", () => {
    const twice = mirrorFingerprint(mirrorFingerprint(whole));
    expect(twice.timeUnits).toEqual(whole.timeUnits);
    expect(twice.pitchUnits).toEqual(whole.pitchUnits);
  });
});

describe("engine version", () => {
  it("moves with any change to what is put out", () => {
    const bytes = packFingerprint(whole);
    expect([ENGINE_VERSION, whole.timeUnits.length, crc32(bytes).toString(16)]).toMatchInlineSnapshot(`
      [
        1,
        1011,
        "2144df1c",
      ]
    `);
  });
});
