import "@/tests/support/database";
import { eq } from "drizzle-orm";
import { beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { families, recordings } from "@/db/schema/catalogue";
import { endHold, placeHold, searchCues } from "@/lib/catalogue";
import { Brief, type BriefInput } from "@/lib/catalogue/schemas";
import { ANONYMOUS } from "@/lib/kernel/actor";
import { type FilledCue, fillCues } from "@/tests/support/fill-cues";

let filled: Map<number, FilledCue>;
beforeAll(async () => {
  filled = await fillCues({
    sectionsOf: (cue) =>
      cue.number === 36
        ? [
            { atS: 0, label: "piano alone", energy: 1 },
            { atS: 88, label: "brass opens", energy: 4 },
          ]
        : [],
  });
});

const cue = (number: number): FilledCue => {
  const found = filled.get(number);
  if (!found) throw new Error(`no cue ${number}`);
  return found;
};
const find = (brief: BriefInput) => searchCues(ANONYMOUS, { ...brief, pageSize: 40 });
const titles = async (brief: BriefInput) => (await find(brief)).results.map((result) => result.cue.title);

const FRAGILE: BriefInput = {
  moods: ["fragile", "lonely"],
  uses: ["documentary-human-story"],
  lead: ["piano"],
  voice: "none",
  bpmFrom: 60,
  bpmTo: 80,
  shape: "builds",
  versions: ["bed", "no-lead"],
  not: ["mood:playful"],
};

describe("search", () => {
  test("CATALOGUE-5: an empty brief finds everything on sale, newest first", async () => {
    const answer = await find({});
    expect(answer).toMatchObject({ total: 40, onSale: 40, asked: 0 });
    const times = answer.results.map((result) => result.cue.listedAt?.getTime() ?? 0);
    expect(times).toEqual([...times].sort((a, b) => b - a));
    expect(answer.results.every((result) => result.verdict === "")).toBe(true);
  });

  test("CATALOGUE-5: what fits every word comes before what misses one, and each result says which", async () => {
    const answer = await find(FRAGILE);
    const missed = answer.results.map((result) => result.missed);
    expect(missed).toEqual([...missed].sort((a, b) => a - b));
    expect(answer.fitting).toBe(missed.filter((count) => count === 0).length);
    for (const result of answer.results) {
      expect(result.verdict).toBe(
        result.missed === 0
          ? "Fits every word."
          : `Misses ${["", "one word", "two words", "three words", "four words"][result.missed]}.`,
      );
      expect(result.why).toMatch(/^[A-Z].*\.$/);
    }
  });

  test("a reason names what fits, where it opens, and what leaves room for speech", async () => {
    const { results } = await find({ ...FRAGILE, versions: [] });
    const winter = results.find((result) => result.cue.title === "Winter Timetable");
    expect(winter?.why).toBe("It is lonely, and a piano leads. It opens at 1:28.");
    const salt = (await find(FRAGILE)).results.find(
      (result) => result.cue.title === "Salt on the Window Frame",
    );
    expect(salt?.why).toContain("Its version without piano leaves room for speech.");
  });

  test("a miss is said in plain words with the measured distance", async () => {
    const { results } = await find(FRAGILE);
    const why = (title: string) => results.find((result) => result.cue.title === title)?.why;
    expect(why("Ferry Without Passengers")).toContain("Its piano is an electric one");
    expect(why("Ferry Without Passengers")).toContain("at 90\u00a0bpm it is 10 above your range");
    expect(why("Third Tide Before Morning")).toContain("not a piano");
  });

  test("a voice that a version leaves out is said, and is no miss", async () => {
    const { results } = await find({ moods: ["lonely", "calm"], voice: "none", genres: ["ambient"] });
    const tide = results.find((result) => result.cue.title === "Third Tide Before Morning");
    expect(tide).toMatchObject({ missed: 0 });
    expect(tide?.why).toContain(
      "There is a voice without words in the full; its version without voice leaves it out.",
    );
  });

  test("an exclusion rules out, whatever else fits", async () => {
    const found = await titles({ genres: ["comedy"] });
    expect(found).toContain("The Accordionist Owes Me Money");
    expect(await titles({ genres: ["comedy"], not: ["instrument:accordion"] })).not.toContain(
      "The Accordionist Owes Me Money",
    );
    expect(await titles({ uses: ["cookery"], not: ["word:rain"] })).not.toContain(
      "Café Closing, Rain Outside",
    );
    expect(await titles({ genres: ["indie-rock"], not: ["voice:lyric"] })).toEqual([]);
  });

  test("words are found by their beginning, with accents and without, and never as a command to the engine", async () => {
    expect((await titles({ text: "Winter Timetable" }))[0]).toBe("Winter Timetable");
    expect(await titles({ text: "cafe" })).toEqual(["Café Closing, Rain Outside"]);
    expect(await titles({ text: "café" })).toEqual(["Café Closing, Rain Outside"]);
    for (const text of ['"', "+piano -strings", "(((", "* @ ~ <>", "'; drop table families", "🎻"])
      await expect(find({ text })).resolves.toBeDefined();
  });

  test("a catalogue number or an ISRC finds its cue", async () => {
    const { catalogueNumber } = cue(36);
    expect(await titles({ text: catalogueNumber.toLowerCase() })).toEqual(["Winter Timetable"]);
    expect(await titles({ text: "XX-DM1-24-00036" })).toContain("Winter Timetable");
    expect((await titles({ text: "XXDM12400036" }))[0]).toBe("Winter Timetable");
  });

  test("a held family is absent and comes back when the hold ends", async () => {
    const { familyId } = cue(9);
    const hold = { familyId, causeId: "RW-01", now: new Date() };
    await db().transaction((tx) => placeHold(tx, { ...hold, cause: "reported work", reason: "reported" }));
    expect(await titles({ text: "Harbour Lights Going Out" })).not.toContain("Harbour Lights Going Out");
    expect((await find({})).onSale).toBe(39);
    await db().transaction((tx) => endHold(tx, hold));
    expect((await titles({ text: "Harbour Lights Going Out" }))[0]).toBe("Harbour Lights Going Out");
  });

  test("one-stop leaves out a restricted territory and a share that is not the library's", async () => {
    const { familyId } = cue(30);
    await db()
      .update(families)
      .set({ restrictedTerritories: ["IE"] })
      .where(eq(families.id, familyId));
    const jazz: BriefInput = { genres: ["jazz"] };
    expect(await titles({ ...jazz, oneStop: ["GB"] })).toContain("Café Closing, Rain Outside");
    expect(await titles({ ...jazz, oneStop: ["GB", "IE"] })).not.toContain("Café Closing, Rain Outside");
    expect(await titles({ ...jazz, oneStop: ["*"] })).not.toContain("Café Closing, Rain Outside");
    await db().update(families).set({ restrictedTerritories: [] }).where(eq(families.id, familyId));
  });

  test("pages join without a gap or a double, and a library keeps to its own", async () => {
    const all = await titles({});
    const pages = [];
    for (const page of [0, 1, 2, 3]) {
      const answer = await searchCues(ANONYMOUS, { page, pageSize: 12 });
      pages.push(...answer.results.map((result) => result.cue.title));
    }
    expect(pages).toEqual(all);
    const own = await find({ library: "OA" });
    expect(new Set(own.results.map((result) => result.cue.library.code))).toEqual(new Set(["OA"]));
    expect(own.total).toBe(12);
  });

  test("a version that is not listed is not offered", async () => {
    const bed = cue(36).recordingIds[1] ?? "";
    await db().update(recordings).set({ state: "held" }).where(eq(recordings.id, bed));
    const answer = await find({ text: "Winter Timetable" });
    expect(answer.results[0]?.cue.versions.map((version) => version.role)).toEqual(["full"]);
    await db().update(recordings).set({ state: "listed" }).where(eq(recordings.id, bed));
  });

  test("an address can hold nonsense: unknown terms are refused by the schema, odd exclusions find nothing to exclude", async () => {
    expect(Brief.safeParse({ moods: ["sparkly"] }).success).toBe(false);
    expect(Brief.safeParse({ not: ["mood:<script>"] }).success).toBe(false);
    expect((await find({ not: ["mood:é"] })).total).toBe(40);
  });
});
