import { describe, expect, test } from "vitest";
import { guessRole, standingOf } from "@/lib/deliveries";
import { DeliveryForm } from "@/lib/deliveries/schemas";
import { checkIpiNameNumber } from "@/lib/kernel/identifiers";
import { WHOLE_DRAFT } from "@/tests/support/make-delivery";

describe("a version's role is guessed from its file name, as a hint", () => {
  test.each([
    ["SM0001-01_Salt-on-the-Window-Frame_Full_72bpm_Dm.wav", "full"],
    ["Lantern Steps.wav", "full"],
    ["Lantern_Steps_bed.wav", "bed"],
    ["lantern underscore.aif", "bed"],
    ["Lantern_Steps_30.wav", "30"],
    ["Lantern Steps 15 sec.wav", "15"],
    ["Lantern_Steps_60bpm.wav", "full"],
    ["Lantern_Steps_instrumental.flac", "instrumental"],
    ["Lantern_Steps_no_drums.wav", "no-drums"],
    ["Lantern_Steps_without_piano.wav", "without:piano"],
    ["Lantern_Steps_no lead.wav", "no-lead"],
    ["Lantern_Steps_stem_drums.wav", "stem:drums"],
    ["Lantern_Steps_sting.wav", "sting"],
    ["Lantern_Steps_a cappella.wav", "a-cappella"],
    ["Lantern_Steps_loop.wav", "loop"],
  ])("%s: %s", (name, role) => {
    expect(guessRole(name, [])).toBe(role);
  });

  test("a second file without a hint is not a second full mix", () => {
    expect(guessRole("Lantern Steps.wav", ["full"])).not.toBe("full");
  });
});

const ACCEPTED = { state: "delivered", writersAcceptedAt: new Date(), editorialAcceptedAt: new Date() };
const version = (state: string, versionRole = "full") => ({ state, versionRole });

describe("a delivery shows the worst of its versions, as one sentence", () => {
  test.each([
    [["clear", "refused", "screening"], "refused"],
    [["held", "returned", "clear"], "needs you"],
    [["held", "screening"], "held for a person"],
    [["clear", "screening"], "working"],
    [["clear", "listed"], "clear"],
  ])("%j: %s", (states, standing) => {
    expect(
      standingOf(
        ACCEPTED,
        states.map((state) => version(state)),
      ).standing,
    ).toBe(standing);
  });

  test("a clear delivery with a shut gate waits for others, and says for whom", () => {
    const shut = { ...ACCEPTED, writersAcceptedAt: null };
    expect(standingOf(shut, [version("clear")])).toEqual({
      standing: "waiting for others",
      words: "Screened and clear. It waits for its co-writers.",
    });
  });

  test("a writer who declined needs the deliverer, even while a person listens", () => {
    const writers = [{ state: "declined", name: "Dov" }];
    const told = standingOf({ ...ACCEPTED, writersAcceptedAt: null }, [version("held")], writers);
    expect(told.standing).toBe("needs you");
    expect(told.words).toContain("Dov declined");
  });

  test("a draft counts what passes and names what needs a new file", () => {
    const draft = { ...ACCEPTED, state: "draft" };
    expect(
      standingOf(draft, [version("measured"), version("measured", "bed"), version("returned", "30")]).words,
    ).toBe("Two versions pass the checks so far. The 30 needs a new file from you.");
  });
});

/** Check digits: CISAC's rule for IPI name numbers; the numbers are the demonstration's own. */
describe("what the form says of identifiers and shares", () => {
  test("an IPI whose check digits do not match is answered with the one it may have been", () => {
    expect(checkIpiNameNumber("99900000159")).toMatchObject({
      ok: false,
      suggestion: "99900000158",
      message: expect.stringContaining("The check digits do not match; did you mean 99900000158"),
    });
  });

  const form = (shares: string[]) =>
    DeliveryForm.safeParse({
      ...WHOLE_DRAFT,
      title: "A work",
      iswc: "",
      deal: "exclusive",
      moreGenres: [],
      voiceLanguage: null,
      keywords: [],
      sections: [],
      explicitContent: "none",
      yearRecorded: null,
      restrictedTerritories: [],
      refusedUses: [],
      publishers: [],
      linkedFamilyId: null,
      writers: shares.map((share) => ({ name: "A writer", email: "", ipi: "", role: "C", share })),
    });

  test.each([
    [["60.00", "39.99"], "99.99, missing 0.01"],
    [["60.00", "40.01"], "100.01, 0.01 too many"],
    [["33.33", "33.33", "33.33"], "99.99, missing 0.01"],
  ])("shares %j: %s (M01)", (shares, words) => {
    const parsed = form(shares);
    expect(parsed.success).toBe(false);
    const messages = parsed.error?.issues.map((issue) => issue.message).join(" ") ?? "";
    expect(messages).toContain(words);
    expect(messages).toContain("M01");
  });

  test("shares that make 100.00 to the hundredth pass", () => {
    expect(form(["33.34", "33.33", "33.33"]).success).toBe(true);
  });

  test("a genre that is not on the list is refused", () => {
    const parsed = DeliveryForm.shape.genre.safeParse("sounds-nice");
    expect(parsed.success).toBe(false);
  });
});
