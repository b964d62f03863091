import { describe, expect, it } from "vitest";
import {
  ANALYSIS_RATE_HZ,
  estimateKey,
  estimateTempo,
  FEATURE_COUNT,
  FEATURE_LAYOUT,
  keyOfChroma,
  mirexKeyScore,
  soundFeatures,
  tempoAccuracy1,
  tempoAccuracy2,
} from "@/lib/audio";
import { rankKeys } from "@/lib/audio/key";
import { ALBRECHT_SHANAHAN, KRUMHANSL_KESSLER } from "@/lib/audio/key-profiles";
import { tempoPrior } from "@/lib/audio/tempo";
import { CHORDS, noise, sine, song } from "./signals";

const RATE = ANALYSIS_RATE_HZ;

function mono(
  bpm: number,
  chords: readonly (readonly number[])[],
  durationS = 30,
  transpose = 0,
): Float32Array {
  const moved = chords.map((chord) => chord.map((note) => note + transpose));
  return song({ rateHz: RATE, bpm, durationS, chords: moved })[0];
}

const scale = (...classes: number[]): number[] =>
  Array.from({ length: 12 }, (_, pc) => (classes.includes(pc) ? 1 : 0));

// Pearson correlation with the profiles as printed (Krumhansl and Kessler 1982; Albrecht and Shanahan 2013).
describe("key profiles", () => {
  it("rank a flat C major scale C, A minor, G", () => {
    const ranked = rankKeys(scale(0, 2, 4, 5, 7, 9, 11), KRUMHANSL_KESSLER);
    expect(ranked.slice(0, 3).map(({ key, mode }) => `${key} ${mode}`)).toEqual([
      "C major",
      "A minor",
      "G major",
    ]);
    for (const [i, r] of [0.756, 0.712, 0.677].entries()) expect(ranked[i]!.r).toBeCloseTo(r, 3);
    const other = rankKeys(scale(0, 2, 4, 5, 7, 9, 11), ALBRECHT_SHANAHAN);
    expect(other[0]!.r).toBeCloseTo(0.808, 3);
    expect(other[1]!.r).toBeCloseTo(0.735, 3);
  });

  it("rank triads: C-E-G gives C .834 and E minor .760, A-C-E gives A minor .889 and C .601", () => {
    const r = (classes: number[], key: string, mode: string): number =>
      rankKeys(scale(...classes), KRUMHANSL_KESSLER).find((k) => k.key === key && k.mode === mode)!.r;
    expect(r([0, 4, 7], "C", "major")).toBeCloseTo(0.834, 3);
    expect(r([0, 4, 7], "E", "minor")).toBeCloseTo(0.76, 3);
    expect(r([9, 0, 4], "A", "minor")).toBeCloseTo(0.889, 3);
    expect(r([9, 0, 4], "C", "major")).toBeCloseTo(0.601, 3);
  });

  it("find every key of a transposed scale, and none in a flat chroma", () => {
    for (let shift = 0; shift < 12; shift++) {
      const found = keyOfChroma(scale(...[0, 2, 4, 5, 7, 9, 11].map((pc) => (pc + shift) % 12)))!;
      expect(["C", "D♭", "D", "E♭", "E", "F", "F♯", "G", "A♭", "A", "B♭", "B"].indexOf(found.key)).toBe(
        shift,
      );
      expect(found.mode).toBe("major");
    }
    expect(keyOfChroma(scale(0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11))).toBeNull();
  });
});

// MIREX audio key detection, rule since 2017.
describe("key score", () => {
  const key = (k: "C" | "G" | "F" | "A" | "D" | "E", mode: "major" | "minor") => ({ key: k, mode });
  it.each([
    [key("C", "major"), key("C", "major"), 1],
    [key("C", "major"), key("G", "major"), 0.5],
    [key("C", "major"), key("F", "major"), 0.5],
    [key("C", "major"), key("A", "minor"), 0.3],
    [key("C", "major"), key("C", "minor"), 0.2],
    [key("C", "major"), key("D", "major"), 0],
    [key("A", "minor"), key("C", "major"), 0.3],
    [key("A", "minor"), key("E", "minor"), 0.5],
    [key("A", "minor"), key("A", "major"), 0.2],
  ])("%o against %o is %d", (reference, estimate, score) => {
    expect(mirexKeyScore(reference, estimate)).toBe(score);
  });
});

describe("estimateKey", () => {
  const MAJOR = [CHORDS.C, CHORDS.F, CHORDS.G, CHORDS.C];
  const MINOR = [CHORDS.Am, CHORDS.Dm, CHORDS.E, CHORDS.Am];
  it("names the key of cadences in all twelve transpositions", () => {
    let score = 0;
    const names = ["C", "D♭", "D", "E♭", "E", "F", "F♯", "G", "A♭", "A", "B♭", "B"] as const;
    for (let shift = 0; shift < 12; shift++) {
      const major = estimateKey(mono(100, MAJOR, 12, shift - 6))!;
      const minor = estimateKey(mono(100, MINOR, 12, shift - 6))!;
      score += mirexKeyScore({ key: names[(shift + 6) % 12]!, mode: "major" }, major);
      score += mirexKeyScore({ key: names[(shift + 3) % 12]!, mode: "minor" }, minor);
    }
    // Pure synthetic cadences: every one is right, not merely most of the score.
    expect(score).toBe(24);
  });

  it("hears a recording tuned a third of a semitone sharp in its own key", () => {
    const sharp = mono(100, MAJOR, 12, 0.33);
    expect(estimateKey(sharp)).toMatchObject({ key: "C", mode: "major" });
  });

  it("gives nothing for silence", () => {
    expect(estimateKey(new Float32Array(RATE * 5))).toBeNull();
  });
});

