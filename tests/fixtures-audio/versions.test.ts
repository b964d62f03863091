import { createHash } from "node:crypto";
import { describe, expect, test } from "vitest";
import { editOf, encodeWav, formOf, loopFacts, renderLoop, renderVersion, stemNames } from "@/fixtures/audio";
import { truePeak } from "@/fixtures/audio/level";
import { scoreOf } from "@/fixtures/audio/scores";
import { layersInRole, layersOf, releaseLayers } from "@/fixtures/audio/versions";
import { correlate, db, minus, plus, rms } from "./support";

const short = { seconds: 24 };
const forCuts = { seconds: 68 };

function digest(cueNumber: number, role: string): string {
  return createHash("sha256")
    .update(encodeWav(renderVersion(cueNumber, role, short)))
    .digest("hex");
}

describe("rendering", () => {
  test("the same cue and version are the same bits in every rendering", () => {
    const first = digest(2, "full");
    releaseLayers();
    expect(digest(2, "full")).toBe(first);
    expect(digest(8, "full")).not.toBe(first);
  });

  test("a shorter form has exactly the length asked for and keeps head, music and ending", () => {
    const audio = renderVersion(6, "full", short);
    const form = formOf(6, short);
    expect(audio.channels[0].length).toBe(24 * 48_000);
    expect(db(rms(audio, 0, 12_000))).toBeGreaterThan(-45);
    const end = Math.round(form.endS * 48_000);
    expect(db(rms(audio, end, end + 9600))).toBeGreaterThan(-30);
    expect(db(rms(audio, audio.channels[0].length - 4800))).toBeLessThan(-60);
  });

  test.each([4, 17, 30, 32])(
    "cue %i peaks at −3 dBTP and nowhere above (BS.1770 oversampling)",
    (cueNumber) => {
      expect(db(truePeak(renderVersion(cueNumber, "full", short).channels))).toBeCloseTo(-3, 1);
    },
  );

  test("no cue is silent in its middle, and no two cues are alike", () => {
    const shapes = [1, 5, 7, 16, 24, 31].map((cueNumber) => {
      const audio = renderVersion(cueNumber, "full", short);
      for (let second = 1; second < 18; second++)
        expect(db(rms(audio, second * 48_000, (second + 1) * 48_000))).toBeGreaterThan(-60);
      return audio.channels[0];
    });
    for (let first = 0; first < shapes.length; first++) {
      for (let second = first + 1; second < shapes.length; second++) {
        const { correlation } = correlate(shapes[first]!, shapes[second]!, {
          from: 240_000,
          length: 96_000,
          lagFrom: -2400,
          lagTo: 2400,
          step: 24,
        });
        expect(correlation).toBeLessThan(0.6);
      }
    }
  });
});

describe("mix versions", () => {
  test.each([
    [8, "bed", ["mallets"]],
    [3, "without:voice", ["voice"]],
    [24, "no-drums", ["drums"]],
    [7, "without:choir", ["choir"]],
    [18, "without:hits", ["hits"]],
    [26, "instrumental", ["voice"]],
  ] as const)("cue %i %s is the full mix less exactly its missing layers", (cueNumber, role, missing) => {
    const full = renderVersion(cueNumber, "full", short);
    const version = renderVersion(cueNumber, role, short);
    const layers = missing.map((name) => renderVersion(cueNumber, `stem:${name}`, short));
    expect(db(rms(minus(full, plus(version, ...layers))) / rms(full))).toBeLessThan(-90);
    expect(db(rms(minus(full, version)) / rms(full))).toBeGreaterThan(-30);
  });

  test.each([1, 4, 17])("the stems of cue %i sum to its full mix", (cueNumber) => {
    const stems = stemNames(cueNumber).map((name) => renderVersion(cueNumber, `stem:${name}`, short));
    const full = renderVersion(cueNumber, "full", short);
    expect(stems.length).toBeGreaterThanOrEqual(4);
    expect(db(rms(minus(full, plus(...stems))) / rms(full))).toBeLessThan(-90);
  });

  test("percussion alone, and voices alone, hold nothing else", () => {
    const percussion = layersInRole("only:percussion")!;
    expect(
      [...layersOf(scoreOf(31), short).layers]
        .filter(([id, { role }]) => percussion(id, role))
        .map(([id]) => id),
    ).toEqual(["drums"]);
    const voices = layersInRole("a-cappella")!;
    expect(
      [...layersOf(scoreOf(26), short).layers].filter(([id, { role }]) => voices(id, role)).map(([id]) => id),
    ).toEqual(["voice"]);
  });

  test("a role that the synthesiser does not make is refused by name", () => {
    expect(() => renderVersion(2, "live", short)).toThrow(/no version "live"/);
    expect(() => renderVersion(2, "stem:harp", short)).toThrow(/No layer of/);
  });
});

