import { and, asc, eq } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { families, libraries, recordings } from "@/db/schema/catalogue";
import { EVERYONE } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import { open, query } from "@/lib/kernel/verb";
import { contoursOf } from "./contours";
import { type CueCard, cueCards } from "./cue-card";
import { splitAt } from "./for-rooms";
import { WRITER_ROLES } from "./states";

export interface ShareLine {
  name: string;
  ipi: string | null;
  role: string;
  shareBps: number;
  accepted: boolean;
}

/** A cue with its rights and versions, as everybody may see it. */
export interface CuePage extends CueCard {
  otherTitles: string[];
  iswc: string | null;
  deal: string;
  keywords: string[];
  explicitContent: string;
  yearRecorded: number | null;
  restrictedTerritories: string[];
  refusedUses: string[];
  writersShares: ShareLine[];
  publishersShares: ShareLine[];
  /** Whether its library can license recording and work for 100 % of both sides. */
  oneStop: boolean;
  isrcs: Record<string, string | null>;
  loudness: { lufs: number | null; rangeLu: number | null; truePeakDbtp: number | null };
  /** Integrated loudness of each section, in the order of `sections`; null until measured. */
  sectionLoudness: number[] | null;
  /** By recording id, as measured. */
  contours: Record<string, string>;
}

const NUMBER = z.string().regex(/^[A-Za-z]{2,4}\d{3,8}$/);

export const getCue = query({
  name: "catalogue.getCue",
  who: EVERYONE,
  input: z.object({ number: z.string().max(20) }),
  authorise: async ({ reader, input }) => {
    if (!NUMBER.safeParse(input.number).success) throw new NotFound();
    const [row] = await reader
      .select({ family: families, library: libraries })
      .from(families)
      .innerJoin(libraries, eq(libraries.id, families.libraryId))
      .where(eq(families.catalogueNumber, input.number.toUpperCase()));
    if (!row) throw new NotFound();
    const card = (await cueCards(reader, [row.family.id])).get(row.family.id);
    if (!card || row.family.state === "refused") throw new NotFound();
    return { ...row, card };
  },
  run: async ({ reader, subject: { family, library, card }, now }): Promise<CuePage> => {
    const isOnSale = card.availability.kind === "on sale";
    const split = await splitAt(reader, family.id, now);
    const versionIds = card.versions.map((version) => version.recordingId);
    const [masters, contours] = await Promise.all([
      isOnSale ? mastersOf(reader, family.id) : [],
      contoursOf(reader, versionIds, "full"),
    ]);
    const head = masters.find((row) => row.id === family.headRecordingId);
    const publishers = split?.publishers ?? [];
    return {
      ...card,
      otherTitles: family.otherTitles,
      iswc: family.iswc,
      deal: family.deal,
      keywords: family.keywords,
      explicitContent: family.explicitContent,
      yearRecorded: family.yearRecorded,
      restrictedTerritories: family.restrictedTerritories,
      refusedUses: family.refusedUses,
      writersShares: (split?.writers ?? []).map(shareLine),
      publishersShares: publishers.map(shareLine),
      oneStop:
        sumBps(publishers.filter((share) => share.ipi === library.publisherIpi)) === 10_000 &&
        (split?.writers ?? []).every((share) => share.acceptedAt !== null),
      isrcs: Object.fromEntries(masters.map((row) => [row.id, row.isrc])),
      loudness: {
        lufs: head?.loudnessLufs ?? null,
        rangeLu: head?.loudnessRangeLu ?? null,
        truePeakDbtp: head?.truePeakDbtp ?? null,
      },
      sectionLoudness: head?.sectionLoudness ?? null,
      contours: Object.fromEntries(contours),
    };
  },
});

type ShareRow = NonNullable<Awaited<ReturnType<typeof splitAt>>>["writers"][number];

const sumBps = (shares: readonly ShareRow[]) => shares.reduce((sum, share) => sum + share.shareBps, 0);

function shareLine(share: ShareRow): ShareLine {
  const roles: Record<string, string> = { ...WRITER_ROLES, E: "publisher" };
  return {
    name: share.name,
    ipi: share.ipi,
    role: roles[share.role] ?? share.role,
    shareBps: share.shareBps,
    accepted: share.acceptedAt !== null,
  };
}

async function mastersOf(reader: Reader, familyId: string) {
  return reader
    .select({
      id: recordings.id,
      isrc: recordings.isrc,
      loudnessLufs: recordings.loudnessLufs,
      loudnessRangeLu: recordings.loudnessRangeLu,
      truePeakDbtp: recordings.truePeakDbtp,
      sectionLoudness: recordings.sectionLoudness,
    })
    .from(recordings)
    .where(and(eq(recordings.familyId, familyId), eq(recordings.state, "listed")))
    .orderBy(asc(recordings.position));
}

export interface LibraryEntry {
  code: string;
  name: string;
  place: string;
  countryCode: string;
  currency: string;
  character: string;
}

/** The libraries, each with its page. */
export const listLibraries = query({
  name: "catalogue.listLibraries",
  who: EVERYONE,
  input: z.object({}),
  authorise: open("which libraries sell here is public"),
  run: async ({ reader }): Promise<LibraryEntry[]> => {
    const rows = await reader.select().from(libraries).orderBy(asc(libraries.name));
    return rows.map(({ code, name, place, countryCode, currency, character }) => ({
      code,
      name,
      place,
      countryCode,
      currency,
      character,
    }));
  },
});
