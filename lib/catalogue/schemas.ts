import { z } from "zod";
import { DEALS, EXCLUDED_KINDS, WANTED_VERSIONS, type WantedVersion, WRITER_ROLES } from "./states";
import { endings, genres, instruments, moods, shapes, uses, voiceKinds } from "./vocabularies";

export const CreateLibrary = z.object({
  code: z.string().regex(/^[A-Z]{2,4}$/, "two to four capital letters"),
  name: z.string().trim().min(2).max(200),
  place: z.string().trim().min(2).max(200),
  countryCode: z.string().regex(/^[A-Z]{2}$/),
  currency: z.string().regex(/^[A-Z]{3}$/),
  timeZone: z.string().min(3),
  publisherIpi: z.string().regex(/^\d{11}$/),
  composerPoolBps: z.int().min(0).max(10_000),
  character: z.string().max(300),
});
export type CreateLibrary = z.infer<typeof CreateLibrary>;

const text = (least: number, most: number) => z.string().trim().min(least).max(most);

export const Section = z.object({
  atS: z.number().min(0),
  label: text(1, 60),
  energy: z.int().min(1).max(5),
});

/** What describes a family, apart from its recordings and shares. */
export const FamilyDescription = z.object({
  title: text(1, 200),
  otherTitles: z.array(text(1, 200)).max(10),
  iswc: z.string().nullable(),
  deal: z.enum(DEALS),
  bpm: z.number().min(20).max(400).nullable(),
  musicalKey: z.string().max(20).nullable(),
  genre: z.string(),
  moreGenres: z.array(z.string()).max(2),
  moods: z.array(z.string()).min(1).max(4),
  instruments: z.array(z.string()).min(1).max(8),
  uses: z.array(z.string()).max(5),
  voice: z.string(),
  voiceLanguage: z.string().max(12).nullable(),
  ending: z.string(),
  shape: z.string(),
  density: z.string(),
  description: text(40, 300),
  keywords: z.array(text(1, 40)).max(15),
  sections: z.array(Section).max(30),
  explicitContent: z.enum(["none", "mild", "strong"]),
  yearRecorded: z.int().min(1900).max(2100).nullable(),
  restrictedTerritories: z.array(z.string().regex(/^[A-Z]{2}$/)),
  refusedUses: z.array(text(1, 60)).max(12),
});
export type FamilyDescription = z.infer<typeof FamilyDescription>;

export const Share = z.object({
  side: z.enum(["writer", "publisher"]),
  personId: z.string().nullable(),
  name: text(1, 200),
  ipi: z.string().nullable(),
  role: z.string().max(4),
  shareBps: z.int().min(1).max(10_000),
  acceptedAt: z.date().nullable(),
});
export type Share = z.infer<typeof Share>;

export const writerRoleIds = Object.keys(WRITER_ROLES) as (keyof typeof WRITER_ROLES)[];

type Ids<T extends readonly { id: string }[]> = [T[number]["id"], ...T[number]["id"][]];
const idsOf = <T extends readonly { id: string }[]>(list: T) => list.map((term) => term.id) as Ids<T>;
const someOf = <T extends readonly { id: string }[]>(list: T) =>
  z
    .array(z.enum(idsOf(list)))
    .max(8)
    .default([]);

/** World, as a territory of the one-stop question. */
export const WORLD = "*";

/**
 * A brief: what the sentence of the search asks for. Lists are "any of"; exclusions, library and one-stop are
 * conditions; everything else is a word that a cue may miss.
 */
export const Brief = z.object({
  moods: someOf(moods),
  uses: someOf(uses),
  lead: someOf(instruments),
  genres: someOf(genres),
  /** "some" is any voice at all. */
  voice: z
    .enum([...idsOf(voiceKinds), "some"])
    .nullable()
    .default(null),
  bpmFrom: z.int().min(20).max(400).nullable().default(null),
  bpmTo: z.int().min(20).max(400).nullable().default(null),
  shape: z.enum(idsOf(shapes)).nullable().default(null),
  ending: z.enum(idsOf(endings)).nullable().default(null),
  versions: z
    .array(z.enum(Object.keys(WANTED_VERSIONS) as [WantedVersion, ...WantedVersion[]]))
    .max(6)
    .default([]),
  lengthS: z.int().min(1).max(3600).nullable().default(null),
  library: z
    .string()
    .regex(/^[A-Z]{2,4}$/)
    .nullable()
    .default(null),
  oneStop: z
    .array(z.string().regex(/^([A-Z]{2}|\*)$/))
    .max(40)
    .default([]),
  /** "mood:playful", "word:ukulele". */
  not: z
    .array(z.string().regex(new RegExp(`^(${EXCLUDED_KINDS.join("|")}):[\\p{L}\\p{N} '-]{1,40}$`, "u")))
    .max(16)
    .default([]),
  text: z.string().trim().max(200).default(""),
});
export type Brief = z.output<typeof Brief>;
export type BriefInput = z.input<typeof Brief>;

export const SearchCues = Brief.extend({
  page: z.int().min(0).max(200).default(0),
  pageSize: z.int().min(1).max(40).default(12),
});
