import { describe, expect, it } from "vitest";
import {
  type Check,
  type CheckContext,
  type ContainerFacts,
  createMeter,
  type Measures,
  technicalChecks,
} from "@/lib/audio";
import { CHORDS, noise, sine, song } from "./signals";

const RATE = 48000;
const FACTS: ContainerFacts = {
  container: "WAV",
  codec: "PCM",
  lossless: true,
  sizeBytes: 1000,
  claimedExtension: "wav",
  extensionAgrees: true,
  sampleRateHz: RATE,
  bitDepth: 24,
  float: false,
  channels: 2,
  declaredS: null,
  declaredSamples: null,
  truncated: null,
  bext: null,
  tags: {},
  pcm: null,
  streamOffset: 0,
  indexAtEnd: false,
};
const FULL: CheckContext = { versionRole: "full", endingDeclared: "ring-out" };

const known = new Map<string, [Float32Array, Float32Array]>();

/** Music of a usual level, whose last note has died away at the end. Each call gives arrays of its own. */
function music(durationS: number, soundS = durationS - 0.5): [Float32Array, Float32Array] {
  const key = `${durationS} ${soundS}`;
  const made = known.get(key) ?? compose(durationS, soundS);
  known.set(key, made);
  return [made[0].slice(), made[1].slice()];
}

function compose(durationS: number, soundS: number): [Float32Array, Float32Array] {
  const [left, right] = song({ rateHz: RATE, bpm: 100, durationS: soundS - 3, chords: [CHORDS.C, CHORDS.F] });
  return [left, right].map((side, c) => {
    const out = new Float32Array(Math.round(durationS * RATE));
    out.set(side);
    const fade = Math.round(0.15 * RATE);
    const end = side.length;
    for (let i = 0; i < fade; i++) out[end - fade + i] = out[end - fade + i]! * (1 - i / fade);
    // The last chord rings out for three seconds.
    const [ring] = song({ rateHz: RATE, bpm: 20, durationS: 3, chords: [CHORDS.C] });
    for (let i = 0; i < ring.length && end + i < out.length; i++) {
      out[end + i] = ring[i]! * (c === 0 ? 1 : 0.8) * Math.exp(-i / (0.5 * RATE));
    }
    return out;
  }) as [Float32Array, Float32Array];
}

const measured = new WeakMap<readonly Float32Array[], Measures>();

function measure(channels: readonly Float32Array[]): Measures {
  const meter = createMeter(RATE, channels.length);
  for (let i = 0; i < channels[0]!.length; i += 9973)
    meter.push(channels.map((c) => c.subarray(i, i + 9973)));
  return meter.finish();
}

function check(
  channels: readonly Float32Array[],
  context: Partial<CheckContext> = {},
  facts: Partial<ContainerFacts> = {},
) {
  const measures = measured.get(channels) ?? measure(channels);
  measured.set(channels, measures);
  const rows = technicalChecks({ ...FACTS, channels: channels.length, ...facts }, measures, {
    ...FULL,
    ...context,
  });
  const row = (name: string): Check | undefined => rows.find((r) => r.check === name);
  return { measures, rows, row, verdict: (name: string) => row(name)?.verdict };
}

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

