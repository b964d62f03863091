import { and, desc, eq, inArray } from "drizzle-orm";
import { z } from "zod";
import type { Reader } from "@/db/client";
import { orders } from "@/db/schema/licensing";
import { peopleByIds } from "@/lib/accounts";
import { familiesByIds, libraryById, licensedMastersOf, recordingsByIds } from "@/lib/catalogue";
import { versionRoleLabel } from "@/lib/catalogue/version-roles";
import type { ActorOf } from "@/lib/kernel/actor";
import { assert, NotFound } from "@/lib/kernel/errors";
import { formatMoney, money } from "@/lib/kernel/money";
import { open, query } from "@/lib/kernel/verb";
import { productionById } from "@/lib/productions";
import type { PriceFactor } from "../price";
import { statusHistory } from "../records/record-log";
import type { OrderState } from "../states";
import { TERMS_TEXT, TERMS_VERSION } from "../terms";
import { wordsOfUse } from "./mail-confirmation";
import {
  linesOf,
  type OrderLineRow,
  type OrderRow,
  orderById,
  orderNumber,
  storedAcceptance,
  storedLicensee,
  storedPrice,
} from "./own-order";
import { refundsOf } from "./refund-lines";
import { type InvoiceRow, papersOf } from "./write-invoice";

type Viewer = ActorOf<"buyer" | "owner" | "accountant" | "auditor">;

export interface OrderLinePage {
  id: string;
  title: string;
  catalogueNumber: string;
  useWords: string;
  priceSentence: string;
  cardVersion: string;
  factors: PriceFactor[];
  net: string;
  tax: string;
  versions: { recordingId: string; role: string; durationS: number; hasMaster: boolean }[];
  licenceNumber: string | null;
  /** The last line of the licence's history. */
  status: { kind: string; words: string; at: string } | null;
  isRefunded: boolean;
}

export interface OrderPage {
  id: string;
  number: string;
  state: OrderState;
  words: string;
  isBuyers: boolean;
  mayApprove: boolean;
  mayRefund: boolean;
  libraryName: string;
  licensee: { name: string; endClient: string | null };
  production: { id: string; title: string; episode: string | null };
  placedAt: Date;
  placedBy: string;
  approvedBy: string | null;
  acceptance: { name: string; acceptedAt: string; termsVersion: string } | null;
  paidAt: Date | null;
  lines: OrderLinePage[];
  net: string;
  taxWords: string;
  tax: string;
  gross: string;
  papers: { number: string; kind: string; issuedAt: Date; gross: string; currency: string }[];
  refunds: { words: string; amount: string; state: string; at: Date }[];
  terms: { version: string; text: string };
}

function maySee(actor: Viewer, order: OrderRow): boolean {
  if (actor.kind === "buyer") return actor.companyId === order.companyId;
  const isAll = (actor.kind === "accountant" || actor.kind === "auditor") && actor.libraryId === null;
  return isAll || actor.libraryId === order.libraryId;
}

async function seenOrder(reader: Reader, actor: Viewer, orderId: string): Promise<OrderRow> {
  const order = await orderById(reader, orderId);
  if (!order || !maySee(actor, order)) throw new NotFound();
  return order;
}

async function linePages(
  reader: Reader,
  order: OrderRow,
  refunded: ReadonlySet<string>,
): Promise<OrderLinePage[]> {
  const lines = await linesOf(reader, order.id);
  const families = new Map(
    (
      await familiesByIds(
        reader,
        lines.map(({ familyId }) => familyId),
      )
    ).map((family) => [family.id, family]),
  );
  const ids = lines.flatMap(({ recordingIds }) => recordingIds);
  const recordings = new Map((await recordingsByIds(reader, ids)).map((row) => [row.id, row]));
  const masters = await licensedMastersOf(reader, ids);
  const text = (minor: bigint) => formatMoney(money(minor, order.currency));
  const pages: OrderLinePage[] = [];
  for (const line of lines) {
    const { sentence, cardVersion, factors } = storedPrice(line);
    const last = line.licenceNumber ? (await statusHistory(reader, line.licenceNumber)).at(-1) : undefined;
    pages.push({
      id: line.id,
      title: families.get(line.familyId)?.title ?? "a cue",
      catalogueNumber: families.get(line.familyId)?.catalogueNumber ?? "",
      useWords: wordsOfUse(line),
      priceSentence: sentence,
      cardVersion,
      factors,
      net: text(line.netMinor),
      tax: text(line.taxMinor),
      versions: versionsOf(line, recordings, masters),
      licenceNumber: line.licenceNumber,
      status: last ? { kind: last.kind, words: last.words, at: last.at } : null,
      isRefunded: refunded.has(line.id),
    });
  }
  return pages;
}

