import { createHash } from "node:crypto";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { editOf, encodeWav, renderCase, renderVersion } from "@/fixtures/audio";
import { namesOf, offsetsS, ScreeningDesk } from "./support";

/*
 * The demonstration's planted cases about whole recordings, through the engine that screens every delivery. What each
 * should show stands in the case table; tolerances are the engine's own resolution.
 */
const desk = new ScreeningDesk();
const cueNumbers = [1, 4, 6, 9, 17, 18, 20, 23, 24, 28, 29, 30, 36, 37, 2, 8, 10, 13];

beforeAll(async () => {
  await desk.open([...cueNumbers.map((cue) => ({ cue })), { cue: 19, seconds: 90 }]);
}, 900_000);
afterAll(() => desk.close());

const patient = 300_000;

describe("the same recording again", () => {
  test(
    "P-01: a lossy, louder copy with 0.8 s in front is one run over the whole of cue 1, unaltered",
    async () => {
      const { outcome, held } = await desk.screen("P-01");
      expect([outcome, namesOf(held)]).toEqual(["held", ["recording 1"]]);
      const [hit] = held;
      expect(hit).toMatchObject({ relation: "same recording", explainedBy: null, reversed: false });
      expect(hit!.passages).toHaveLength(1);
      expect(offsetsS(hit!)[0]).toBeCloseTo(-0.8, 1);
      expect(hit!.speed).toBeCloseTo(1, 3);
      expect(hit!.pitchSemitones).toBeCloseTo(0, 1);
      expect(Math.min(hit!.coverageQuery, hit!.coverageReference)).toBeGreaterThan(0.95);
    },
    patient,
  );

  test("P-02: is cue 23's file, byte for byte, and so a duplicate before any search", () => {
    const hash = (audio: Parameters<typeof encodeWav>[0]) =>
      createHash("sha256").update(encodeWav(audio)).digest("hex");
    const copy = hash(renderCase("P-02", { seconds: 60 }));
    expect(copy).toBe(hash(renderVersion(23, "full", { seconds: 60 })));
    expect(copy).not.toBe(hash(renderVersion(28, "full", { seconds: 60 })));
  });

  test.each([
    ["P-03", 17, "own version"],
    ["P-04", 36, "same recording"],
    ["P-06", 9, "same recording"],
  ] as const)(
    "%s: all of cue %i, named %s, held for a person",
    async (id, cueNumber, relation) => {
      const { outcome, held } = await desk.screen(id);
      expect([outcome, namesOf(held)]).toEqual(["held", [`recording ${cueNumber}`]]);
      expect(held[0]).toMatchObject({ relation, explainedBy: null });
      expect(Math.min(held[0]!.coverageQuery, held[0]!.coverageReference)).toBeGreaterThan(0.95);
    },
    patient,
  );

  test(
    "P-05: all of cue 37, explained by the contract for its other title, and only for whom it names",
    async () => {
      const words = "Empty Deck is another title of Ferry Without Passengers, by contract.";
      const entry = { familyIds: ["family 37"], personId: "B", libraryId: "BC", words };
      const { outcome, held, words: told } = await desk.screen("P-05", { otherTitles: [entry] });
      expect([outcome, told, namesOf(held)]).toEqual(["explained", words, ["recording 37"]]);
      const stranger = await desk.screen("P-05", {
        otherTitles: [entry],
        delivererId: "rufus",
        writerIds: ["rufus"],
      });
      expect(stranger.outcome).toBe("held");
    },
    patient,
  );

  test(
    "P-18: a machine-separated mix of cue 20 by a stranger is held",
    async () => {
      const { outcome, held } = await desk.screen("P-18");
      expect([outcome, namesOf(held)]).toEqual(["held", ["recording 20"]]);
      expect(held[0]!.relation).not.toBe("own version");
      expect(held[0]!.coverageQuery).toBeGreaterThan(0.9);
    },
    patient,
  );
});

