import { asc, count, desc, eq, inArray } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { productions, shortlistItems } from "@/db/schema/productions";
import { peopleByIds } from "@/lib/accounts";
import { type Availability, type CueCard, type CueVersion, contoursOf, cueCards } from "@/lib/catalogue";
import { open, query } from "@/lib/kernel/verb";
import { ownProduction } from "./own-production";
import type { ShortlistState } from "./states";

export interface ProductionEntry {
  id: string;
  title: string;
  episode: string | null;
  kind: string;
  client: string | null;
  cues: number;
  createdAt: Date;
}

export interface ShortlistCue {
  itemId: string;
  state: ShortlistState;
  note: string;
  addedBy: string;
  addedAt: Date;
  priceSnapshot: Record<string, unknown> | null;
  cue: {
    familyId: string;
    number: string;
    title: string;
    library: { id: string; code: string; name: string; currency: string };
    terms: CueCard["terms"];
    bpm: number | null;
    availability: Availability;
    versions: CueVersion[];
    ending: string;
  };
  /** The version chosen; null where it is no longer on sale. */
  version: CueVersion | null;
  contour: string | null;
}

export interface ProductionPage {
  id: string;
  title: string;
  codeName: string | null;
  episode: string | null;
  kind: string;
  client: string | null;
  use: Record<string, unknown> | null;
  createdAt: Date;
  shortlist: ShortlistCue[];
}

export const listProductions = query({
  name: "productions.listProductions",
  who: ["buyer"],
  input: z.object({}),
  authorise: open("each row is of the buyer's own company"),
  run: async ({ reader, actor }): Promise<ProductionEntry[]> => {
    const rows = await reader
      .select()
      .from(productions)
      .where(eq(productions.companyId, actor.companyId))
      .orderBy(desc(productions.createdAt), desc(productions.id));
    const counts = await cuesIn(
      reader,
      rows.map((row) => row.id),
    );
    return rows.map((row) => ({
      id: row.id,
      title: row.title,
      episode: row.episode,
      kind: row.kind,
      client: row.client,
      cues: counts.get(row.id) ?? 0,
      createdAt: row.createdAt,
    }));
  },
});

async function cuesIn(reader: Reader, ids: string[]): Promise<Map<string, number>> {
  if (ids.length === 0) return new Map();
  const rows = await reader
    .select({ productionId: shortlistItems.productionId, cues: count() })
    .from(shortlistItems)
    .where(inArray(shortlistItems.productionId, ids))
    .groupBy(shortlistItems.productionId);
  return new Map(rows.map((row) => [row.productionId, row.cues]));
}

/** PRODUCTIONS-3: a cue that has become unavailable stays on the list and says why. */
export const getProduction = query({
  name: "productions.getProduction",
  who: ["buyer"],
  input: z.object({ productionId: z.string() }),
  authorise: async ({ reader, actor, input }) => ownProduction(reader, actor, input.productionId),
  run: async ({ reader, subject }): Promise<ProductionPage> => {
    const { companyId: _company, createdBy: _by, version: _version, ...page } = subject;
    return { ...page, shortlist: await shortlistCues(reader, subject.id) };
  },
});

async function shortlistCues(reader: Reader, productionId: string): Promise<ShortlistCue[]> {
  const items = await reader
    .select()
    .from(shortlistItems)
    .where(eq(shortlistItems.productionId, productionId))
    .orderBy(asc(shortlistItems.position));
  const cards = await cueCards(
    reader,
    items.map((item) => item.familyId),
  );
  const people = await peopleByIds(
    reader,
    items.map((item) => item.addedBy),
  );
  const onSale = items.filter((item) => cards.get(item.familyId)?.availability.kind === "on sale");
  const contours = await contoursOf(
    reader,
    onSale.map((item) => item.recordingId),
  );
  return items.flatMap((item) => {
    const card = cards.get(item.familyId);
    if (!card) return [];
    const { familyId, number, title, library, terms, bpm, availability, versions, ending } = card;
    return [
      {
        itemId: item.id,
        state: item.state as ShortlistState,
        note: item.note,
        addedBy: people.get(item.addedBy)?.name ?? "somebody who has left",
        addedAt: item.addedAt,
        priceSnapshot: item.priceSnapshot,
        cue: { familyId, number, title, library, terms, bpm, availability, versions, ending },
        version: versions.find((version) => version.recordingId === item.recordingId) ?? null,
        contour: contours.get(item.recordingId) ?? null,
      },
    ];
  });
}
