import fc from "fast-check";
import { describe, expect, test } from "vitest";
import {
  coveredS,
  type DeliveryFacts,
  type ExplainedHit,
  explainHits,
  type FoundHit,
  OUTCOMES,
  outcomeOf,
} from "@/lib/screening";

/* Pure rules over invented facts; no audio and no database. */
const delivery: DeliveryFacts = {
  familyId: "fam_new",
  libraryId: "lib_ours",
  delivererId: "per_deliverer",
  writerIds: ["per_deliverer", "per_cowriter"],
  declaredLoops: [],
  expectsFamilyMatch: false,
  durationS: 100,
};

const passage = (startS: number, endS: number): FoundHit["passages"][number] => ({
  startS,
  endS,
  refStartS: startS,
  refEndS: endS,
  speed: 1,
  pitchSemitones: 0,
  landmarksMatched: 40,
  landmarksTotal: 50,
  evidence: 100,
});

const hit = (changes: Partial<FoundHit> = {}): FoundHit => ({
  subjectKind: "recording",
  subjectId: "rec_other",
  band: "hold",
  relationHint: "excerpt",
  evidence: 100,
  evidence2: 50,
  chance: null,
  speed: 1,
  pitchSemitones: 0,
  coverageQuery: 0.1,
  coverageReference: 0.1,
  reversed: false,
  channel: "mid",
  lowDistinctiveness: false,
  passages: [passage(10, 20)],
  ...changes,
});

const reference = {
  familyId: "fam_other",
  libraryId: "lib_theirs",
  writerIds: ["per_stranger"],
  title: "Other",
};
const loop = {
  id: "lop_1",
  code: "LP-003",
  title: "a groove",
  lengthS: 20,
  coverageMaxBps: 5000,
  conditionWords: "Allowed with other musical content.",
};
const loopHit = (spans: [number, number][] = [[10, 30]]) =>
  hit({ subjectKind: "loop", subjectId: loop.id, passages: spans.map(([from, to]) => passage(from, to)) });

interface Given {
  delivery?: Partial<DeliveryFacts>;
  reference?: Partial<typeof reference>;
  otherTitles?: { familyIds: string[]; personId: string | null; libraryId: string | null; words: string }[];
}
const explain = (found: FoundHit[], given: Given = {}) =>
  explainHits(found, {
    delivery: { ...delivery, ...given.delivery },
    references: new Map([["recording:rec_other", { ...reference, ...given.reference }]]),
    loops: new Map([[loop.id, loop]]),
    otherTitles: given.otherTitles ?? [],
  });
const verdict = (hits: ExplainedHit[], facts: Partial<Parameters<typeof outcomeOf>[1]> = {}) =>
  outcomeOf(hits, {
    comparable: true,
    reason: "",
    recordingsCompared: 40,
    familyMatchMissing: false,
    ...facts,
  });

