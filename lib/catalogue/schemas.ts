import { z } from "zod";
import { DEALS, WRITER_ROLES } from "./states";

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