describe("altered recordings", () => {
  test.each([
    ["P-07", 24, 1.03, 2],
    ["P-08", 18, 0.94, 0],
    ["P-23", 6, 1, -1],
  ] as const)(
    "%s: all of cue %i at speed %d and %d semitones, constant from end to end",
    async (id, cueNumber, speed, semitones) => {
      const { outcome, held } = await desk.screen(id);
      expect([outcome, namesOf(held)]).toEqual(["held", [`recording ${cueNumber}`]]);
      const [hit] = held;
      expect(hit).toMatchObject({ relation: "altered copy", explainedBy: null });
      expect(Math.abs(hit!.speed - speed)).toBeLessThan(0.001);
      expect(Math.abs(hit!.pitchSemitones - semitones)).toBeLessThan(0.05);
      expect(hit!.coverageQuery).toBeGreaterThan(0.95);
      for (const passage of hit!.passages) {
        expect(Math.abs(passage.speed - speed)).toBeLessThan(0.002);
        expect(Math.abs(passage.pitchSemitones - semitones)).toBeLessThan(0.05);
      }
    },
    patient,
  );

  test(
    "P-29: cue 6 backwards is not held by the usual search; the deep one finds all of it, reversed",
    async () => {
      const usual = await desk.screen("P-29");
      expect([usual.outcome, usual.held]).toEqual(["clear", []]);
      const deep = await desk.screen("P-29", { deep: true });
      expect([deep.outcome, namesOf(deep.held)]).toEqual(["held", ["recording 6"]]);
      expect(deep.held[0]!.reversed).toBe(true);
      expect(deep.held[0]!.coverageQuery).toBeGreaterThan(0.95);
    },
    patient,
  );
});

describe("one's own recordings", () => {
  test(
    "P-16: cue 4 without strings, linked to its family, explains itself",
    async () => {
      const { outcome, held, words } = await desk.screen("P-16", { familyId: "family 4" });
      expect([outcome, namesOf(held)]).toEqual(["clear", ["recording 4"]]);
      expect(held[0]).toMatchObject({ relation: "own version", explainedBy: "family" });
      expect(words).toContain("its own family");
      expect((await desk.screen("P-16")).outcome).toBe("held");
    },
    patient,
  );

  test(
    "P-17: an unlinked cut of cue 19 is the writer's own, held, in four runs with three jumps",
    async () => {
      const { outcome, held } = await desk.screen("P-17", { seconds: 90 });
      expect([outcome, namesOf(held)]).toEqual(["held", ["recording 19"]]);
      expect(held[0]).toMatchObject({ relation: "own version", explainedBy: null });
      expect(held[0]!.passages).toHaveLength(4);
      const offsets = offsetsS(held[0]!);
      expect(Math.abs(offsets[0]!)).toBeLessThan(0.05);
      const jumps = offsets.slice(1).map((offset, index) => offset - offsets[index]!);
      expect(jumps.every((jump) => jump > 1)).toBe(true);
    },
    patient,
  );

  test(
    "T07: a '30' of cue 10 that is cue 13's is held, and does not match its own family",
    async () => {
      expect(editOf(13, "30", { seconds: 60 })!.durationS).toBe(30);
      const { outcome, held, hits } = await desk.screen("T07", {
        familyId: "family 10",
        expectsFamilyMatch: true,
      });
      expect([outcome, namesOf(held)]).toEqual(["held", ["recording 13"]]);
      expect(hits.some((hit) => hit.explainedBy === "family")).toBe(false);
    },
    patient,
  );
});

describe("the same or a like composition, other recordings", () => {
  test.each([
    ["P-19", "cue 30's notes in another take"],
    ["P-20", "cue 9's tune on a guitar"],
    ["P-21", "cue 18's tempo and palette"],
  ] as const)(
    "%s: %s is no recording match",
    async (id, _what) => {
      const { outcome, held, words } = await desk.screen(id);
      expect([outcome, held]).toEqual(["clear", []]);
      expect(words).toMatch(/^Nothing in common was found with \d+ recordings held\.$/);
    },
    patient,
  );

  test.each([
    ["P-09", 28, "cue 23, by the same writer with the same claps"],
    ["P-22", 6, "cue 29, the same old tune"],
  ] as const)(
    "%s: cue %i is not held against %s, nor against anything else",
    async (id, exceptCue, _other) => {
      const { outcome, held } = await desk.screen(id, { exceptCue });
      expect([outcome, held]).toEqual(["clear", []]);
    },
    patient,
  );
});