describe("what explains itself", () => {
  test("SCREENING-6: a match within the delivery's own family is explained", () => {
    const [own] = explain([hit()], { reference: { familyId: "fam_new", libraryId: "lib_ours" } });
    expect(own).toMatchObject({ relation: "own version", explainedBy: "family" });
  });

  test("SCREENING-6: a writer's other family is named as their own and still a question; a stranger's is a question", () => {
    const [theirs] = explain([hit()], { reference: { writerIds: ["per_deliverer"] } });
    expect(theirs).toMatchObject({ relation: "own version", explainedBy: null });
    const [stranger] = explain([hit()]);
    expect(stranger).toMatchObject({ relation: "excerpt", explainedBy: null });
    const [cowriters] = explain([hit()], { reference: { writerIds: ["per_cowriter"] } });
    expect(cowriters?.explainedBy).toBeNull();
  });

  test("SCREENING-6: a loop explains only where this delivery declares it and it makes up no more than its condition allows", () => {
    const declared = { delivery: { declaredLoops: ["LP-003"] } };
    expect(explain([loopHit()])[0]?.explainedBy).toBeNull();
    expect(explain([loopHit()], { delivery: { declaredLoops: ["LP-007"] } })[0]?.explainedBy).toBeNull();
    expect(explain([loopHit([[0, 50]])], declared)[0]?.explainedBy).toBe("registered loop");
    expect(explain([loopHit([[0, 50.1]])], declared)[0]?.explainedBy).toBeNull();
    // Repeats are added up, overlaps once.
    expect(
      explain(
        [
          loopHit([
            [0, 30],
            [20, 50],
          ]),
        ],
        declared,
      )[0]?.explainedBy,
    ).toBe("registered loop");
    expect(
      explain(
        [
          loopHit([
            [0, 30],
            [60, 90],
          ]),
        ],
        declared,
      )[0]?.explainedBy,
    ).toBeNull();
  });

  test("SCREENING-6: a loop counts as the principal element where it is most of what is heard, not where it accompanies", () => {
    const under = (matched: number) =>
      hit({
        subjectKind: "loop",
        subjectId: loop.id,
        passages: [{ ...passage(0, 95), landmarksMatched: matched, landmarksTotal: 100 }],
      });
    const declared = { delivery: { declaredLoops: ["LP-003"] } };
    expect(explain([under(74)], declared)[0]?.explainedBy).toBe("registered loop");
    expect(explain([under(75)], declared)[0]?.explainedBy).toBeNull();
    expect(explain([under(74)])[0]?.explainedBy).toBeNull();
  });

  test("SCREENING-6: a recording that agrees by more than the loop is not explained by it", () => {
    const declared = { delivery: { declaredLoops: ["LP-003"] } };
    const accompanying = hit({
      subjectKind: "loop",
      subjectId: loop.id,
      passages: [{ ...passage(0, 95), landmarksMatched: 50, landmarksTotal: 100 }],
    });
    const agreeing = (matched: number) =>
      hit({ passages: [{ ...passage(0, 95), landmarksMatched: matched, landmarksTotal: 100 }] });
    expect(explain([accompanying, agreeing(62)], declared)[1]?.explainedBy).toBe("registered loop");
    expect(explain([accompanying, agreeing(98)], declared)[1]?.explainedBy).toBeNull();
  });

  test("a passage that runs through several turns of a loop counts each of them as a place", () => {
    const placesOf = (spans: [number, number][]) =>
      explain([loopHit(spans)], { delivery: { declaredLoops: ["LP-003"], durationS: 1000 } })[0]?.explanation;
    expect(placesOf([[10, 30]])).toContain("LP-003, 1 place.");
    expect(placesOf([[10, 13]])).toContain("LP-003, 1 place.");
    expect(
      placesOf([
        [10, 109.5],
        [109.5, 169.6],
      ]),
    ).toContain("LP-003, 8 places.");
  });

  test("SCREENING-6: a recording that shares the loop is explained by it only as far as the loop reaches", () => {
    const declared = { delivery: { declaredLoops: ["LP-003"] } };
    const at = (fromS: number, toS: number) => hit({ passages: [passage(fromS, toS)] });
    const within = explain([loopHit(), at(12, 28)], declared);
    expect(within.map((entry) => entry.explainedBy)).toEqual(["registered loop", "registered loop"]);
    expect(within[1]?.relation).toBe("shared material");
    expect(explain([loopHit(), at(20, 60)], declared)[1]?.explainedBy).toBeNull();
    // Not declared, or over its condition: the recording that shares it stays a question too.
    expect(explain([loopHit(), at(12, 28)])[1]?.explainedBy).toBeNull();
    expect(explain([loopHit([[0, 80]]), at(12, 28)], declared)[1]?.explainedBy).toBeNull();
  });

  test("SCREENING-6: another title counts for its own writer at its own library, for nobody else", () => {
    const entry = {
      familyIds: ["fam_other"],
      personId: "per_deliverer",
      libraryId: "lib_ours",
      words: "By contract.",
    };
    expect(explain([hit()], { otherTitles: [entry] })[0]).toMatchObject({
      explainedBy: "other title",
      explanation: "By contract.",
    });
    for (const change of [
      { personId: "per_stranger" },
      { personId: null },
      { libraryId: "lib_theirs" },
      { familyIds: ["fam_third"] },
    ])
      expect(explain([hit()], { otherTitles: [{ ...entry, ...change }] })[0]?.explainedBy).toBeNull();
  });

  test("SCREENING-6: nothing explains a reported work", () => {
    const found = [
      loopHit(),
      hit({ subjectKind: "reported", subjectId: "rw_1", passages: [passage(12, 20)] }),
    ];
    const otherTitles = [{ familyIds: [""], personId: "per_deliverer", libraryId: null, words: "Anything." }];
    const [, reported] = explain(found, { delivery: { declaredLoops: ["LP-003"] }, otherTitles });
    expect(reported?.explainedBy).toBeNull();
  });

  test("seconds under several passages are counted once", () => {
    expect(coveredS([passage(0, 10), passage(5, 12), passage(20, 25), passage(21, 22)])).toBeCloseTo(17, 9);
    expect(coveredS([])).toBe(0);
  });
});