describe("edits", () => {
  test.each([
    [2, "30"],
    [8, "15"],
    [9, "60"],
    [13, "30"],
    [28, "15"],
  ] as const)(
    "cue %i's %s is exactly that long, with its last hit well before the end",
    (cueNumber, role) => {
      const seconds = Number(role);
      const audio = renderVersion(cueNumber, role, forCuts);
      const edit = editOf(cueNumber, role, forCuts)!;
      const form = formOf(cueNumber, forCuts);
      const last = edit.pieces.at(-1)!;
      const hitS = last.atS + form.endS - last.sourceStartS;
      expect(audio.channels[0].length).toBe(seconds * 48_000);
      expect(hitS).toBeLessThan(seconds - 0.5);
      expect(seconds - hitS).toBeLessThan(3);
      expect(db(rms(audio, audio.channels[0].length - 960))).toBeLessThan(-50);
      const hit = Math.round(hitS * 48_000);
      expect(db(rms(audio, hit, hit + 4800))).toBeGreaterThan(-32);
    },
  );

  test("each stretch of a cutdown is the full mix, sample for sample", () => {
    const full = renderVersion(13, "full", forCuts);
    const cut = renderVersion(13, "30", forCuts);
    for (const piece of editOf(13, "30", forCuts)!.pieces) {
      const from = Math.round(piece.atS * 48_000) + 960;
      const source = Math.round(piece.sourceStartS * 48_000) + 960;
      let worst = 0;
      for (let index = 0; index < 24_000; index++)
        worst = Math.max(worst, Math.abs(cut.channels[0][from + index]! - full.channels[0][source + index]!));
      expect(worst).toBe(0);
    }
  });

  test.each([4, 14, 21, 27])("cue %i's sting is at most seven seconds, tail included", (cueNumber) => {
    const seconds = renderVersion(cueNumber, "sting", short).channels[0].length / 48_000;
    expect(seconds).toBeLessThanOrEqual(7);
    expect(seconds).toBeGreaterThan(4);
  });

  test.each([11, 25, 32])("cue %i's loop runs into itself without a step", (cueNumber) => {
    const { channels } = renderVersion(cueNumber, "loop", short);
    const form = formOf(cueNumber, short);
    const bars = channels[0].length / 48_000 / form.beatS / form.beatsPerBar;
    expect(bars).toBeCloseTo(Math.round(bars), 3);
    for (const channel of channels) {
      const seam = Math.abs(channel[0]! - channel.at(-1)!);
      let usual = 0;
      for (let index = 1; index < 4800; index++)
        usual = Math.max(usual, Math.abs(channel[index]! - channel[index - 1]!));
      expect(seam).toBeLessThanOrEqual(usual + 1e-4);
    }
  });
});

describe("shared loops", () => {
  test.each([
    [21, "loop", "LP-003", 104],
    [25, "ukulele", "LP-007", 126],
    [22, "crackle", "LP-011", null],
    [38, "crackle", "LP-011", null],
  ] as const)("cue %i's layer %s is %s itself", (cueNumber, layer, loopId, bpm) => {
    const loop = renderLoop(loopId);
    if (bpm) expect(loopFacts[loopId].lengthS).toBeCloseTo((8 * 60) / bpm, 9);
    const stem = renderVersion(cueNumber, `stem:${layer}`, short);
    const length = Math.min(loop.channels[0].length, 150_000);
    const { correlation } = correlate(loop.channels[0], stem.channels[0], {
      from: 0,
      length,
      lagFrom: 955,
      lagTo: 965,
    });
    expect(correlation).toBeGreaterThan(0.9999);
  });
});
