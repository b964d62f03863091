import { existsSync, mkdtempSync, rmSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { plantedCases } from "@/db/seed/data";
import {
  borrowedSpanS,
  cachedMaster,
  caseIds,
  encodeWav,
  formOf,
  loopFacts,
  releaseLayers,
  renderCase,
  renderLoop,
  renderReported,
  renderVersion,
  reportedIds,
} from "@/fixtures/audio";
import { decodeFile } from "@/fixtures/audio/external-tools";
import { truePeak } from "@/fixtures/audio/level";
import { correlate, db, minus, rms } from "./support";

const short = { seconds: 24 };

describe("the planted cases", () => {
  test("each case of the demonstration has audio, and no other", () => {
    expect([...caseIds].sort()).toEqual(plantedCases.map((row) => row.id).sort());
    expect(reportedIds).toEqual(["RW-01", "RW-02", "RW-03", "RW-04"]);
    expect(() => renderReported("RW-05")).toThrow(/No recording came with RW-05/);
    expect(() => renderCase("P-31")).toThrow(/No planted case/);
  });

  test("P-01 is cue 1 through 128 kbit/s, 0.8 s later and 1.5 dB louder, still below −1 dBTP", () => {
    const copy = renderCase("P-01", short);
    const original = renderVersion(1, "full", short);
    const span = { from: 480_000, length: 48_000, lagFrom: -38_460, lagTo: -38_340 };
    const found = correlate(copy.channels[0], original.channels[0], span);
    expect(found.lagSamples).toBe(-0.8 * 48_000);
    const aligned = {
      ...copy,
      channels: [copy.channels[0].slice(38_400), copy.channels[1].slice(38_400)] as const,
    };
    const gain = 10 ** (1.5 / 20);
    const louder = {
      ...original,
      channels: [
        original.channels[0].map((x) => x * gain),
        original.channels[1].map((x) => x * gain),
      ] as const,
    };
    expect(db(rms(minus(louder, aligned)) / rms(louder))).toBeLessThan(-15);
    expect(db(truePeak(copy.channels))).toBeLessThan(-1);
    expect(rms(copy, 0, 38_000)).toBe(0);
  });

  test.each([
    ["P-02", 23],
    ["P-03", 17],
    ["P-04", 36],
    ["P-05", 37],
    ["P-06", 9],
  ] as const)("%s is cue %i's full mix itself", (id, cueNumber) => {
    const file = renderCase(id, short).files[0]!;
    expect(file.sameAs).toEqual({ cueNumber, role: "full" });
    expect(encodeWav(file.audio).equals(encodeWav(renderVersion(cueNumber, "full", short)))).toBe(true);
  });

  test("P-07 runs 3 % faster and P-08 6 % slower than what they were made from", () => {
    expect(renderCase("P-07", short).channels[0].length / (24 * 48_000)).toBeCloseTo(1 / 1.03, 3);
    expect(renderCase("P-08", short).channels[0].length / (24 * 48_000)).toBeCloseTo(1 / 0.94, 3);
  });

  test("P-10 holds the same 6.4 s of cue 30 four times, taken while the piano is alone", () => {
    const source = renderVersion(borrowedSpanS.cueNumber, "full");
    const audio = renderCase("P-10");
    const form = formOf(30);
    const section = form.sections.findLast((row) => row.startBeat * form.beatS < borrowedSpanS.startS)!;
    expect(section.label).toBe("alone");
    expect(section.endBeat * form.beatS).toBeGreaterThan(borrowedSpanS.startS + borrowedSpanS.lengthS);
    const from = Math.round((borrowedSpanS.startS + 2) * 48_000);
    const agreement = (at: number): number =>
      correlate(source.channels[0], audio.channels[0], {
        from,
        length: 48_000,
        lagFrom: at - from - 2,
        lagTo: at - from + 2,
      }).correlation;
    for (let turn = 0; turn < 4; turn++) {
      const at = Math.round((0.02 + 6.4 * (turn + 1) + 2) * 48_000);
      expect(agreement(at)).toBeGreaterThan(0.4);
      expect(agreement(at + 61_111)).toBeLessThan(0.2);
    }
  }, 90_000);

  test("P-13 plays LP-003 eight times at the loop's own length", () => {
    const audio = renderCase("P-13");
    const loop = renderLoop("LP-003").channels[0];
    const step = loopFacts["LP-003"].lengthS * 48_000;
    const first = Math.round((0.02 + 16 * (60 / 104)) * 48_000);
    const agreements = Array.from({ length: 12 }, (_, turn) => {
      const lag = Math.round(first + (turn - 2) * step);
      return correlate(loop, audio.channels[0], {
        from: 0,
        length: 200_000,
        lagFrom: lag - 2,
        lagTo: lag + 2,
      }).correlation;
    });
    expect(agreements.filter((value) => value > 0.15).length).toBe(8);
    expect(agreements.slice(2, 10).every((value) => value > 0.15)).toBe(true);
  });

  test("P-14 is LP-007 and nothing else for 70 % of its length", () => {
    const [left] = renderCase("P-14").channels;
    const loop = renderLoop("LP-007").channels[0];
    const isCopy = (at: number, length: number): boolean => {
      for (let index = 0; index < length; index++) if (left[at + index] !== loop[index]) return false;
      return true;
    };
    let start = 0;
    while (start < left.length && !isCopy(start, 64)) start++;
    const step = loopFacts["LP-007"].lengthS * 48_000;
    const copies = Array.from({ length: 9 }, (_, turn) =>
      isCopy(start + Math.round(turn * step), loop.length - 1),
    );
    expect(copies).toEqual(new Array(9).fill(true));
    expect((9 * step) / left.length).toBeCloseTo(0.7, 2);
  });

  test("P-16 is cue 4 less its strings, exactly", () => {
    const strings = renderVersion(4, "stem:strings", short);
    const full = renderVersion(4, "full", short);
    const left = minus(minus(full, strings), renderCase("P-16", short));
    expect(db(rms(left) / rms(full))).toBeLessThan(-90);
  });

  test("P-18 is near the true mix without melody, and audibly not it", () => {
    const made = renderCase("P-18", short);
    const truth = renderVersion(20, "without:melody", short);
    const residual = db(rms(minus(made, truth)) / rms(truth));
    expect(residual).toBeLessThan(-3);
    expect(residual).toBeGreaterThan(-40);
  });

  test("P-19, the same notes played again, correlates with cue 30 nowhere near", () => {
    const again = renderCase("P-19", short).channels[0];
    const first = renderVersion(30, "full", short).channels[0];
    const span = { from: 288_000, length: 96_000, lagFrom: -48_000, lagTo: 48_000, step: 16 };
    expect(correlate(again, first, span).correlation).toBeLessThan(0.4);
  });

  test("P-27 is 90 s with 70 s of digital silence; P-28 lasts 1.8 s", () => {
    const study = renderCase("P-27");
    expect(study.channels[0].length).toBe(90 * 48_000);
    expect(rms(study, 10 * 48_000, 80 * 48_000)).toBe(0);
    expect(db(rms(study, 0, 9 * 48_000))).toBeGreaterThan(-40);
    expect(renderCase("P-28").channels[0].length).toBe(1.8 * 48_000);
  });

  test("P-29 is cue 6 backwards and upside down", () => {
    const made = renderCase("P-29", short).channels[0];
    const original = renderVersion(6, "full", short).channels[0];
    expect(made.every((value, index) => value === -original[original.length - 1 - index]!)).toBe(true);
  });

  test("P-30 has cue 22 on the left only", () => {
    const made = renderCase("P-30", short);
    const [left, right] = renderVersion(22, "full", short).channels;
    const middle = left.map((value, index) => (value + right[index]!) / 2);
    const span = { from: 720_000, length: 96_000, lagFrom: -2, lagTo: 2 };
    expect(correlate(made.channels[0], middle, span).correlation).toBeGreaterThan(0.9999);
    expect(Math.abs(correlate(made.channels[1], middle, span).correlation)).toBeLessThan(0.2);
  });

  test("T07 is called cue 10's 30 and is cue 13's", () => {
    const file = renderCase("T07", short).files[0]!;
    expect(file.name).toContain("Small Hours, Big Kitchen");
    expect(file.sameAs).toEqual({ cueNumber: 13, role: "30" });
    expect(file.audio.channels[0].length).toBe(30 * 48_000);
  });
});

describe("the cache", () => {
  let folder = "";
  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), "masters-"));
  });
  afterAll(() => rmSync(folder, { recursive: true, force: true }));

  test("keeps a 24-bit FLAC that decodes to the rendering, and makes it once", () => {
    const key = { kind: "version", cueNumber: 32, role: "full", seconds: 15 } as const;
    const path = cachedMaster(folder, key);
    const made = statSync(path).mtimeMs;
    releaseLayers();
    expect(cachedMaster(folder, key)).toBe(path);
    expect(statSync(path).mtimeMs).toBe(made);
    const decoded = decodeFile(path);
    expect(db(rms(minus(renderVersion(32, "full", { seconds: 15 }), decoded)))).toBeLessThan(-130);
  });

  test("gives a byte-for-byte copy its original's own file", () => {
    const copy = cachedMaster(folder, { kind: "case", id: "P-02", seconds: 15 });
    expect(copy).toBe(cachedMaster(folder, { kind: "version", cueNumber: 23, role: "full", seconds: 15 }));
    expect(existsSync(copy)).toBe(true);
  });
});
