import { describe, expect, it } from "vitest";
import { biquadPower, kWeighting } from "@/lib/audio/k-weighting";
import { LoudnessMeter, type LoudnessReading } from "@/lib/audio/loudness";
import { sine, tones } from "./signals";

const RATE = 48000;

interface Live {
  atS: number;
  m: number;
  s: number | null;
}

function read(channels: readonly Float32Array[], rateHz = RATE, live?: Live[]): LoudnessReading {
  const meter = new LoudnessMeter(rateHz, channels.length, {
    onReading: (atS, m, s) => live?.push({ atS, m, s }),
  });
  // Odd block sizes, so that block borders never fall on bin borders.
  const length = channels[0]!.length;
  for (let i = 0; i < length; i += 7919) meter.push(channels.map((channel) => channel.subarray(i, i + 7919)));
  return meter.finish();
}

const stereo = (mono: Float32Array): Float32Array[] => [mono, mono];
const tone = (...parts: (readonly [number | null, number])[]): Float32Array[] =>
  stereo(tones(RATE, 1000, parts));

describe("K weighting (ITU-R BS.1770-5 Annex 1)", () => {
  it("reproduces Tables 1 and 2 at 48 kHz", () => {
    const [shelf, pass] = kWeighting(48000);
    const printed = [
      1.53512485958697, -2.69169618940638, 1.19839281085285, -1.69065929318241, 0.73248077421585,
    ];
    const made = [shelf.b0, shelf.b1, shelf.b2, shelf.a1, shelf.a2];
    for (let i = 0; i < 5; i++) expect(made[i]).toBeCloseTo(printed[i]!, 12);
    expect(pass.a1).toBeCloseTo(-1.99004745483398, 12);
    expect(pass.a2).toBeCloseTo(0.99007225036621, 12);
  });

  // Both stages at 48 kHz, from the coefficients of the tables.
  it.each([
    [20, -13.275],
    [50, -3.934],
    [100, -1.133],
    [200, -0.265],
    [500, 0.042],
    [997, 0.691],
    [1000, 0.698],
    [2000, 3.071],
    [4000, 3.968],
    [10000, 4.042],
  ])("weighs %d Hz by %d dB", (hz, gainDb) => {
    const [shelf, pass] = kWeighting(48000);
    const power = biquadPower(shelf, hz, 48000) * biquadPower(pass, hz, 48000);
    expect(10 * Math.log10(power)).toBeCloseTo(gainDb, 2);
  });

  it("keeps its response at 44.1 and 96 kHz", () => {
    for (const [rateHz, gainDb] of [
      [44100, 0.6938],
      [96000, 0.6737],
    ] as const) {
      const [shelf, pass] = kWeighting(rateHz);
      const power = biquadPower(shelf, 997, rateHz) * biquadPower(pass, 997, rateHz);
      expect(10 * Math.log10(power)).toBeCloseTo(gainDb, 3);
    }
  });
});

describe("anchors of BS.1770-5", () => {
  it("reads −3.01 LKFS for 0 dBFS of 997 Hz in one channel", () => {
    const one = sine(RATE, 997, 20, 1);
    expect(read([one, new Float32Array(one.length)]).integratedLufs).toBeCloseTo(-3.01, 2);
    expect(read([one]).integratedLufs).toBeCloseTo(-3.01, 2);
  });

  it("reads −18.00 for in-phase stereo at −18 dBFS peak (EBU Tech 3341 §2.9)", () => {
    expect(read(stereo(sine(RATE, 997, 20, 10 ** (-18 / 20)))).integratedLufs).toBeCloseTo(-18, 2);
  });

  it("gives nulls for silence and for less than a gating block", () => {
    expect(read(stereo(new Float32Array(RATE * 5)))).toMatchObject({
      integratedLufs: null,
      maxMomentaryLufs: null,
    });
    expect(read(stereo(sine(RATE, 1000, 0.39, 0.5))).integratedLufs).toBeNull();
  });

  it("reads the same at 44.1, 88.2, 96 kHz and 32 kHz", () => {
    for (const rateHz of [32000, 44100, 88200, 96000]) {
      const level = read(stereo(sine(rateHz, 997, 10, 10 ** (-18 / 20))), rateHz).integratedLufs!;
      expect(Math.abs(level + 18)).toBeLessThan(0.03);
    }
  });
});

