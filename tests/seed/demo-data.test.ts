import { describe, expect, test } from "vitest";
import {
  composers,
  cues,
  cueTimings,
  judgedBriefs,
  libraries,
  licences,
  people,
  plantedCases,
  productions,
  versionsOf,
} from "@/db/seed/data";
import { demoRateCard } from "@/db/seed/rate-cards";
import { useOf } from "@/db/seed/uses";
import { findVersionRole } from "@/lib/catalogue/version-roles";
import {
  densities,
  endings,
  genres,
  instruments,
  moods,
  shapes,
  synonyms,
  tempoBandOf,
  tempoBands,
  uses,
  voiceKinds,
} from "@/lib/catalogue/vocabularies";
import { price } from "@/lib/licensing/price";
import { Use } from "@/lib/licensing/rate-card";

function ids(list: readonly { readonly id: string }[]): Set<string> {
  return new Set(list.map((term) => term.id));
}

function unknown(wanted: readonly string[], list: readonly { readonly id: string }[]): string[] {
  const known = ids(list);
  return wanted.filter((id) => !known.has(id));
}

/** ISO 15707: T, nine digits, and (10 − ((1 + Σ i·di) mod 10)) mod 10; the example T-034.524.680-1 is the standard's own. */
function iswcHolds(text: string): boolean {
  const digits = text.replace(/\D/g, "");
  let sum = 1;
  for (let place = 1; place <= 9; place++) sum += place * Number(digits[place - 1]);
  return /^T-\d{3}\.\d{3}\.\d{3}-\d$/.test(text) && Number(digits[9]) === (10 - (sum % 10)) % 10;
}

/** CISAC IPI name number: weights 10 to 2 on nine digits, modulo 101; 00014107338 is published. */
function ipiHolds(text: string): boolean {
  let sum = 0;
  for (let place = 0; place < 9; place++) sum += (10 - place) * Number(text[place]);
  sum %= 101;
  const check = sum === 0 ? 0 : (101 - sum) % 100;
  return /^\d{11}$/.test(text) && Number(text.slice(9)) === check;
}

/** Exact product of a base in minor units and factors, rounded half up once. */

describe("the forty cues", () => {
  test("are numbered 1 to 40, with different titles and descriptions", () => {
    expect(cues.map((cue) => cue.number)).toEqual(Array.from({ length: 40 }, (_, index) => index + 1));
    expect(new Set(cues.map((cue) => cue.title)).size).toBe(40);
    expect(new Set(cues.map((cue) => cue.description)).size).toBe(40);
    expect(libraries.map(({ code }) => cues.filter((cue) => cue.library === code).length)).toEqual([
      14, 14, 12,
    ]);
  });

  test("have writers' shares that sum to 10,000 basis points", () => {
    for (const cue of cues)
      expect([cue.number, cue.writers.reduce((sum, writer) => sum + writer.shareBps, 0)]).toEqual([
        cue.number,
        10_000,
      ]);
  });

  test("carry identifiers whose check digits hold, by rules that reject a wrong digit", () => {
    expect(iswcHolds("T-034.524.680-1")).toBe(true);
    expect(iswcHolds("T-034.524.680-2")).toBe(false);
    expect(ipiHolds("00014107338")).toBe(true);
    expect(ipiHolds("00014107339")).toBe(false);
    expect(cues.filter((cue) => !iswcHolds(cue.iswc))).toEqual([]);
    expect([...composers, ...libraries].map((party) => party.ipi).filter((ipi) => !ipiHolds(ipi))).toEqual(
      [],
    );
    expect(new Set(cues.map((cue) => cue.iswc)).size).toBe(40);
  });

  test("have one ISRC for each recording sold, and none twice", () => {
    const codes = cues.flatMap((cue) => versionsOf(cue).flatMap((version) => version.isrc ?? []));
    expect(codes.filter((code) => !/^XXDM1\d{7}$/.test(code))).toEqual([]);
    expect(new Set(codes).size).toBe(codes.length);
    expect(versionsOf(cues[11]!).find((version) => version.role === "bed")?.isrc).toBe("XXDM12301012");
    expect(
      versionsOf(cues[0]!)
        .filter((version) => version.role.startsWith("stem:"))
        .every((stem) => stem.isrc === null),
    ).toBe(true);
  });

  test("use only controlled terms, in the numbers that the rules allow", () => {
    for (const cue of cues) {
      const all = [...cue.leadInstruments, ...cue.otherInstruments];
      expect({
        cue: cue.number,
        genre: unknown([cue.genre], genres),
        moods: unknown(cue.moods, moods),
        instruments: unknown(all, instruments),
        uses: unknown(cue.uses, uses),
        voice: unknown([cue.voice], voiceKinds),
        shape: unknown([cue.shape], shapes),
        density: unknown([cue.density], densities),
        ending: unknown([cue.ending], endings),
        tempo: unknown([tempoBandOf(cue.bpm)], tempoBands),
      }).toEqual({
        cue: cue.number,
        genre: [],
        moods: [],
        instruments: [],
        uses: [],
        voice: [],
        shape: [],
        density: [],
        ending: [],
        tempo: [],
      });
      expect(new Set(all).size).toBe(all.length);
      expect(all.length).toBeLessThanOrEqual(6);
      expect(cue.moods.length).toBeGreaterThanOrEqual(2);
      expect(cue.moods.length).toBeLessThanOrEqual(4);
      expect(cue.uses.length).toBeLessThanOrEqual(5);
      expect(cue.keywords.length).toBeLessThanOrEqual(15);
      expect(cue.description.length).toBeGreaterThanOrEqual(40);
      expect(cue.description.length).toBeLessThanOrEqual(300);
    }
  });

  test("have version roles of the vocabulary, at lengths that those roles allow", () => {
    for (const cue of cues) {
      for (const version of versionsOf(cue)) {
        const role = findVersionRole(version.role);
        expect([cue.number, version.role, role !== null]).toEqual([cue.number, version.role, true]);
        if (role?.exactS !== undefined) expect(version.durationS).toBe(role.exactS);
        if (role?.longestS !== undefined) expect(version.durationS).toBeLessThanOrEqual(role.longestS);
      }
    }
  });

  test("have sections in order within their length, ending with the last hit", () => {
    for (const cue of cues) {
      const { sections, editPointsS } = cueTimings(cue);
      expect(sections[0]?.timeS).toBe(0);
      expect(sections.at(-1)?.label).toBe(cue.ending);
      const times = sections.map((section) => section.timeS);
      expect(times).toEqual([...new Set(times)].sort((a, b) => a - b));
      expect(times.at(-1)).toBeLessThan(cue.durationS - 1);
      expect(editPointsS.every((time) => time > 0 && time < cue.durationS)).toBe(true);
      expect(sections.length).toBeGreaterThanOrEqual(4);
    }
  });
});