describe("T03: time", () => {
  const shifted = (headS: number, tailS: number) => {
    const body = music(8, 8);
    return check(
      body.map((side) => {
        const out = new Float32Array(Math.round((8 + headS + tailS) * RATE));
        out.set(side, Math.round(headS * RATE));
        return out;
      }),
    );
  };

  it.each([
    [0.2, "pass"],
    [0.3, "warn"],
    [0.99, "warn"],
    [1.02, "return"],
  ])("%d s of silence in front: %s", (headS, verdict) => {
    const { row, measures } = shifted(headS, 0);
    expect(row("head")!.verdict).toBe(verdict);
    expect(measures.headSilenceS).toBeCloseTo(headS, 2);
  });

  it("silence behind: a second passes, two are a question, four go back", () => {
    const base = shifted(0, 0).measures.tailSilenceS;
    expect(shifted(0, 0.9 - base).verdict("tail")).toBe("pass");
    expect(shifted(0, 2 - base).verdict("tail")).toBe("warn");
    expect(shifted(0, 4 - base).verdict("tail")).toBe("return");
  });

  it("a file that ends inside a sound goes back, unless it says cut or is a loop", () => {
    const cut = [sine(RATE, 220, 4, 0.3), sine(RATE, 330, 4, 0.25)];
    expect(check(cut).row("end")).toMatchObject({ verdict: "return", code: "T03" });
    expect(check(cut, { endingDeclared: "cut" }).row("end")).toBeUndefined();
    expect(check(cut, { versionRole: "loop", endingDeclared: "loop-safe" }).row("end")).toBeUndefined();
  });

  it("a file that begins inside a sound goes back", () => {
    const late = music(8).map((c) => c.subarray(Math.round(0.61 * RATE) + 60));
    const begins = late.map((c) => c.map((v, i) => (i === 0 ? 0.3 : v)));
    expect(check(begins).row("start")).toMatchObject({ verdict: "return", atS: 0 });
    expect(check(music(8)).row("start")).toBeUndefined();
  });

  it.each([60, 30, 20, 15, 10, 6])("the %d has its exact length within 0.05 s", (nominalS) => {
    const silent = (durationS: number) => {
      const side = new Float32Array(Math.round(durationS * RATE));
      side.set(sine(RATE, 300, 0.5, 0.2));
      return check([side, side], { versionRole: String(nominalS) }).row("length")!;
    };
    for (const ok of [nominalS - 0.05, nominalS, nominalS + 0.05]) expect(silent(ok).verdict).toBe("pass");
    for (const bad of [nominalS - 0.06, nominalS + 0.06]) expect(silent(bad).verdict).toBe("return");
  });

  it("a 30 of 30.40 s names what it measured, what is allowed and what to do", () => {
    const { row } = check(music(30.4), { versionRole: "30" });
    expect(row("length")).toMatchObject({
      code: "T03",
      verdict: "return",
      measured: "30.40\u00a0s",
      limit: "29.95\u00a0s to 30.05\u00a0s",
      remedy: "Shorten the file by 0.40\u00a0s to 30.00\u00a0s.",
    });
  });

  it("a sting is at most 7 s, decay included", () => {
    expect(check(music(7), { versionRole: "sting" }).verdict("length")).toBe("pass");
    expect(check(music(7.01), { versionRole: "sting" }).verdict("length")).toBe("return");
    expect(check(music(30.4)).row("length")).toBeUndefined();
  });

  it("the last hit of a cutdown lies half a second before its end", () => {
    const cutdown = (hitS: number) => {
      const [left, right] = music(10, 9);
      const hit = noise(4800, 5).map((v, i) => 0.6 * v * Math.exp(-i / 700));
      for (const side of [left, right]) side.set(hit, Math.round(hitS * RATE));
      return check([left, right], { versionRole: "10" });
    };
    expect(cutdown(9.2).verdict("last hit")).toBe("pass");
    expect(cutdown(9.2).measures.lastHitS).toBeCloseTo(9.2, 1);
    expect(cutdown(9.7).row("last hit")).toMatchObject({ verdict: "return", code: "T03" });
  });

  it("a fade is no button; a button is no fade", () => {
    const faded = song({ rateHz: RATE, bpm: 120, durationS: 20, chords: [CHORDS.C, CHORDS.G] }).map((c) =>
      c.map((v, i) => v * Math.min(1, 10 ** (-(i / RATE - 12) / 3.2)) * Math.min(1, (20 - i / RATE) / 0.5)),
    );
    expect(check(faded, { endingDeclared: "button" }).row("button")).toMatchObject({ verdict: "return" });
    expect(check(faded, { endingDeclared: "fade" }).row("button")).toBeUndefined();
    expect(check(music(12), { endingDeclared: "button" }).verdict("button")).toBe("pass");
  });

  it("a file that is mostly digital silence goes back", () => {
    const out = [0, 1].map(() => new Float32Array(90 * RATE));
    const [left, right] = music(10, 9.5);
    out[0]!.set(left);
    out[1]!.set(right);
    out[0]!.set(left, 80 * RATE);
    out[1]!.set(right, 80 * RATE);
    expect(check(out).row("silence")).toMatchObject({ verdict: "return", code: "T03" });
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
