import { eq } from "drizzle-orm";
import { z } from "zod";
import type { Tx } from "@/db/client";
import { orders } from "@/db/schema/licensing";
import { familyById, libraryById, licensedMastersOf } from "@/lib/catalogue";
import { enqueue } from "@/lib/jobs";
import { civilDateIn } from "@/lib/kernel/calendar";
import { systemNow } from "@/lib/kernel/clock";
import { assert, NotFound } from "@/lib/kernel/errors";
import { decimalOf, money } from "@/lib/kernel/money";
import { command } from "@/lib/kernel/verb";
import { productionById } from "@/lib/productions";
import { cardAt } from "../cards/set-rate-card";
import { notIncludedWith } from "../media";
import type { LicenceRecord } from "../record/schema";
import { catalogueFacts } from "../records/facts";
import { addLicenceStatus } from "../records/record-log";
import { scopeOfUse } from "../records/scope-of-use";
import { type RecordContent, signIntoLog } from "../records/sign-into-log";
import { mailConfirmation } from "./mail-confirmation";
import {
  linesOf,
  lockOrder,
  type OrderLineRow,
  type OrderRow,
  orderById,
  storedAcceptance,
  storedLicensee,
  storedPrice,
} from "./own-order";
import { invoiceOf } from "./write-invoice";

/** Rounds of waiting for a master that is still being rendered, and seconds between them. */
export const MASTER_ROUNDS = 120;
const ROUND_S = 15;

function feeOf(order: OrderRow, line: OrderLineRow, invoiceNumber: string): RecordContent["fee"] {
  const amount = (minor: bigint) => decimalOf(money(minor, order.currency));
  const price = storedPrice(line);
  return {
    net: amount(line.netMinor),
    tax: amount(line.taxMinor),
    taxWords: order.taxWords,
    gross: amount(line.netMinor + line.taxMinor),
    currency: order.currency,
    basis: price.sentence,
    cardVersion: price.cardVersion,
    paymentReference: order.paymentIntent,
    invoiceNumber,
  };
}

async function contentOf(
  tx: Tx,
  order: OrderRow,
  line: OrderLineRow,
  invoiceNumber: string,
): Promise<RecordContent> {
  const at = order.paidAt ?? order.placedAt;
  const family = await familyById(tx, line.familyId);
  const production = await productionById(tx, order.productionId);
  const card = await cardAt(tx, order.libraryId, order.placedAt);
  const acceptance = storedAcceptance(order);
  assert(family && production && card && acceptance && line.licenceNumber, `line ${line.id} is complete`);
  const { facts, library } = await catalogueFacts(tx, { family, recordingIds: line.recordingIds, at });
  const { inputs: use } = storedPrice(line);
  const licensee = storedLicensee(order);
  const writers = facts.shares.writers.map(({ name }) => name).join(", ");
  return {
    ...facts,
    number: line.licenceNumber,
    licensee: { name: licensee.name, endClient: licensee.endClient, address: licensee.address },
    production: {
      type: production.kind,
      title: production.title,
      parts:
        production.episode ?? (use.episodes > 1 ? `${use.episodes} episodes` : "One production, as titled"),
      references: { internal: null, isan: null, eidr: null },
    },
    scope: scopeOfUse({
      card: card.card,
      use,
      startsOn: civilDateIn(at, library.timeZone),
      zone: library.timeZone,
      refusedUses: family.refusedUses,
      creditLine: `“${family.title}” by ${writers}, ${library.name}`,
      voice: family.voice,
    }),
    notIncluded: notIncludedWith(use.mediaClass),
    fee: feeOf(order, line, invoiceNumber),
    acceptance: {
      person: { name: acceptance.name, role: acceptance.role },
      authorityStatement: acceptance.authorityStatement,
      acceptedAt: acceptance.acceptedAt,
      method: "accepted on the site",
      addressSha256: acceptance.addressSha256,
    },
  };
}

export interface IssuedLicence {
  record: LicenceRecord;
  proofCode: string;
  line: OrderLineRow;
}

/**
 * Signs the records of a paid order as soon as every master it covers has been rendered, so that a record carries their
 * hashes; until then the order is paid and looks again. `evenWithout` ends the waiting.
 */
export async function issueWhenReady(
  tx: Tx,
  order: OrderRow,
  now: Date,
  waiting: { round: number; evenWithout: boolean },
): Promise<IssuedLicence[] | null> {
  const lines = await linesOf(tx, order.id);
  const wanted = [...new Set(lines.flatMap((line) => line.recordingIds))];
  const masters = await licensedMastersOf(tx, wanted);
  const missing = wanted.filter((id) => !masters.has(id));
  if (missing.length > 0 && !waiting.evenWithout) {
    for (const recordingId of missing)
      await enqueue(tx, "catalogue.renderMaster", { recordingId }, { key: recordingId, priority: 10 });
    const round = waiting.round + 1;
    await enqueue(
      tx,
      "licensing.issueRecords",
      { orderId: order.id, round },
      {
        key: `${order.id}:${round}`,
        priority: 20,
        runAt: new Date(systemNow().getTime() + (round === 1 ? 3 : ROUND_S) * 1000),
      },
    );
    return null;
  }
  const library = await libraryById(tx, order.libraryId);
  const invoice = await invoiceOf(tx, order.id);
  assert(invoice && library, `the paid order ${order.id} has an invoice`);
  const issued: IssuedLicence[] = [];
  for (const line of lines) {
    const content = await contentOf(tx, order, line, invoice.number);
    const { record, proofCode } = await signIntoLog(
      tx,
      content,
      {
        origin: "issued here",
        orderLineId: line.id,
        libraryId: order.libraryId,
        companyId: order.companyId,
        productionId: order.productionId,
        familyId: line.familyId,
      },
      now,
    );
    await addLicenceStatus(tx, {
      number: record.number,
      kind: "in force",
      words: `Issued for ${library.name} on payment of order O-${order.number}; in force.`,
      at: order.paidAt ?? now,
      now,
    });
    issued.push({ record, proofCode, line });
  }
  const count = issued.length === 1 ? "The licence is" : `The ${issued.length} licences are`;
  await tx
    .update(orders)
    .set({ state: "licensed", stateWords: `${count} issued and signed.`, issuedAt: now })
    .where(eq(orders.id, order.id));
  await mailConfirmation(tx, { order, issued, invoice, libraryName: library.name });
  return issued;
}

/** Looks again whether a paid order's masters are there. */
export const issueRecords = command({
  name: "licensing.issueRecords",
  who: ["system"],
  input: z.object({ orderId: z.string().max(40), round: z.number().int().min(1) }),
  guard: ({ tx, input }) => lockOrder(tx, input.orderId),
  authorise: async ({ tx, input }) => {
    const order = await orderById(tx, input.orderId);
    if (!order) throw new NotFound();
    return order;
  },
  run: async ({ tx, input, subject: order, now }) => {
    if (order.state !== "paid") return { issued: 0 };
    const issued = await issueWhenReady(tx, order, now, {
      round: input.round,
      evenWithout: input.round >= MASTER_ROUNDS,
    });
    return { issued: issued?.length ?? 0 };
  },
  audit: ({ subject, result }) => ({
    subject: subject.id,
    libraryId: subject.libraryId,
    detail: { issued: result.issued },
  }),
});
