import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { borrowedSpanS, formOf, ironHitStartS, loopFacts } from "@/fixtures/audio";
import { coveredS } from "@/lib/screening";
import { namesOf, offsetsS, ScreeningDesk } from "./support";

/*
 * The demonstration's planted cases about borrowed spans, shared loops and what cannot be judged by sound, through the
 * engine that screens every delivery. Edges of a passage are known to about half an analysis frame each way and a note.
 */
const desk = new ScreeningDesk();
const cueNumbers = [21, 25, 22, 27, 32, 5, 34, 10, 12, 26, 31, 38];

beforeAll(async () => {
  await desk.open([
    ...cueNumbers.map((cue) => ({ cue })),
    { cue: borrowedSpanS.cueNumber, seconds: 170 },
    { loop: "LP-003" },
    { loop: "LP-007" },
    { reported: "RW-02" },
  ]);
}, 900_000);
afterAll(() => desk.close());

const patient = 300_000;

describe("borrowed spans", () => {
  test(
    "P-10: four runs of the same 6.4 s of cue 30, one after another, under drums",
    async () => {
      const { outcome, held } = await desk.screen("P-10", { seconds: 170 });
      expect([outcome, namesOf(held)]).toEqual(["held", ["recording 30"]]);
      const [hit] = held;
      expect(hit).toMatchObject({ relation: "shared material", explainedBy: null });
      expect(hit!.passages).toHaveLength(4);
      const { startS, lengthS } = borrowedSpanS;
      hit!.passages.forEach((passage, turn) => {
        expect(passage.refStartS).toBeGreaterThan(startS - 0.1);
        expect(passage.refEndS).toBeLessThan(startS + lengthS + 0.1);
        expect(passage.refEndS - passage.refStartS).toBeGreaterThan(0.85 * lengthS);
        const placedS = 0.02 + lengthS * (turn + 1);
        expect(offsetsS(hit!)[turn]).toBeCloseTo(startS - placedS, 1);
      });
    },
    patient,
  );

  test(
    "P-11: one run of the writer's own struck iron of cue 27, where it was declared",
    async () => {
      const { outcome, held } = await desk.screen("P-11");
      expect([outcome, namesOf(held)]).toEqual(["held", ["recording 27"]]);
      expect(held[0]).toMatchObject({ relation: "own version", explainedBy: null });
      expect(held[0]!.passages).toHaveLength(1);
      const [passage] = held[0]!.passages;
      expect(passage!.endS - passage!.startS).toBeGreaterThan(2);
      expect(passage!.endS - passage!.startS).toBeLessThan(3.3);
      const placedS = 0.02 + (48 * 60) / 84;
      expect(offsetsS(held[0]!)[0]).toBeCloseTo(ironHitStartS(formOf(27, { seconds: 60 })) - placedS, 1);
    },
    patient,
  );

  test(
    "P-12: a filtered riff of a reported recording is found at its place, whoever declares what",
    async () => {
      const { outcome, held } = await desk.screen("P-12", { declaredLoops: ["LP-003"] });
      expect([outcome, namesOf(held)]).toEqual(["held", ["reported RW-02"]]);
      expect(held[0]).toMatchObject({ relation: "excerpt", explainedBy: null });
      const [passage] = held[0]!.passages;
      expect(passage!.refStartS).toBeCloseTo(15.5, 0);
      expect(passage!.refEndS).toBeCloseTo(19.5, 0);
    },
    patient,
  );

  test(
    "P-30: cue 22 hidden in the left channel is found there, and only there",
    async () => {
      const { outcome, held } = await desk.screen("P-30");
      expect([outcome, namesOf(held)]).toEqual(["held", ["recording 22"]]);
      expect(held[0]!.channel).toBe("left");
      expect(held[0]!.coverageQuery).toBeGreaterThan(0.95);
    },
    patient,
  );
});