// Gouyon et al., IEEE TASLP 14(5), 2006.
describe("tempo accuracy", () => {
  it("takes 4 % for accuracy 1 and the multiples for accuracy 2", () => {
    expect([115.2, 124.8].every((bpm) => tempoAccuracy1(120, bpm))).toBe(true);
    expect([115.1, 124.9, 60, 240].some((bpm) => tempoAccuracy1(120, bpm))).toBe(false);
    expect([60, 240, 40, 360].every((bpm) => tempoAccuracy2(120, bpm))).toBe(true);
    expect([80, 90, 160].some((bpm) => tempoAccuracy2(120, bpm))).toBe(false);
  });

  // Log-normal around 120 BPM, one octave: weights computed from the formula.
  it.each([
    [30, 0.1353],
    [60, 0.6065],
    [90, 0.9175],
    [120, 1],
    [174, 0.8662],
    [240, 0.6065],
  ])("weighs %d BPM by %d", (bpm, weight) => {
    expect(tempoPrior(bpm)).toBeCloseTo(weight, 4);
  });
});

describe("estimateTempo", () => {
  it("reads clicks from 60 to 180 BPM: accuracy 2 always, accuracy 1 from 80 to 160", () => {
    for (const bpm of [60, 72, 84, 96, 104, 116, 128, 140, 152, 174, 180]) {
      const clicks = new Float32Array(RATE * 20);
      const grain = noise(600, 3);
      for (let beat = 0; (beat * 60) / bpm < 19.8; beat++) {
        const at = Math.round((beat * 60 * RATE) / bpm);
        for (let i = 0; i < 300; i++) clicks[at + i] = grain[i]! * Math.exp(-i / 60);
      }
      const { bpm: found } = estimateTempo(clicks)!;
      expect(tempoAccuracy2(bpm, found), `${bpm} read as ${found}`).toBe(true);
      if (bpm >= 80 && bpm <= 160)
        expect(Math.abs(found - bpm) / bpm, `${bpm} read as ${found}`).toBeLessThan(0.01);
    }
  });

  it("reads plucked progressions within 1 % or at half or double", () => {
    const chords = [CHORDS.C, CHORDS.Am, CHORDS.F, CHORDS.G];
    let first = 0;
    const all = [70, 84, 92, 100, 112, 120, 133, 150];
    for (const bpm of all) {
      const found = estimateTempo(mono(bpm, chords, 30))!;
      expect(tempoAccuracy2(bpm, found.bpm), `${bpm} read as ${found.bpm}`).toBe(true);
      if (tempoAccuracy1(bpm, found.bpm)) first++;
    }
    expect(first).toBeGreaterThanOrEqual(6);
  });

  it("gives nothing for silence, a tone's sustain or two seconds", () => {
    expect(estimateTempo(new Float32Array(RATE * 20))).toBeNull();
    expect(estimateTempo(mono(100, [CHORDS.C], 2))).toBeNull();
    expect(estimateTempo(sine(RATE, 440, 20, 0.5))).toBeNull();
  });
});

describe("soundFeatures", () => {
  const distance = (a: Float32Array, b: Float32Array): number => {
    let sum = 0;
    for (let i = FEATURE_LAYOUT.mfccMean[0]; i < FEATURE_LAYOUT.mfccDeviation[1]; i++)
      sum += (a[i]! - b[i]!) ** 2;
    return Math.sqrt(sum);
  };

  it("are finite for silence, noise, a click and nothing", () => {
    const click = new Float32Array(RATE);
    click[5000] = 1;
    for (const input of [new Float32Array(RATE * 3), noise(RATE * 3, 1), click, new Float32Array(0)]) {
      const features = soundFeatures(input);
      expect(features).toHaveLength(FEATURE_COUNT);
      expect(features.every((value) => Number.isFinite(value))).toBe(true);
    }
  });

  it("lie nearer for the same instruments in another key than for noise", () => {
    const a = soundFeatures(mono(100, [CHORDS.C, CHORDS.F], 12));
    const b = soundFeatures(mono(108, [CHORDS.Dm, CHORDS.G], 12));
    const n = soundFeatures(noise(RATE * 12, 8).map((value) => value * 0.1));
    expect(distance(a, b)).toBeLessThan(distance(a, n) / 3);
  });

  it("do not change with gain but for the first coefficient", () => {
    const quiet = mono(100, [CHORDS.C, CHORDS.F], 12);
    const a = soundFeatures(quiet);
    const b = soundFeatures(quiet.map((value) => value * 0.5));
    const [first, last] = FEATURE_LAYOUT.mfccMean;
    for (let i = first + 1; i < last; i++) expect(Math.abs(a[i]! - b[i]!)).toBeLessThan(0.3);
    // A gain of −6.02 dB moves every log band energy by 2 ln 2; the first DCT row multiplies by √32.
    expect(a[first]! - b[first]!).toBeCloseTo(2 * Math.LN2 * Math.sqrt(32), 0);
  });

  it("put the centroid of a tone at its frequency and its chroma in its class", () => {
    const features = soundFeatures(sine(RATE, 880, 5, 0.5));
    expect(Math.abs(features[FEATURE_LAYOUT.centroidHz[0]]! - 880)).toBeLessThan(60);
    expect(features[FEATURE_LAYOUT.chroma[0] + 9]).toBeGreaterThan(0.95);
  });

  it("show the shape of a programme that builds", () => {
    const build = noise(RATE * 16, 2).map((value, i) => value * 0.5 * (i / (RATE * 16)));
    const features = soundFeatures(build);
    const shape = features.subarray(...FEATURE_LAYOUT.loudnessShapeDb);
    expect(shape[15]).toBe(0);
    for (let i = 1; i < 16; i++) expect(shape[i]).toBeGreaterThan(shape[i - 1]!);
  });
});
