import { and, eq, inArray } from "drizzle-orm";
import { expect } from "vitest";
import { db } from "@/db/client";
import { mailOutbox } from "@/db/schema/infrastructure";
import { ledgerEntries } from "@/db/schema/ledger";
import { invoices, licenceRecords, orderLines, orders } from "@/db/schema/licensing";
import { sleep } from "./random-instants";

/** What somebody does who is told that nothing was changed and to try again: the same once more. */
export async function again<T>(work: () => Promise<T>): Promise<T> {
  for (;;) {
    const answer = await work().then(
      (value) => ({ value }),
      () => null,
    );
    if (answer) return answer.value;
    await sleep(200);
  }
}

export const stateOf = async (orderId: string): Promise<string | undefined> => {
  const [row] = await db().select({ state: orders.state }).from(orders).where(eq(orders.id, orderId));
  return row?.state;
};

/** One payment, one entry of the journal, one invoice, one licence and one record a line, one confirmation. */
export async function expectSoldOnce(orderId: string): Promise<void> {
  expect(await stateOf(orderId)).toBe("licensed");
  const entries = await db().select().from(ledgerEntries).where(eq(ledgerEntries.orderId, orderId));
  expect(entries.map(({ code }) => code)).toEqual(["capture"]);
  expect(await db().select().from(invoices).where(eq(invoices.orderId, orderId))).toHaveLength(1);
  const lines = await db().select().from(orderLines).where(eq(orderLines.orderId, orderId));
  const records = await db()
    .select()
    .from(licenceRecords)
    .where(
      inArray(
        licenceRecords.orderLineId,
        lines.map(({ id }) => id),
      ),
    );
  expect(records.map((record) => record.orderLineId).sort()).toEqual(lines.map(({ id }) => id).sort());
  const mails = await db()
    .select()
    .from(mailOutbox)
    .where(and(eq(mailOutbox.subjectId, orderId), eq(mailOutbox.template, "order-confirmation")));
  expect(mails).toHaveLength(1);
}

/** Invoice and licence numbers follow on each other with none left out and none twice. */
export async function expectNumbersWithoutGap(count: { invoices: number; licences: number }): Promise<void> {
  const serial = (numbers: readonly (string | null)[], part: (number: string) => string | undefined) =>
    numbers.map((number) => Number(part(number ?? ""))).sort((a, b) => a - b);
  const invoiceNumbers = (await db().select({ number: invoices.number }).from(invoices)).map(
    (row) => row.number,
  );
  const licences = (await db().select({ number: orderLines.licenceNumber }).from(orderLines))
    .map((row) => row.number)
    .filter((number) => number !== null);
  const upTo = (last: number) => Array.from({ length: last }, (_, index) => index + 1);
  expect(serial(invoiceNumbers, (number) => number.slice(-4))).toEqual(upTo(count.invoices));
  expect(serial(licences, (number) => number.split("-")[2])).toEqual(upTo(count.licences));
}