describe("shared loops", () => {
  test(
    "P-13: LP-003 in eight places, declared, explains itself; undeclared it is a question",
    async () => {
      const declared = await desk.screen("P-13", { declaredLoops: ["LP-003"] });
      expect([declared.outcome, namesOf(declared.held)]).toEqual(["explained", ["loop LP-003"]]);
      expect(declared.words).toContain("registered loop LP-003, 8 places.");
      const playedS = 8 * loopFacts["LP-003"].lengthS;
      expect(Math.abs(coveredS(declared.held[0]!.passages) - playedS)).toBeLessThan(1);
      const undeclared = await desk.screen("P-13");
      expect(undeclared.outcome).toBe("held");
    },
    patient,
  );

  test(
    "P-14: LP-007 for 70 % of the piece is more than its licence allows, declared or not",
    async () => {
      for (const declaredLoops of [[], ["LP-007"]]) {
        const { outcome, held } = await desk.screen("P-14", { declaredLoops });
        expect([outcome, namesOf(held)]).toEqual(["held", ["loop LP-007", "recording 25"]]);
        const loop = held.find((hit) => hit.subjectKind === "loop")!;
        expect(loop).toMatchObject({ relation: "shared material", explainedBy: null });
        expect(loop.coverageQuery).toBeCloseTo(0.7, 1);
      }
    },
    patient,
  );

  test(
    "P-14: cue 25, which has the same loop under its melody, is explained by it; its copy under another name is not",
    async () => {
      const own = { audioOfCue: 25, declaredLoops: ["LP-007"] };
      const first = await desk.screen("P-14", { ...own, exceptCue: 25 });
      expect([first.outcome, namesOf(first.held)]).toEqual(["explained", ["loop LP-007"]]);
      const copy = await desk.screen("P-14", own);
      expect(copy.outcome).toBe("held");
      expect(copy.held.find((hit) => hit.subjectId === "25")?.explainedBy).toBeNull();
    },
    patient,
  );

  test(
    "P-15: the span that RW-03's reporter claims is LP-003's",
    async () => {
      const { held } = await desk.screen("P-15");
      expect(namesOf(held)).toEqual(["loop LP-003"]);
      expect(held[0]!.passages[0]!.startS).toBeLessThan(1);
      expect(coveredS(held[0]!.passages)).toBeGreaterThan(15);
    },
    patient,
  );
});

describe("what sound cannot tell", () => {
  test.each([
    ["P-24", "RW-04's tune on a guitar"],
    ["P-25", "another pattern on cue 32's drums"],
  ] as const)(
    "%s: %s is not held",
    async (id, _what) => {
      const { outcome, held } = await desk.screen(id);
      expect([outcome, held]).toEqual(["clear", []]);
    },
    patient,
  );

  test(
    "P-26: cue 5 is not held against cue 34, a drone as it is",
    async () => {
      const { outcome, held } = await desk.screen("P-26", { exceptCue: 5 });
      expect([outcome, held]).toEqual(["clear", []]);
    },
    patient,
  );

  test(
    "P-27: of 90 s only the 20 with sound are compared; the 70 s of silence are listed as not comparable",
    async () => {
      const { mid, held } = await desk.screen("P-27");
      expect(held).toEqual([]);
      expect(mid.durationS).toBeCloseTo(90, 1);
      expect(mid.contentS).toBeCloseTo(20, 0);
      expect(mid.notComparable).toHaveLength(1);
      expect(mid.notComparable[0]).toMatchObject({ reason: "silence" });
      expect(mid.notComparable[0]!.startS).toBeCloseTo(10, 0);
      expect(mid.notComparable[0]!.endS).toBeCloseTo(80, 0);
    },
    patient,
  );

  test(
    "P-28: 1.8 s are too short to compare, and that is not called clear",
    async () => {
      const { outcome, words, mid } = await desk.screen("P-28");
      expect([outcome, mid.comparable]).toEqual(["not comparable", false]);
      expect(words).toContain("That says nothing for or against it.");
    },
    patient,
  );
});