describe("people, prices and papers", () => {
  test("every address is under a reserved example domain (RFC 2606) and belongs to one person", () => {
    expect(people.filter((person) => !/^[a-z.]+@[a-z-]+\.example$/.test(person.email))).toEqual([]);
    expect(new Set(people.map((person) => person.email)).size).toBe(people.length);
    expect(new Set(people.map((person) => person.key)).size).toBe(people.length);
  });

  test("writers of a cue are signed to its library, on its kind of deal", () => {
    for (const cue of cues) {
      for (const writer of cue.writers) {
        const deals = composers
          .find((composer) => composer.key === writer.person)
          ?.roles.flatMap((role) =>
            role.role === "composer" && role.library === cue.library ? role.deals : [],
          );
        expect([cue.number, writer.person, deals?.includes(cue.deal)]).toEqual([
          cue.number,
          writer.person,
          true,
        ]);
      }
    }
  });

  test("every licence's price is the card's, from its own scope", () => {
    for (const licence of licences) {
      const answer = price(demoRateCard(licence.currency), Use.parse(useOf(licence)));
      expect([licence.number, answer.ok && answer.total.minor]).toEqual([
        licence.number,
        BigInt(licence.priceMinor),
      ]);
    }
  });

  test("licences, cases and briefs name only cues, people and productions that exist", () => {
    const numbers = new Set(cues.map((cue) => cue.number));
    const keys = new Set(people.map((person) => person.key));
    expect(licences.length).toBe(13);
    expect(
      licences.filter(
        (row) => !numbers.has(row.cueNumber) || !productions.some((made) => made.key === row.production),
      ),
    ).toEqual([]);
    expect(plantedCases.filter((row) => row.uploader !== null && !keys.has(row.uploader))).toEqual([]);
    expect(plantedCases.filter((row) => row.id.startsWith("P-")).length).toBe(30);
    expect(judgedBriefs.length).toBe(20);
    for (const brief of judgedBriefs) {
      const named = [...brief.right, ...brief.near, ...brief.wrong];
      expect([brief.id, named.filter((number) => !numbers.has(number)), new Set(named).size]).toEqual([
        brief.id,
        [],
        named.length,
      ]);
      expect(brief.right.length).toBeGreaterThan(0);
    }
  });

  test("a right answer to a brief has every version the brief asks for and no excluded sound", () => {
    for (const brief of judgedBriefs) {
      for (const number of brief.right) {
        const cue = cues[number - 1]!;
        const roles = versionsOf(cue).map((version) => version.role as string);
        const missing = (brief.structured.versions ?? []).filter(
          (role) => role !== "stems" && !roles.includes(role),
        );
        const stems = brief.structured.versions?.includes("stems")
          ? roles.some((role) => role.startsWith("stem:"))
          : true;
        const excluded = (brief.structured.excludeInstruments ?? []).filter((id) =>
          [...cue.leadInstruments, ...cue.otherInstruments].includes(id),
        );
        expect([brief.id, number, missing, stems, excluded]).toEqual([brief.id, number, [], true, []]);
      }
    }
  });

  test("synonyms are lower case and lead to terms that exist", () => {
    for (const [word, target] of Object.entries(synonyms)) {
      expect(word).toBe(word.toLowerCase());
      expect([
        word,
        unknown(target.genres ?? [], genres),
        unknown(target.moods ?? [], moods),
        unknown(target.instruments ?? [], instruments),
        unknown(target.uses ?? [], uses),
        unknown(target.voice ?? [], voiceKinds),
      ]).toEqual([word, [], [], [], [], []]);
    }
  });
});