// EBU Tech 3341 v4 (November 2023), Table 1; 1 kHz, 48 kHz, tolerance ±0.1 LU. Cases 7 and 8 are programme files.
describe("EBU Tech 3341 integrated loudness", () => {
  it("case 1: −23 dBFS for 20 s reads −23 momentary, short-term and integrated", () => {
    const reading = read(tone([-23, 20]));
    for (const value of [reading.integratedLufs, reading.maxMomentaryLufs, reading.maxShortTermLufs]) {
      expect(Math.abs(value! + 23)).toBeLessThanOrEqual(0.1);
    }
  });

  it("case 2: −33 dBFS reads −33", () => {
    const reading = read(tone([-33, 20]));
    for (const value of [reading.integratedLufs, reading.maxMomentaryLufs, reading.maxShortTermLufs]) {
      expect(Math.abs(value! + 33)).toBeLessThanOrEqual(0.1);
    }
  });

  it.each([
    ["3", tone([-36, 10], [-23, 60], [-36, 10])],
    ["4", tone([-72, 10], [-36, 10], [-23, 60], [-36, 10], [-72, 10])],
    ["5", tone([-26, 20], [-20, 20.1], [-26, 20])],
  ])("case %s: gating leaves −23", (_case, signal) => {
    expect(Math.abs(read(signal).integratedLufs! + 23)).toBeLessThanOrEqual(0.1);
  });

  it("case 6: 5.0 with surrounds at 1.41 reads −23", () => {
    const at = (levelDb: number): Float32Array => tones(RATE, 1000, [[levelDb, 20]]);
    expect(
      Math.abs(read([at(-28), at(-28), at(-24), at(-30), at(-30)]).integratedLufs! + 23),
    ).toBeLessThanOrEqual(0.1);
  });
});

describe("EBU Tech 3341 short-term and momentary loudness", () => {
  it("case 9: short-term is constant at −23 after 3 s", () => {
    const live: Live[] = [];
    read(
      tone(
        ...Array.from(
          { length: 5 },
          () =>
            [
              [-20, 1.34],
              [-30, 1.66],
            ] as const,
        ).flat(),
      ),
      RATE,
      live,
    );
    const late = live.filter(({ atS }) => atS > 3).map(({ s }) => s!);
    expect(late.length).toBeGreaterThan(100);
    for (const s of late) expect(Math.abs(s + 23)).toBeLessThanOrEqual(0.1);
  });

  it("case 10: a 3 s tone anywhere reads at most −23 short-term, in twenty files", () => {
    for (let i = 0; i < 20; i++) {
      const reading = read(tone([null, i * 0.15], [-23, 3], [null, 1]));
      expect(Math.abs(reading.maxShortTermLufs! + 23)).toBeLessThanOrEqual(0.1);
    }
  });

  it("case 11: successive maxima of short-term rise by 1 LU from −38 to −19", () => {
    const live: Live[] = [];
    const parts = Array.from({ length: 20 }, (_, i) => [
      [null, i * 0.15] as const,
      [-38 + i, 3] as const,
      [null, 3 - i * 0.15] as const,
    ]).flat();
    read(tone(...parts), RATE, live);
    for (let i = 0; i < 20; i++) {
      const inside = live.filter(({ atS, s }) => s !== null && atS > 6 * i && atS <= 6 * (i + 1));
      const most = Math.max(...inside.map(({ s }) => s!));
      expect(Math.abs(most - (-38 + i))).toBeLessThanOrEqual(0.1);
    }
  });

  it("case 12: momentary is constant at −23 after 1 s", () => {
    const live: Live[] = [];
    read(
      tone(
        ...Array.from(
          { length: 25 },
          () =>
            [
              [-20, 0.18],
              [-30, 0.22],
            ] as const,
        ).flat(),
      ),
      RATE,
      live,
    );
    const late = live.filter(({ atS }) => atS > 1);
    expect(late.length).toBeGreaterThan(80);
    for (const { m } of late) expect(Math.abs(m + 23)).toBeLessThanOrEqual(0.1);
  });

  it("case 13: a 400 ms tone anywhere reads at most −23 momentary, in twenty files", () => {
    for (let i = 0; i < 20; i++) {
      const reading = read(tone([null, i * 0.02], [-23, 0.4], [null, 1]));
      expect(Math.abs(reading.maxMomentaryLufs! + 23)).toBeLessThanOrEqual(0.1);
    }
  });

  it("case 14: maxima of momentary rise by 1 LU from −38 to −19", () => {
    // One file in the publication; its twenty parts are read as they grow, as each is louder than all before it.
    for (let upTo = 1; upTo <= 20; upTo++) {
      const parts = Array.from({ length: upTo }, (_, i) => [
        [null, i * 0.02] as const,
        [-38 + i, 0.4] as const,
        [null, 0.4 - i * 0.02] as const,
      ]).flat();
      const reading = read(tone(...parts));
      expect(Math.abs(reading.maxMomentaryLufs! - (-38 + upTo - 1))).toBeLessThanOrEqual(0.1);
    }
  });
});

// EBU Tech 3342 (November 2023): stereo 1 kHz tones of 20 s each, tolerance ±1 LU. Cases 5 and 6 are programme files.
describe("EBU Tech 3342 loudness range", () => {
  it.each([
    ["1", [-20, -30], 10],
    ["2", [-20, -15], 5],
    ["3", [-40, -20], 20],
    ["4", [-50, -35, -20, -35, -50], 15],
  ] as const)("case %s reads within 1 LU", (_case, levels, expected) => {
    const reading = read(tone(...levels.map((level) => [level, 20] as const)));
    expect(Math.abs(reading.rangeLu! - expected)).toBeLessThanOrEqual(1);
  });

  it("has no range below 3 s", () => {
    expect(read(tone([-20, 2.9])).rangeLu).toBeNull();
  });
});
