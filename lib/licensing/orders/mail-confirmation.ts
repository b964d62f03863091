import type { Tx } from "@/db/client";
import { peopleByIds } from "@/lib/accounts";
import { env } from "@/lib/kernel/env";
import { money } from "@/lib/kernel/money";
import { formatProofCode } from "@/lib/kernel/proof-code";
import { enqueueMail, mailAmount } from "@/lib/mail";
import type { LicenceRecord } from "../record/schema";
import { type OrderLineRow, type OrderRow, orderNumber, storedLicensee, storedPrice } from "./own-order";
import { type InvoiceRow, SELLER } from "./write-invoice";

/** "TV or radio programme incl. catch-up, United Kingdom and Ireland, 3 years, up to 6 episodes" */
export function wordsOfUse(line: OrderLineRow): string {
  return storedPrice(line)
    .factors.filter(
      ({ kind, value }) =>
        ["base", "territory", "term"].includes(kind) ||
        (["tier", "episodes", "versions", "student or charity"].includes(kind) && value !== "1"),
    )
    .map(({ label }) => label)
    .join(", ");
}

async function recipientOf(tx: Tx, order: OrderRow) {
  const id = order.approvedBy ?? order.placedBy;
  return (await peopleByIds(tx, [id])).get(id) ?? null;
}

/** Invoice and records, with their links, to whoever approved. */
export async function mailConfirmation(
  tx: Tx,
  args: {
    order: OrderRow;
    issued: ReadonlyArray<{ record: LicenceRecord; proofCode: string; line: OrderLineRow }>;
    invoice: InvoiceRow;
    libraryName: string;
  },
): Promise<void> {
  const { order, issued, invoice, libraryName } = args;
  const person = await recipientOf(tx, order);
  if (!person) return;
  const amount = (minor: bigint) => mailAmount(money(minor, order.currency));
  await enqueueMail(tx, {
    toAddress: person.email,
    personId: person.id,
    template: "order-confirmation",
    subjectId: order.id,
    props: {
      orderNumber: orderNumber(order),
      paidAt: (order.paidAt ?? invoice.issuedAt).toISOString(),
      sellerName: SELLER.name,
      licensorName: libraryName,
      companyName: storedLicensee(order).name,
      invoiceNumber: invoice.number,
      invoiceUrl: `${env.SITE_URL}/orders/${order.id}/invoice`,
      licences: issued.map(({ record, proofCode, line }) => ({
        title: record.cue.title,
        scopeInWords: wordsOfUse(line),
        recordNumber: record.number,
        proofCode: formatProofCode(proofCode),
        recordUrl: `${env.SITE_URL}/records/${record.number}`,
        proofUrl: `${env.SITE_URL}/check/${proofCode}`,
        net: amount(line.netMinor),
      })),
      net: amount(order.netMinor),
      taxInWords: order.taxWords,
      tax: amount(order.taxMinor),
      gross: amount(order.grossMinor),
      orderUrl: `${env.SITE_URL}/orders/${order.id}`,
      zone: person.timeZone,
    },
  });
}

export async function mailRefund(
  tx: Tx,
  args: {
    order: OrderRow;
    amountMinor: bigint;
    currency: string;
    refundedAt: Date;
    reason: string;
    creditNoteNumber: string | null;
    licences: ReadonlyArray<{ title: string; recordNumber: string; effect: string }>;
  },
): Promise<void> {
  const { order } = args;
  const person = await recipientOf(tx, order);
  if (!person) return;
  await enqueueMail(tx, {
    toAddress: person.email,
    personId: person.id,
    template: "refund-notice",
    subjectId: order.id,
    props: {
      orderNumber: orderNumber(order),
      amount: mailAmount(money(args.amountMinor, args.currency)),
      refundedAt: args.refundedAt.toISOString(),
      reason: args.reason,
      ...(args.creditNoteNumber ? { creditNoteNumber: args.creditNoteNumber } : {}),
      licences: [...args.licences],
      orderUrl: `${env.SITE_URL}/orders/${order.id}`,
      zone: person.timeZone,
    },
  });
}
