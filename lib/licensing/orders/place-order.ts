import type { z } from "zod";
import type { Tx } from "@/db/client";
import { orderLines, orders } from "@/db/schema/licensing";
import { companyById } from "@/lib/accounts";
import { familiesByIds, type familyById, libraryById, recordingsOfFamily } from "@/lib/catalogue";
import { civilDateIn } from "@/lib/kernel/calendar";
import { Conflict, Invalid, NotFound, Precondition } from "@/lib/kernel/errors";
import { newId } from "@/lib/kernel/ids";
import { command } from "@/lib/kernel/verb";
import { productionById } from "@/lib/productions";
import { heldLicences } from "../cards/held-licences";
import { priceNow } from "../cards/price-use";
import { invoiceTotals, taxTreatment } from "../invoice-tax";
import { PlaceOrder } from "../schemas";
import { nextInSeries, SERIES } from "./number-series";
import type { StoredLicensee, StoredPrice } from "./own-order";
import { SELLER_ZONE } from "./write-invoice";

type Wanted = z.output<typeof PlaceOrder>["lines"][number];
type Family = NonNullable<Awaited<ReturnType<typeof familyById>>>;

interface PricedLine {
  wanted: Wanted;
  family: Family;
  recordingIds: string[];
  price: StoredPrice;
}

async function recordingsFor(tx: Tx, family: Family, wanted: Wanted): Promise<string[]> {
  const listed = (await recordingsOfFamily(tx, family.id)).filter(({ state }) => state === "listed");
  const ids = listed.map(({ id }) => id);
  const chosen = wanted.recordingIds ?? ids;
  if (chosen.length === 0 || chosen.some((id) => !ids.includes(id)))
    throw new Invalid(`“${family.title}” has no such listed version.`);
  return ids.filter((id) => chosen.includes(id));
}

async function priceLine(tx: Tx, wanted: Wanted, family: Family, at: Date) {
  const { answer, card } = await priceNow(tx, { family, use: wanted.use, at });
  if (!answer.ok || !card || answer.totalMinor === null || answer.cardVersion === null)
    throw new Precondition(`“${family.title}” cannot be ordered for this use. ${answer.sentence}`);
  const { totalMinor, currency, sentence, factors, minimumApplied, cardVersion } = answer;
  const price = { totalMinor, currency, sentence, factors, minimumApplied, cardVersion, inputs: wanted.use };
  return { price, card: card.card };
}

async function priceLines(
  tx: Tx,
  input: z.output<typeof PlaceOrder>,
  companyId: string,
  now: Date,
): Promise<{ lines: PricedLine[]; libraryId: string }> {
  const families = new Map(
    (
      await familiesByIds(
        tx,
        input.lines.map(({ familyId }) => familyId),
      )
    ).map((family) => [family.id, family]),
  );
  const lines: PricedLine[] = [];
  for (const wanted of input.lines) {
    const family = families.get(wanted.familyId);
    if (family?.state !== "listed") throw new NotFound();
    const { price, card } = await priceLine(tx, wanted, family, now);
    const held = await heldLicences(tx, {
      companyId,
      productionId: input.productionId,
      familyId: family.id,
      card,
      use: wanted.use,
      now,
    });
    if (held.length > 0 && !input.evenIfHeld)
      throw new Conflict(
        `You already hold ${held.join(" and ")} for “${family.title}” in this production and this use. Nothing was ordered.`,
      );
    lines.push({ wanted, family, price, recordingIds: await recordingsFor(tx, family, wanted) });
  }
  const libraryIds = new Set(lines.map(({ family }) => family.libraryId));
  const [libraryId, other] = [...libraryIds];
  if (!libraryId || other) throw new Invalid("One order is one library: order from each library by itself.");
  return { lines, libraryId };
}

/** Any seat proposes an order: one library, one currency, each price kept with its inputs and factors. */
export const placeOrder = command({
  name: "licensing.placeOrder",
  who: ["buyer"],
  input: PlaceOrder,
  authorise: async ({ tx, actor, input }) => {
    const production = await productionById(tx, input.productionId);
    if (production?.companyId !== actor.companyId) throw new NotFound();
    const company = await companyById(tx, actor.companyId);
    if (!company) throw new NotFound();
    return { production, company };
  },
  run: async ({ tx, actor, input, subject: { production, company }, now }) => {
    const { lines, libraryId } = await priceLines(tx, input, company.id, now);
    const library = await libraryById(tx, libraryId);
    if (!library) throw new NotFound();
    const tax = taxTreatment(
      { country: company.countryCode, business: company.taxNumber !== null || company.countryCode === "GB" },
      civilDateIn(now, SELLER_ZONE),
    );
    if (!tax.ok) throw new Precondition(tax.sentence);
    const totals = invoiceTotals(
      lines.map(({ price }) => BigInt(price.totalMinor)),
      tax.rateBps,
    );
    const orderId = newId("ord");
    const { name, address, countryCode, taxNumber } = company;
    const licensee: StoredLicensee = { name, address, countryCode, taxNumber, endClient: production.client };
    await tx.insert(orderLines).values(
      lines.map(({ wanted, family, recordingIds, price }, index) => ({
        id: newId("lin"),
        orderId,
        number: index + 1,
        familyId: family.id,
        recordingIds,
        use: wanted.use,
        price: { ...price },
        netMinor: BigInt(price.totalMinor),
        taxMinor: totals.lineTaxMinor[index] ?? 0n,
      })),
    );
    const number = await nextInSeries(tx, SERIES.order);
    await tx.insert(orders).values({
      id: orderId,
      number,
      companyId: company.id,
      productionId: production.id,
      libraryId,
      currency: library.currency,
      netMinor: totals.netMinor,
      taxMinor: totals.taxMinor,
      grossMinor: totals.grossMinor,
      taxWords: tax.words,
      state: "proposed",
      stateWords: `Proposed by ${actor.name}; it waits for somebody who may approve.`,
      licensee: { ...licensee },
      acceptance: null,
      placedBy: actor.personId,
      placedAt: now,
    });
    return { orderId, number: `O-${number}` };
  },
  audit: ({ result, subject }) => ({
    subject: result.orderId,
    detail: { number: result.number, productionId: subject.production.id },
  }),
});
