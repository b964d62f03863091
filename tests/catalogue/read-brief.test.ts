import { describe, expect, test } from "vitest";
import { readBrief } from "@/lib/catalogue/search/read-brief";

const said = (text: string) =>
  Object.fromEntries(
    Object.entries(readBrief(text)).filter(
      ([, value]) => value !== null && value !== "" && !(Array.isArray(value) && value.length === 0),
    ),
  );

describe("a typed brief", () => {
  test("becomes controlled terms, exclusions and a shape", () => {
    expect(said("fragile piano under narration, no sentiment, opens late")).toEqual({
      moods: ["fragile"],
      lead: ["piano"],
      uses: ["documentary-human-story", "documentary-nature", "podcast-bed"],
      shape: "builds",
      not: ["mood:romantic", "mood:nostalgic", "mood:tender"],
    });
  });

  test("adds voice, tempo, versions and rights", () => {
    expect(said('not vocal, 60–80 BPM, has bed or "no lead" style version, one-stop UK+IE')).toMatchObject({
      voice: "none",
      bpmFrom: 60,
      bpmTo: 80,
      versions: expect.arrayContaining(["bed"]),
      oneStop: ["GB", "IE"],
    });
    expect(said("has bed or no lead style version")).toEqual({ versions: ["no-lead", "bed"] });
  });

  test("ends a negation with its clause: what comes after a comma is wanted again", () => {
    expect(said("no vocals, no ukulele, nothing chirpy, cookery")).toEqual({
      voice: "none",
      uses: ["cookery"],
      not: ["instrument:plucked-small-strings", "mood:bright", "mood:playful"],
    });
    expect(said("without strings but with piano")).toEqual({ lead: ["piano"], not: ["instrument:strings"] });
  });

  test.each([
    ["45 s", { lengthS: 45 }],
    ["about 1:30 long", { lengthS: 90 }],
    ["2 minutes", { lengthS: 120 }],
    ["30-second", { lengthS: 30 }],
    ["around 120 bpm", { bpmFrom: 115, bpmTo: 125 }],
    ["under 90 bpm", { bpmTo: 90 }],
    ["over 140 bpm", { bpmFrom: 140 }],
    ["very slow", { bpmTo: 60 }],
    ["one-stop", { oneStop: ["*"] }],
    ["one-stop worldwide", { oneStop: ["*"] }],
    ["ends on a button", { ending: "button" }],
    ["a choir, and one without the choir", { lead: ["choir"], versions: ["instrumental"] }],
  ])("reads %s", (text, expected) => {
    expect(said(text)).toEqual(expected);
  });

  test("keeps what it does not know as words of the description, without words that carry nothing", () => {
    expect(said("something for a lighthouse scene")).toEqual({ text: "lighthouse" });
    expect(said("nothing with bagpipes")).toEqual({ text: "bagpipes" });
    expect(said("no bagpipes")).toEqual({ not: ["word:bagpipes"] });
  });

  test.each(["", "   ", "((((", "no no no", "'; drop table families; --", "🎻🎻", "a".repeat(2000)])(
    "never fails on %j",
    (text) => {
      expect(() => readBrief(text)).not.toThrow();
    },
  );
});