describe("what the hits add up to", () => {
  const anyHits = fc.array(
    fc.record({
      band: fc.constantFrom("hold" as const, "weak" as const),
      explainedBy: fc.constantFrom(
        null,
        "family" as const,
        "registered loop" as const,
        "other title" as const,
      ),
    }),
    { maxLength: 6 },
  );
  const anyFacts = fc.record({
    comparable: fc.boolean(),
    familyMatchMissing: fc.boolean(),
    recordingsCompared: fc.nat(10_000),
  });
  const asHits = (made: { band: "hold" | "weak"; explainedBy: ExplainedHit["explainedBy"] }[]) =>
    made.map(
      ({ band, explainedBy }): ExplainedHit => ({
        ...hit({ band }),
        relation: "excerpt",
        explainedBy,
        explanation: explainedBy ? "It is explained." : null,
      }),
    );

  test("SCREENING-4: whatever is found, software holds or lets through, never refuses, and never speaks of infringement", () => {
    fc.assert(
      fc.property(anyHits, anyFacts, (made, facts) => {
        const { outcome, words } = verdict(asHits(made), facts);
        expect(OUTCOMES).toContain(outcome);
        expect(outcome).not.toMatch(/refus/);
        expect(words).not.toMatch(/infring|steal|stole|plagiar|original\b|refus/i);
      }),
    );
    expect([...OUTCOMES]).toEqual(["clear", "explained", "held", "not comparable"]);
  });

  test("SCREENING-4: one unexplained hit of the holding band holds it, whatever else is explained; weak ones alone do not", () => {
    fc.assert(
      fc.property(anyHits, anyFacts, (made, facts) => {
        const hits = asHits(made);
        const isQuestioned = hits.some((entry) => entry.band === "hold" && entry.explainedBy === null);
        const { outcome } = verdict(hits, facts);
        if (isQuestioned) expect(outcome).toBe("held");
        else if (facts.comparable && !facts.familyMatchMissing)
          expect(["clear", "explained"]).toContain(outcome);
      }),
    );
  });

  test("SCREENING-5: what cannot be compared is never clear, and is told why", () => {
    fc.assert(
      fc.property(anyHits, anyFacts, (made, facts) => {
        const { outcome } = verdict(asHits(made), { ...facts, comparable: false });
        expect(["held", "not comparable"]).toContain(outcome);
      }),
    );
    expect(
      verdict([], { comparable: false, reason: "only 2.0 s of it carry sound that can be compared" }),
    ).toEqual({
      outcome: "not comparable",
      words:
        "It could not be compared: only 2.0 s of it carry sound that can be compared. That says nothing for or against it.",
    });
  });

  test("a cutdown that does not match its own full mix is held, with the question asked", () => {
    const { outcome, words } = verdict([], { familyMatchMissing: true });
    expect(outcome).toBe("held");
    expect(words).toContain("Is it the right file?");
  });

  test("a clear one says with how many recordings it was compared; an explained one says by what", () => {
    expect(verdict([], { recordingsCompared: 1 }).words).toBe(
      "Nothing in common was found with 1 recording held.",
    );
    const explained = explain([loopHit()], { delivery: { declaredLoops: ["LP-003"] } });
    expect(verdict(explained)).toEqual({
      outcome: "explained",
      words: "Match explained by registered loop LP-003, 1 place. Allowed with other musical content.",
    });
  });
});
