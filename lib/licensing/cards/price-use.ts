import { inArray } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { rateCards } from "@/db/schema/licensing";
import { allLibraries, familiesByIds, familyById, libraryById } from "@/lib/catalogue";
import { type Actor, EVERYONE } from "@/lib/kernel/actor";
import { addDays, civilDateIn, formatCivilDate } from "@/lib/kernel/calendar";
import { NotFound } from "@/lib/kernel/errors";
import { formatMoney } from "@/lib/kernel/money";
import { command, open, query } from "@/lib/kernel/verb";
import { keepPriceSnapshot, productionById, shortlistOf } from "@/lib/productions";
import { fromPrice, type PriceFactor, price } from "../price";
import { type RateCard, Use } from "../rate-card";
import { PriceUse } from "../schemas";
import { OFFER_DAYS } from "../states";
import { heldLicences } from "./held-licences";
import { saleObstacle } from "./sale-guard";
import { type CardInForce, cardAt } from "./set-rate-card";

export interface PriceAnswer {
  ok: boolean;
  /** Where `ok` is false: the library answers, nobody can have it now, or something is missing. */
  reason: "quote" | "not available" | "not offered" | "incomplete" | null;
  /** Why there is no price; or base and factors: "150 × 1.6 × 1.6". */
  sentence: string;
  totalMinor: string | null;
  currency: string;
  /** "£384.00" */
  text: string | null;
  factors: PriceFactor[];
  minimumApplied: boolean;
  cardVersion: string | null;
  /** Licences the company holds already for this production and this use. */
  held: string[];
}

type Family = NonNullable<Awaited<ReturnType<typeof familyById>>>;

function withoutPrice(currency: string, reason: PriceAnswer["reason"], sentence: string): PriceAnswer {
  const none = { totalMinor: null, text: null, factors: [], minimumApplied: false, cardVersion: null };
  return { ok: false, reason, sentence, currency, held: [], ...none };
}

/** The price of a use as it stands at a moment, and whether the cue can be sold for it. */
export async function priceNow(
  reader: Reader,
  wish: { family: Family; use: Use; at: Date },
): Promise<{ answer: PriceAnswer; card: CardInForce | null }> {
  const library = await libraryById(reader, wish.family.libraryId);
  if (!library) throw new NotFound();
  const card = await cardAt(reader, library.id, wish.at);
  if (!card) {
    const sentence = `${library.name} has not published a rate card yet.`;
    return { answer: withoutPrice(library.currency, "quote", sentence), card: null };
  }
  const obstacle = await saleObstacle(reader, {
    family: wish.family,
    library,
    card: card.card,
    use: wish.use,
    at: wish.at,
  });
  if (obstacle) return { answer: withoutPrice(library.currency, obstacle.reason, obstacle.sentence), card };
  const priced = price(card.card, wish.use);
  if (!priced.ok) return { answer: withoutPrice(library.currency, priced.reason, priced.sentence), card };
  const { total, factors, sentence, minimumApplied, cardVersion } = priced;
  return {
    card,
    answer: {
      ok: true,
      reason: null,
      sentence,
      totalMinor: total.minor.toString(),
      currency: total.currency,
      text: formatMoney(total),
      factors,
      minimumApplied,
      cardVersion,
      held: [],
    },
  };
}

async function ownProductionId(reader: Reader, actor: Actor, productionId: string | undefined) {
  if (productionId === undefined) return null;
  const production = await productionById(reader, productionId);
  if (actor.kind !== "buyer" || production?.companyId !== actor.companyId) throw new NotFound();
  return { id: production.id, companyId: production.companyId };
}

/** The price of one exact use of a listed cue, with every factor. Prices are public. */
export const priceUse = query({
  name: "licensing.priceUse",
  who: EVERYONE,
  input: PriceUse,
  authorise: async ({ reader, actor, input }) => {
    const family = await familyById(reader, input.familyId);
    if (family?.state !== "listed") throw new NotFound();
    return { family, production: await ownProductionId(reader, actor, input.productionId) };
  },
  run: async ({ reader, input, subject: { family, production }, now }): Promise<PriceAnswer> => {
    const { answer, card } = await priceNow(reader, { family, use: input.use, at: now });
    if (!production || !card) return answer;
    const held = await heldLicences(reader, {
      companyId: production.companyId,
      productionId: production.id,
      familyId: family.id,
      card: card.card,
      use: input.use,
      now,
    });
    return { ...answer, held };
  },
});

/** What "from" says beside a cue, by library: "£40.00". Libraries without a card are left out. */
export const listFromPrices = query({
  name: "licensing.listFromPrices",
  who: EVERYONE,
  input: z.object({}),
  authorise: open("prices are public"),
  run: async ({ reader, now }): Promise<Record<string, string>> => {
    const libraries = await allLibraries(reader);
    if (libraries.length === 0) return {};
    const rows = await reader
      .selectDistinct({ libraryId: rateCards.libraryId })
      .from(rateCards)
      .where(
        inArray(
          rateCards.libraryId,
          libraries.map(({ id }) => id),
        ),
      );
    const found: Record<string, string> = {};
    for (const { libraryId } of rows) {
      const card = await cardAt(reader, libraryId, now);
      const from = card && fromPrice(card.card);
      if (from) found[libraryId] = formatMoney(from);
    }
    return found;
  },
});

/** The card a buyer chooses from: which media, regions, terms and sizes there are. */
export const getCardForCue = query({
  name: "licensing.getCardForCue",
  who: EVERYONE,
  input: z.object({ familyId: z.string().max(40) }),
  authorise: async ({ reader, input }) => {
    const family = await familyById(reader, input.familyId);
    if (family?.state !== "listed") throw new NotFound();
    return family;
  },
  run: async ({ reader, subject, now }): Promise<RateCard | null> =>
    (await cardAt(reader, subject.libraryId, now))?.card ?? null,
});

/** Writes the price of the production's own use beside every cue on its shortlist, with the day until which it stands. */
export const priceShortlist = command({
  name: "licensing.priceShortlist",
  who: ["buyer"],
  input: z.object({ productionId: z.string().max(40) }),
  authorise: async ({ tx, actor, input }) => {
    const production = await productionById(tx, input.productionId);
    if (production?.companyId !== actor.companyId) throw new NotFound();
    return production;
  },
  run: async ({ tx, subject: production, now }) => {
    const items = await shortlistOf(tx, production.id);
    const use = Use.safeParse(production.use);
    const families = new Map(
      (
        await familiesByIds(
          tx,
          items.map(({ familyId }) => familyId),
        )
      ).map((family) => [family.id, family]),
    );
    let priced = 0;
    for (const item of items) {
      const family = families.get(item.familyId);
      if (!family || !use.success) continue;
      const { answer } = await priceNow(tx, { family, use: use.data, at: now });
      const until = addDays(civilDateIn(now, "Etc/UTC"), OFFER_DAYS);
      const snapshot = {
        ...answer,
        pricedAt: now.toISOString(),
        until,
        words: `priced for this production; stands until ${formatCivilDate(until)}`,
      };
      await keepPriceSnapshot(tx, { productionId: production.id, itemId: item.id, snapshot });
      priced++;
    }
    return { priced };
  },
  audit: ({ subject, result }) => ({ subject: subject.id, detail: { priced: result.priced } }),
});