function versionsOf(
  line: OrderLineRow,
  recordings: ReadonlyMap<string, { versionRole: string; durationS: number }>,
  masters: ReadonlyMap<string, unknown>,
): OrderLinePage["versions"] {
  return line.recordingIds.flatMap((recordingId) => {
    const recording = recordings.get(recordingId);
    if (!recording) return [];
    const { versionRole, durationS } = recording;
    return [
      { recordingId, role: versionRoleLabel(versionRole), durationS, hasMaster: masters.has(recordingId) },
    ];
  });
}

/** One order as its company, its library or the marketplace's accountant sees it. */
export const getOrder = query({
  name: "licensing.getOrder",
  who: ["buyer", "owner", "accountant", "auditor"],
  input: z.object({ orderId: z.string().max(40) }),
  authorise: ({ reader, actor, input }) => seenOrder(reader, actor, input.orderId),
  run: async ({ reader, actor, subject: order }): Promise<OrderPage> => {
    const library = await libraryById(reader, order.libraryId);
    const production = await productionById(reader, order.productionId);
    assert(library && production, `the library and production of ${order.id} are there`);
    const people = await peopleByIds(reader, [
      order.placedBy,
      ...(order.approvedBy ? [order.approvedBy] : []),
    ]);
    const refunds = await refundsOf(reader, order.id);
    const papers = await papersOf(reader, order.id);
    const acceptance = storedAcceptance(order);
    const text = (minor: bigint) => formatMoney(money(minor, order.currency));
    const { name, endClient } = storedLicensee(order);
    return {
      id: order.id,
      number: orderNumber(order),
      state: order.state as OrderState,
      words: order.stateWords,
      isBuyers: actor.kind === "buyer",
      mayApprove: actor.kind === "buyer" && actor.mayApprove,
      mayRefund: actor.kind === "owner" || (actor.kind === "accountant" && actor.libraryId === null),
      libraryName: library.name,
      licensee: { name, endClient },
      production: { id: production.id, title: production.title, episode: production.episode },
      placedAt: order.placedAt,
      placedBy: people.get(order.placedBy)?.name ?? "somebody who has left",
      approvedBy: order.approvedBy ? (people.get(order.approvedBy)?.name ?? null) : null,
      acceptance: acceptance && {
        name: acceptance.name,
        acceptedAt: acceptance.acceptedAt,
        termsVersion: acceptance.termsVersion,
      },
      paidAt: order.paidAt,
      lines: await linePages(reader, order, new Set(refunds.flatMap(({ lineIds }) => lineIds))),
      net: text(order.netMinor),
      taxWords: order.taxWords,
      tax: text(order.taxMinor),
      gross: text(order.grossMinor),
      papers: papers.map(({ number, kind, issuedAt, body }) => ({
        number,
        kind,
        issuedAt,
        gross: body.gross,
        currency: body.currency,
      })),
      refunds: refunds.map(({ words, amountMinor, currency, state, askedAt, doneAt }) => ({
        words,
        amount: formatMoney(money(amountMinor, currency)),
        state,
        at: doneAt ?? askedAt,
      })),
      terms: { version: TERMS_VERSION, text: TERMS_TEXT },
    };
  },
});

/** Invoice and credit notes of one order, in full. */
export const getInvoices = query({
  name: "licensing.getInvoices",
  who: ["buyer", "owner", "accountant", "auditor"],
  input: z.object({ orderId: z.string().max(40) }),
  authorise: ({ reader, actor, input }) => seenOrder(reader, actor, input.orderId),
  run: ({ reader, subject }): Promise<InvoiceRow[]> => papersOf(reader, subject.id),
});

export interface OrderEntry {
  id: string;
  number: string;
  state: OrderState;
  words: string;
  gross: string;
  productionTitle: string;
  placedAt: Date;
}

/** The company's orders that are not licensed yet, the newest first. */
export const listOpenOrders = query({
  name: "licensing.listOpenOrders",
  who: ["buyer"],
  input: z.object({}),
  authorise: open("each row is of the buyer's own company"),
  run: async ({ reader, actor }): Promise<OrderEntry[]> => {
    const rows = await reader
      .select()
      .from(orders)
      .where(
        and(
          eq(orders.companyId, actor.companyId),
          inArray(orders.state, ["proposed", "awaiting payment", "paid"]),
        ),
      )
      .orderBy(desc(orders.placedAt), desc(orders.number));
    const entries: OrderEntry[] = [];
    for (const row of rows) {
      const production = await productionById(reader, row.productionId);
      entries.push({
        id: row.id,
        number: orderNumber(row),
        state: row.state as OrderState,
        words: row.stateWords,
        gross: formatMoney(money(row.grossMinor, row.currency)),
        productionTitle: production?.title ?? "a production",
        placedAt: row.placedAt,
      });
    }
    return entries;
  },
});
