import { and, desc, eq, lte, max } from "drizzle-orm";
import { z } from "zod";
import type { Reader, Tx } from "@/db/client";
import { rateCards } from "@/db/schema/licensing";
import { libraryById, lockLibrary } from "@/lib/catalogue";
import { Invalid, NotFound } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command, query } from "@/lib/kernel/verb";
import { RateCard } from "../rate-card";
import { SetRateCard } from "../schemas";
import { startingCard } from "../starting-card";

export interface CardInForce {
  id: string;
  version: number;
  card: RateCard;
  validFrom: Date;
}

const inForce = (row: typeof rateCards.$inferSelect): CardInForce => ({
  id: row.id,
  version: row.version,
  card: RateCard.parse(row.card),
  validFrom: row.validFrom,
});

export async function cardAt(reader: Reader, libraryId: string, at: Date): Promise<CardInForce | null> {
  const [row] = await reader
    .select()
    .from(rateCards)
    .where(and(eq(rateCards.libraryId, libraryId), lte(rateCards.validFrom, at)))
    .orderBy(desc(rateCards.version))
    .limit(1);
  return row ? inForce(row) : null;
}

async function nextVersion(tx: Tx, libraryId: string): Promise<number> {
  const [row] = await tx
    .select({ last: max(rateCards.version) })
    .from(rateCards)
    .where(eq(rateCards.libraryId, libraryId));
  return (row?.last ?? 0) + 1;
}

/** LICENSING-1: a changed card is a new version; what was priced by an older one keeps its price. */
export const setRateCard = command({
  name: "licensing.setRateCard",
  who: ["owner", "system"],
  input: SetRateCard,
  authorise: async ({ tx, actor, input }) => {
    const libraryId = actor.kind === "owner" ? actor.libraryId : input.libraryId;
    if (!libraryId || (input.libraryId !== undefined && input.libraryId !== libraryId)) throw new NotFound();
    const library = await lockLibrary(tx, libraryId);
    if (!library) throw new NotFound();
    return library;
  },
  run: async ({ tx, actor, input, subject: library, now }) => {
    if (input.card.currency !== library.currency)
      throw new Invalid(`This library sells in ${library.currency}.`, {
        "card.currency": `This library sells in ${library.currency}.`,
      });
    const version = await nextVersion(tx, library.id);
    const card = RateCard.parse({ ...input.card, version: `${library.code} ${version}` });
    await tx.insert(rateCards).values({
      id: newId("car"),
      libraryId: library.id,
      version,
      card,
      validFrom: now,
      createdBy: actor.kind === "owner" ? actor.personId : null,
    });
    return { version };
  },
  audit: ({ subject, result }) => ({
    subject: subject.id,
    libraryId: subject.id,
    detail: { version: result.version },
  }),
});

export interface RateCardScreen {
  libraryName: string;
  currency: string;
  versions: CardInForce[];
  /** What a new version begins with: the last one, or for a library without a card an example. */
  startsFrom: RateCard;
}

/** An owner's or a colleague's own library: every version of its card, the newest first. */
export const getRateCard = query({
  name: "licensing.getRateCard",
  who: ["owner", "staff"],
  input: z.object({}),
  authorise: async ({ reader, actor }) => {
    const library = await libraryById(reader, actor.libraryId);
    if (!library) throw new NotFound();
    return library;
  },
  run: async ({ reader, subject }): Promise<RateCardScreen> => {
    const rows = await reader
      .select()
      .from(rateCards)
      .where(eq(rateCards.libraryId, subject.id))
      .orderBy(desc(rateCards.version));
    const versions = rows.map(inForce);
    return {
      libraryName: subject.name,
      currency: subject.currency,
      versions,
      startsFrom: versions[0]?.card ?? startingCard(subject.currency),
    };
  },
});
