import "@/tests/support/database";
import { beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { type JudgedBrief, judgedBriefs, type StructuredBrief } from "@/db/seed/data/briefs";
import { placeHold, readBrief, searchCues } from "@/lib/catalogue";
import type { BriefInput } from "@/lib/catalogue/schemas";
import { WANTED_VERSIONS, type WantedVersion } from "@/lib/catalogue/states";
import { tempoBands } from "@/lib/catalogue/vocabularies";
import { ANONYMOUS } from "@/lib/kernel/actor";
import { type FilledCue, fillCues } from "@/tests/support/fill-cues";

/*
 * The twenty briefs were judged by reading the catalogue's data, before there was any ranking. The bounds below are what
 * was measured; they are no evidence of how a larger catalogue would rank.
 */
const FIRST = 5;
let filled: Map<number, FilledCue>;
const numberOf = new Map<string, number>();

beforeAll(async () => {
  filled = await fillCues();
  for (const [number, cue] of filled) numberOf.set(cue.familyId, number);
  const held = filled.get(9);
  await db().transaction((tx) =>
    placeHold(tx, {
      familyId: held?.familyId ?? "",
      cause: "reported work",
      causeId: "RW-01",
      reason: "a rights question",
      now: new Date(),
    }),
  );
});

async function firstFive(brief: BriefInput): Promise<number[]> {
  const answer = await searchCues(ANONYMOUS, { ...brief, pageSize: FIRST });
  return answer.results.map((result) => numberOf.get(result.cue.familyId) ?? 0);
}

function asBrief(structured: StructuredBrief): BriefInput {
  const band = tempoBands.find((candidate) => candidate.id === structured.tempoBand);
  return {
    moods: [...(structured.moods ?? [])],
    uses: [...(structured.uses ?? [])],
    lead: [...(structured.instruments ?? [])],
    genres: [...(structured.genres ?? [])],
    voice: structured.voice ?? null,
    shape: structured.shape ?? null,
    ending: structured.ending ?? null,
    bpmFrom: band?.fromBpm ? band.fromBpm : null,
    bpmTo: band?.belowBpm ?? null,
    versions: (structured.versions ?? []).filter(
      (version): version is WantedVersion => version in WANTED_VERSIONS,
    ),
    not: [
      ...(structured.excludeMoods ?? []).map((mood) => `mood:${mood}`),
      ...(structured.excludeInstruments ?? []).map((instrument) => `instrument:${instrument}`),
    ],
    text: (structured.keywords ?? []).join(" "),
  };
}

function tally(found: readonly (readonly [JudgedBrief, readonly number[]])[]) {
  const sum = (count: (brief: JudgedBrief, five: readonly number[]) => number) =>
    found.reduce((total, [brief, five]) => total + count(brief, five), 0);
  return {
    right: sum((brief) => brief.right.length),
    rightInFive: sum((brief, five) => brief.right.filter((number) => five.includes(number)).length),
    rightFirst: sum((brief, five) => (brief.right.includes(five[0] ?? 0) ? 1 : 0)),
    nearInFive: sum((brief, five) => brief.near.filter((number) => five.includes(number)).length),
    wrongInFive: sum((brief, five) => brief.wrong.filter((number) => five.includes(number)).length),
  };
}

async function tallyOf(briefFor: (brief: JudgedBrief) => BriefInput) {
  const found = [];
  for (const brief of judgedBriefs) found.push([brief, await firstFive(briefFor(brief))] as const);
  return tally(found);
}

describe("twenty judged briefs", () => {
  test("as structured: every right cue is among the first five, a right one leads, two wrong ones of sixty come in", async () => {
    const measured = await tallyOf((brief) => asBrief(brief.structured));
    expect(measured).toMatchObject({ right: 22, rightInFive: 22, rightFirst: 20 });
    expect(measured.nearInFive).toBeGreaterThanOrEqual(24);
    expect(measured.wrongInFive).toBeLessThanOrEqual(2);
  });

  test("as typed: read word by word, every right cue is among the first five and a right one leads", async () => {
    const measured = await tallyOf((brief) => readBrief(brief.text));
    expect(measured).toMatchObject({ right: 22, rightInFive: 22, rightFirst: 20 });
    expect(measured.nearInFive).toBeGreaterThanOrEqual(15);
    expect(measured.wrongInFive).toBeLessThanOrEqual(2);
  });

  test("a cue on hold is found by no brief", async () => {
    for (const brief of [
      ...judgedBriefs.map((row) => row.text),
      "Harbour Lights Going Out",
      "lonely romantic piano",
    ]) {
      const answer = await searchCues(ANONYMOUS, { ...readBrief(brief), pageSize: 40 });
      expect(answer.results.map((result) => result.cue.title)).not.toContain("Harbour Lights Going Out");
    }
  });
});
