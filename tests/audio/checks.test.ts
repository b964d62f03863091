import { describe, expect, it } from "vitest";
import { check, music, RATE } from "./checking";
import { noise } from "./signals";

// Limits: common practice of music delivery.
describe("a good master", () => {
  it("passes every row", () => {
    const { rows, measures } = check(music(20));
    expect(rows.filter((row) => row.verdict !== "pass")).toEqual([]);
    expect(rows.length).toBeGreaterThanOrEqual(14);
    expect(measures.headSilenceS).toBeLessThan(0.01);
  });

  it("gives every row a value, a limit, and a remedy where it is not a pass; with no-break spaces before units", () => {
    const bad = music(20).map((c) => c.map((v) => Math.max(-1, Math.min(1, 9 * v + 0.05))));
    const { rows } = check(
      bad,
      { versionRole: "15" },
      { container: "MP3", codec: "MPEG layer 3", bitDepth: 8 },
    );
    expect(rows.filter((row) => row.verdict === "return").length).toBeGreaterThan(4);
    for (const row of rows) {
      expect(row.what).toMatch(/^[A-Z].*[.?]$/);
      expect(row.measured).not.toBe("");
      expect(row.limit).not.toBe("");
      expect(row.remedy !== undefined).toBe(row.verdict !== "pass");
      for (const text of [row.what, row.measured, row.limit, row.remedy ?? ""]) {
        expect(text).not.toMatch(/\d (kHz|dBTP|dBFS|dB|LUFS|LU|ms|s|%)\b/);
        expect(text).not.toMatch(/[^\d]-\d/);
      }
    }
  });
});

describe("T02: form", () => {
  const quick = music(6);
  it.each([
    ["WAV", "PCM", "pass"],
    ["BW64", "PCM", "pass"],
    ["AIFF", "PCM", "pass"],
    ["FLAC", "FLAC", "warn"],
    ["MP3", "MPEG layer 3", "return"],
    ["M4A", "AAC", "return"],
    ["Ogg Opus", "Opus", "return"],
  ] as const)("%s is a %s %s", (container, codec, verdict) => {
    expect(check(quick, {}, { container, codec }).verdict("container")).toBe(verdict);
  });

  it.each([
    [48000, "pass"],
    [44100, "warn"],
    [88200, "warn"],
    [96000, "warn"],
    [32000, "return"],
    [50000, "return"],
    [192000, "return"],
  ])("%d Hz: %s", (sampleRateHz, verdict) => {
    expect(check(quick, {}, { sampleRateHz }).verdict("sample rate")).toBe(verdict);
  });

  it.each([
    [24, false, 1, "pass"],
    [16, false, 1, "warn"],
    [8, false, 1, "return"],
    [32, true, 1, "warn"],
    [32, true, 8, "return"],
  ])("%d bit, float %s, gain %d: %s", (bitDepth, float, gain, verdict) => {
    const loud = quick.map((c) => c.map((v) => v * gain));
    expect(check(loud, {}, { bitDepth, float }).verdict("bit depth")).toBe(verdict);
  });

  it("asks where name and bytes disagree", () => {
    const { row } = check(quick, {}, { extensionAgrees: false, claimedExtension: "aif" });
    expect(row("name")).toMatchObject({ verdict: "warn", code: "T02" });
  });
});

describe("T01: level", () => {
  const atPeak = (db: number) => {
    const parts = music(8);
    const peak = check(parts).measures.truePeakDbtp!;
    return check(parts.map((c) => c.map((v) => v * 10 ** ((db - peak) / 20))));
  };

  it.each([
    [-1.1, "pass"],
    [-0.9, "warn"],
    [-0.1, "warn"],
    [0.1, "return"],
  ])("a true peak of %d dBTP: %s", (db, verdict) => {
    const { row, measures } = atPeak(db);
    expect(row("true peak")!.verdict).toBe(verdict);
    if (verdict !== "pass") expect(row("true peak")!.atS).toBeCloseTo(measures.truePeakAtS, 6);
  });

  it("three samples at full scale are clipping, two are not, and the place is named", () => {
    const [left, right] = music(8);
    left.set([0.99998, 0.99998], 3 * RATE);
    expect(check([left, right]).verdict("clipping")).toBe("pass");
    left.set([1, 0.99998, 1], 5 * RATE);
    const { row } = check([left, right]);
    expect(row("clipping")).toMatchObject({ verdict: "return", code: "T01" });
    expect(row("clipping")!.atS).toBeCloseTo(5, 4);
  });

  it("a programme under −35 LUFS is the wrong file; a quiet one is a question, but not for ambient", () => {
    const at = (gain: number, genre?: string) =>
      check(
        music(8).map((c) => c.map((v) => v * gain)),
        genre ? { genre } : {},
      ).verdict("loudness");
    expect(at(0.01)).toBe("return");
    expect(at(0.2)).toBe("warn");
    expect(at(0.2, "ambient")).toBe("pass");
  });
});

