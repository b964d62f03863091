import {
  createParser,
  parseAsArrayOf,
  parseAsInteger,
  parseAsString,
  parseAsStringLiteral,
} from "nuqs/server";
import type { Brief } from "@/lib/catalogue/schemas";
import { EXCLUDED_KINDS, WANTED_VERSIONS, type WantedVersion } from "@/lib/catalogue/states";
import { endings, genres, instruments, moods, shapes, uses, voiceKinds } from "@/lib/catalogue/vocabularies";

type Listed = readonly { readonly id: string }[];
const idsOf = <T extends Listed>(list: T) => list.map((term) => term.id) as T[number]["id"][];
const some = <T extends Listed>(list: T) =>
  parseAsArrayOf(parseAsStringLiteral(idsOf(list))).withDefault([] as T[number]["id"][]);

/** "60-80", "60-" or "-80". */
const parseAsBpm = createParser<{ from: number | null; to: number | null }>({
  parse: (text) => {
    const [, from = "", to = ""] = /^(\d{0,3})-(\d{0,3})$/.exec(text) ?? [];
    const within = (digits: string) =>
      digits === "" ? null : Math.min(400, Math.max(20, Number.parseInt(digits, 10)));
    return from === "" && to === "" ? null : { from: within(from), to: within(to) };
  },
  serialize: ({ from, to }) => `${from ?? ""}-${to ?? ""}`,
  eq: (a, b) => a.from === b.from && a.to === b.to,
});

const EXCLUSION = new RegExp(`^(${EXCLUDED_KINDS.join("|")}):[\\p{L}\\p{N} '-]{1,40}$`, "u");
const parseAsExclusion = createParser<string>({
  parse: (text) => (EXCLUSION.test(text) ? text : null),
  serialize: String,
});
const parseAsCode = createParser<string>({
  parse: (text) => (/^([A-Z]{2,4}|\*)$/.test(text) ? text : null),
  serialize: String,
});

/** The brief as it stands in the address, so that a search can be kept, sent and gone back to. */
export const briefParams = {
  moods: some(moods),
  uses: some(uses),
  lead: some(instruments),
  genres: some(genres),
  voice: parseAsStringLiteral([...idsOf(voiceKinds), "some"] as const),
  bpm: parseAsBpm,
  shape: parseAsStringLiteral(idsOf(shapes)),
  ending: parseAsStringLiteral(idsOf(endings)),
  versions: parseAsArrayOf(parseAsStringLiteral(Object.keys(WANTED_VERSIONS) as WantedVersion[])).withDefault(
    [],
  ),
  length: parseAsInteger,
  library: parseAsCode,
  onestop: parseAsArrayOf(parseAsCode).withDefault([]),
  not: parseAsArrayOf(parseAsExclusion).withDefault([]),
  text: parseAsString.withDefault(""),
};

/** Beside the brief: typed words still to be read, the production whose prices are shown, and the page of the list. */
export const findParams = {
  ...briefParams,
  say: parseAsString,
  production: parseAsString,
  page: parseAsInteger.withDefault(0),
};

export type BriefValues = {
  [K in keyof typeof briefParams]: ReturnType<(typeof briefParams)[K]["parseServerSide"]>;
};

export function briefOf(values: BriefValues): Brief {
  const length = values.length;
  return {
    moods: values.moods.slice(0, 8),
    uses: values.uses.slice(0, 8),
    lead: values.lead.slice(0, 8),
    genres: values.genres.slice(0, 8),
    voice: values.voice,
    bpmFrom: values.bpm?.from ?? null,
    bpmTo: values.bpm?.to ?? null,
    shape: values.shape,
    ending: values.ending,
    versions: values.versions.slice(0, 6),
    lengthS: length !== null && length >= 1 && length <= 3600 ? length : null,
    library: values.library === "*" ? null : values.library,
    oneStop: values.onestop.filter((code) => code === "*" || code.length === 2).slice(0, 40),
    not: values.not.slice(0, 16),
    text: values.text.trim().slice(0, 200),
  };
}

export function valuesOf(brief: Brief): BriefValues {
  return {
    moods: brief.moods,
    uses: brief.uses,
    lead: brief.lead,
    genres: brief.genres,
    voice: brief.voice,
    bpm: brief.bpmFrom === null && brief.bpmTo === null ? null : { from: brief.bpmFrom, to: brief.bpmTo },
    shape: brief.shape,
    ending: brief.ending,
    versions: brief.versions,
    length: brief.lengthS,
    library: brief.library,
    onestop: brief.oneStop,
    not: brief.not,
    text: brief.text,
  };
}

/** What was said is added to what stands already; one-word answers replace. */
export function withSaid(brief: Brief, said: Brief): Brief {
  const both = <T>(a: readonly T[], b: readonly T[]) => [...new Set([...a, ...b])];
  return {
    moods: both(brief.moods, said.moods).slice(0, 8),
    uses: both(brief.uses, said.uses).slice(0, 8),
    lead: both(brief.lead, said.lead).slice(0, 8),
    genres: both(brief.genres, said.genres).slice(0, 8),
    voice: said.voice ?? brief.voice,
    bpmFrom: said.bpmFrom === null && said.bpmTo === null ? brief.bpmFrom : said.bpmFrom,
    bpmTo: said.bpmFrom === null && said.bpmTo === null ? brief.bpmTo : said.bpmTo,
    shape: said.shape ?? brief.shape,
    ending: said.ending ?? brief.ending,
    versions: both(brief.versions, said.versions).slice(0, 6),
    lengthS: said.lengthS ?? brief.lengthS,
    library: said.library ?? brief.library,
    oneStop: both(brief.oneStop, said.oneStop),
    not: both(brief.not, said.not).slice(0, 16),
    text: both(brief.text.split(" ").filter(Boolean), said.text.split(" ").filter(Boolean)).join(" "),
  };
}

export const isEmptyBrief = (brief: Brief): boolean =>
  Object.values(brief).every(
    (value) => value === null || value === "" || (Array.isArray(value) && value.length === 0),
  );
