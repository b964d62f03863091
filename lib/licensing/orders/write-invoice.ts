import { and, asc, eq } from "drizzle-orm";
import type { Reader, Tx } from "@/db/client";
import { invoices } from "@/db/schema/licensing";
import { familiesByIds } from "@/lib/catalogue";
import { civilDateIn } from "@/lib/kernel/calendar";
import { newId } from "@/lib/kernel/ids";
import { decimalOf, money } from "@/lib/kernel/money";
import { nextInSeries, SERIES } from "./number-series";
import { type OrderLineRow, type OrderRow, orderNumber, storedLicensee, storedPrice } from "./own-order";

/** The seller is one UK company: its papers and tax points are dated in London. */
export const SELLER_ZONE = "Europe/London";

/** The demonstration's seller: an invented UK company that sells in its own name. */
export const SELLER = {
  name: "Sedgewren Ltd",
  address: "12 Reedmace Wharf, Leith, United Kingdom",
  countryCode: "GB",
  taxNumber: "GB 999 0000 00 (invented)",
} as const;

export interface InvoiceLine {
  description: string;
  licenceNumber: string;
  net: string;
  tax: string;
}

/** Everything an invoice says, in decimals; it is never changed, only answered by a credit note. */
export interface InvoiceBody {
  number: string;
  issuedOn: string;
  suppliedOn: string;
  seller: { name: string; address: string; countryCode: string; taxNumber: string };
  buyer: { name: string; address: string; countryCode: string; taxNumber: string | null };
  licensor: string;
  orderNumber: string;
  currency: string;
  lines: InvoiceLine[];
  net: string;
  taxWords: string;
  tax: string;
  gross: string;
  rounded: "per invoice";
  refersToNumber: string | null;
  words: string | null;
}

export interface InvoiceRow {
  id: string;
  number: string;
  kind: string;
  body: InvoiceBody;
  issuedAt: Date;
}

type Row = typeof invoices.$inferSelect;
const asInvoice = ({ id, number, kind, body, issuedAt }: Row): InvoiceRow => ({
  id,
  number,
  kind,
  body: body as unknown as InvoiceBody,
  issuedAt,
});

export async function invoiceOf(reader: Reader, orderId: string): Promise<InvoiceRow | null> {
  const [row] = await reader
    .select()
    .from(invoices)
    .where(and(eq(invoices.orderId, orderId), eq(invoices.kind, "invoice")));
  return row ? asInvoice(row) : null;
}

export async function papersOf(reader: Reader, orderId: string): Promise<InvoiceRow[]> {
  const rows = await reader
    .select()
    .from(invoices)
    .where(eq(invoices.orderId, orderId))
    .orderBy(asc(invoices.issuedAt), asc(invoices.number));
  return rows.map(asInvoice);
}

interface Paper {
  order: OrderRow;
  lines: readonly OrderLineRow[];
  library: { code: string; name: string };
  now: Date;
}

async function bodyOf(
  tx: Tx,
  { order, lines, library, now }: Paper,
  number: string,
  correction: { refersToNumber: string; words: string } | null,
): Promise<InvoiceBody> {
  const families = new Map(
    (
      await familiesByIds(
        tx,
        lines.map(({ familyId }) => familyId),
      )
    ).map((family) => [family.id, family]),
  );
  const amount = (minor: bigint) => decimalOf(money(minor, order.currency));
  const sum = (pick: (line: OrderLineRow) => bigint) => lines.reduce((all, line) => all + pick(line), 0n);
  const [net, tax] = [sum((line) => line.netMinor), sum((line) => line.taxMinor)];
  const { name, address, countryCode, taxNumber } = storedLicensee(order);
  const today = civilDateIn(now, SELLER_ZONE);
  return {
    number,
    issuedOn: today,
    suppliedOn: civilDateIn(order.paidAt ?? now, SELLER_ZONE),
    seller: { ...SELLER },
    buyer: { name, address, countryCode, taxNumber },
    licensor: library.name,
    orderNumber: orderNumber(order),
    currency: order.currency,
    lines: lines.map((line) => ({
      description: `Licence of “${families.get(line.familyId)?.title ?? "a cue"}”: ${storedPrice(line)
        .factors.filter(({ kind }) => ["base", "territory", "term"].includes(kind))
        .map(({ label }) => label)
        .join(", ")}`,
      licenceNumber: line.licenceNumber ?? "",
      net: amount(line.netMinor),
      tax: amount(line.taxMinor),
    })),
    net: amount(net),
    taxWords: order.taxWords,
    tax: amount(tax),
    gross: amount(net + tax),
    rounded: "per invoice",
    refersToNumber: correction?.refersToNumber ?? null,
    words: correction?.words ?? null,
  };
}

const serial = (value: number) => String(value).padStart(4, "0");

/** LICENSING-4: one gapless series a library and year. */
export async function writeInvoice(tx: Tx, paper: Paper): Promise<InvoiceRow> {
  const { order, library, now } = paper;
  const year = Number(civilDateIn(now, SELLER_ZONE).slice(0, 4));
  const number = `${library.code}-${year}-${serial(await nextInSeries(tx, SERIES.invoice(library.code, year)))}`;
  const row = { id: newId("inv"), number, kind: "invoice", issuedAt: now };
  const body = await bodyOf(tx, paper, number, null);
  await tx.insert(invoices).values({
    ...row,
    libraryId: order.libraryId,
    orderId: order.id,
    refersTo: null,
    body: { ...body },
  });
  return { ...row, body };
}

/** A correction is a paper of its own that names the invoice; the invoice stays as it is. */
export async function writeCreditNote(
  tx: Tx,
  paper: Paper & { invoice: InvoiceRow; words: string },
): Promise<InvoiceRow> {
  const { order, library, now, invoice, words } = paper;
  const year = Number(civilDateIn(now, SELLER_ZONE).slice(0, 4));
  const number = `${library.code}-${year}-C${serial(await nextInSeries(tx, SERIES.creditNote(library.code, year)))}`;
  const row = { id: newId("inv"), number, kind: "credit note", issuedAt: now };
  const body = await bodyOf(tx, paper, number, { refersToNumber: invoice.number, words });
  await tx.insert(invoices).values({
    ...row,
    libraryId: order.libraryId,
    orderId: order.id,
    refersTo: invoice.id,
    body: { ...body },
  });
  return { ...row, body };
}