describe("T04: faults", () => {
  it("lists digital silence of 20 ms or more inside the music with its time", () => {
    const gap = (ms: number, sides: readonly number[]) => {
      const both = music(8);
      for (const side of sides) both[side]!.fill(0, 2.61 * RATE, (2.61 + ms / 1000) * RATE);
      return check(both);
    };
    expect(gap(15, [0, 1]).verdict("interior")).toBe("pass");
    const { row, measures } = gap(50, [0, 1]);
    expect(row("interior")).toMatchObject({ verdict: "warn", code: "T04" });
    expect(row("interior")!.atS).toBeCloseTo(2.61, 2);
    expect(measures.gaps[0]!.endS - measures.gaps[0]!.startS).toBeCloseTo(0.05, 3);
    expect(gap(50, [1]).row("interior")).toMatchObject({ verdict: "return" });
  });

  it("finds a click of one sample, and none in hard synthetic waves or drums", () => {
    const [left, right] = music(8);
    left[4 * RATE] = left[4 * RATE]! + 0.5;
    const { row } = check([left, right]);
    expect(row("clicks")).toMatchObject({ verdict: "return", code: "T04" });
    expect(row("clicks")!.atS).toBeCloseTo(4, 4);
    const saw = Float32Array.from({ length: 4 * RATE }, (_, i) => 0.5 * (((i * 110) / RATE) % 1) - 0.25);
    const square = Float32Array.from({ length: 4 * RATE }, (_, i) =>
      ((i * 77) / RATE) % 1 < 0.5 ? 0.3 : -0.3,
    );
    expect(check([saw, square]).measures.clickCount).toBe(0);
    expect(check([noise(RATE * 2, 1), noise(RATE * 2, 2)]).measures.clickCount).toBe(0);
  });

  it.each([
    [0.0005, "pass"],
    [0.005, "warn"],
    [0.02, "return"],
  ])("an offset of %d of full scale: %s", (offset, verdict) => {
    expect(check(music(6).map((c) => c.map((v) => v + offset))).verdict("offset")).toBe(verdict);
  });

  it("asks, and never accuses, where the spectrum ends sharply near 16 kHz", () => {
    const wide = [noise(RATE * 6, 3), noise(RATE * 6, 4)].map((c) => c.map((v) => 0.2 * v));
    expect(check(wide).row("lossy history")).toBeUndefined();
    const narrow = wide.map((c) => lowPass(c, 15800));
    const { row, measures } = check(narrow);
    expect(row("lossy history")).toMatchObject({ verdict: "warn" });
    expect(Math.abs(measures.cutoffHz! - 15800)).toBeLessThan(700);
    // A soft roll-off, as of strings or a dark room, is no edge.
    const dark = wide.map((c) => {
      let state = 0;
      return c.map((v) => {
        state += 0.15 * (v - state);
        return state;
      });
    });
    expect(check(dark).row("lossy history")).toBeUndefined();
  });
});

function lowPass(x: Float32Array, hz: number): Float32Array {
  const taps = Float64Array.from({ length: 201 }, (_, i) => {
    const t = i - 100;
    const c = hz / RATE;
    return (
      (t === 0 ? 2 * c : Math.sin(2 * Math.PI * c * t) / (Math.PI * t)) *
      (0.5 + 0.5 * Math.cos((Math.PI * t) / 101))
    );
  });
  return x.map((_, i) => {
    let sum = 0;
    for (let k = 0; k < taps.length; k++) sum += taps[k]! * (x[i + k - 100] ?? 0);
    return sum;
  });
}

describe("T05: channels", () => {
  it("stereo passes; equal sides are a question; mono must be declared", () => {
    const [left, right] = music(6);
    expect(check([left, right]).verdict("channels")).toBe("pass");
    expect(check([left, left]).verdict("channels")).toBe("warn");
    expect(check([left, left], { monoDeclared: true }).verdict("channels")).toBe("pass");
    expect(check([left]).verdict("channels")).toBe("return");
    expect(check([left], { monoDeclared: true }).verdict("channels")).toBe("pass");
    const five = [left, right, left, right, left];
    expect(check(five).verdict("channels")).toBe("return");
    expect(check(five, { hasStereoCompanion: true }).verdict("channels")).toBe("warn");
  });

  it("a dead side goes back and is named", () => {
    const [left] = music(6);
    expect(check([left, new Float32Array(left.length)]).row("dead channel")).toMatchObject({
      verdict: "return",
      what: "The right channel is silent.",
    });
  });

  it("an inverted side goes back; unrelated sides lose 3.01 dB by arithmetic and pass", () => {
    const [left] = music(6);
    const { row, measures } = check([left, left.map((v) => -0.99 * v)]);
    expect(row("mono sum")).toMatchObject({ verdict: "return", code: "T05" });
    expect(measures.correlation).toBeCloseTo(-1, 5);
    const apart = check([noise(RATE * 8, 1), noise(RATE * 8, 2)]);
    expect(apart.measures.monoLossDb!).toBeCloseTo(3.01, 1);
    expect(apart.verdict("mono sum")).toBe("pass");
  });

  it("a partly inverted mix of 4.8 dB loss is a question", () => {
    // r = −0.5 l + 0.866 n with unrelated n: correlation −0.5, mono power a quarter of the sides'... 10·log10(4) = 6.02;
    // r = −0.333 l + 0.943 n: (1 + 1 − 2/3) / 4 = a third, 10·log10(3) = 4.77 dB.
    const l = noise(RATE * 8, 5);
    const n = noise(RATE * 8, 6);
    const r = l.map((v, i) => -v / 3 + Math.sqrt(8 / 9) * n[i]!);
    const { row, measures } = check([l.map((v) => v * 0.3), r.map((v) => v * 0.3)]);
    expect(measures.monoLossDb!).toBeCloseTo(4.77, 1);
    expect(row("mono sum")!.verdict).toBe("warn");
  });
});
