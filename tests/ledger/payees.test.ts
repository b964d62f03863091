import "@/tests/support/database";
import { and, eq, like } from "drizzle-orm";
import { expect, test } from "vitest";
import { db } from "@/db/client";
import { jobs, mailOutbox } from "@/db/schema/infrastructure";
import { payees } from "@/db/schema/ledger";
import { withBusinessClock } from "@/lib/kernel/clock";
import { newId } from "@/lib/kernel/ids";
import {
  getOwnPayee,
  readPayeeToOpen,
  readPaymentEvent,
  recordPayeeAccount,
  recordPayeeReady,
  recordPaymentEvent,
  startPayee,
} from "@/lib/ledger";
import { renderMail } from "@/lib/mail";
import { job, makeShop } from "./support";

const NAMED = { legalName: "A Payee Ltd", countryCode: "gb" };

async function openPayee(actor: Parameters<typeof startPayee>[0]) {
  const { payeeId } = await startPayee(actor, NAMED);
  const accountId = newId("acct");
  await recordPayeeAccount(job, { payeeId, accountId });
  return { payeeId, accountId };
}

test("a payee begins once: the processor's account is asked for by a job, and cannot be begun again when it is open", async () => {
  const shop = await makeShop();
  const { payeeId } = await startPayee(shop.owner, NAMED);
  expect((await startPayee(shop.accountant, NAMED)).payeeId).toBe(payeeId);
  const queued = await db()
    .select()
    .from(jobs)
    .where(and(eq(jobs.name, "ledger.openPayee"), like(jobs.dedupeKey, `%${payeeId}`)));
  expect(queued).toHaveLength(1);
  expect(await readPayeeToOpen(job, { payeeId })).toMatchObject({
    countryCode: "GB",
    processorAccount: null,
  });
  await recordPayeeAccount(job, { payeeId, accountId: "acct_first" });
  await recordPayeeAccount(job, { payeeId, accountId: "acct_second" });
  expect((await db().select().from(payees).where(eq(payees.id, payeeId)))[0]?.processorAccount).toBe(
    "acct_first",
  );
  await expect(startPayee(shop.owner, NAMED)).rejects.toMatchObject({ code: "precondition" });
});

test("a library's payee asks for a recent second factor; a composer's is the composer's own", async () => {
  const shop = await makeShop();
  const stale = { ...shop.owner, secondFactorAt: new Date(Date.now() - 11 * 60_000).toISOString() };
  await expect(startPayee(stale, NAMED)).rejects.toMatchObject({ fields: { secondFactor: "again" } });
  await startPayee(shop.composer(shop.A), NAMED);
  expect(await getOwnPayee(shop.composer(shop.A), {})).toMatchObject({
    kind: "person",
    state: "not started",
  });
  expect(await getOwnPayee(shop.composer(shop.C), {})).toBeNull();
  expect(await getOwnPayee(shop.owner, {})).toBeNull();
});

test("another bank account stops payouts for 7 days and is told to everybody concerned; the first, or the same again, is not", async () => {
  const shop = await makeShop();
  const { payeeId, accountId } = await openPayee(shop.owner);
  const told = () => db().select().from(mailOutbox).where(eq(mailOutbox.subjectId, payeeId));
  const on = (day: string, ref: string) =>
    withBusinessClock(new Date(`${day}T09:00:00Z`), () =>
      recordPayeeReady(job, { accountId, isReady: true, bank: { ref, last4: "4417" } }),
    );
  await on("2026-05-01", "ba_one");
  await on("2026-05-02", "ba_one");
  expect(await told()).toEqual([]);
  expect(await on("2026-05-03", "ba_two")).toMatchObject({ isOtherBank: true });
  await on("2026-05-04", "ba_two");
  const mails = await told();
  expect(mails.map(({ personId }) => personId).sort()).toEqual(
    [shop.owner.personId, shop.accountant.personId].sort(),
  );
  const letter = await renderMail("bank-change-notice", mails[0]?.props, {
    isDemonstration: true,
    siteUrl: "http://127.0.0.1",
  });
  expect(letter.text).toContain("4417");
  const heldOn = (day: string) =>
    withBusinessClock(new Date(day), async () => (await getOwnPayee(shop.owner, {}))?.heldUntil ?? null);
  expect((await heldOn("2026-05-10T08:59:00Z"))?.toISOString().slice(0, 10)).toBe("2026-05-10");
  expect(await heldOn("2026-05-10T09:01:00Z")).toBeNull();
});

test("a processor's event twenty times is kept once and asks for one job", async () => {
  const eventId = newId("evt");
  const event = { eventId, type: "account.updated", subject: { kind: "payee_changed", accountId: "acct_x" } };
  await Promise.all(
    Array.from({ length: 20 }, () =>
      recordPaymentEvent(job, event, { operationId: `payment event:${eventId}` }),
    ),
  );
  expect(await readPaymentEvent(job, { eventId })).toEqual({
    eventId,
    type: event.type,
    subject: event.subject,
  });
  const queued = await db()
    .select()
    .from(jobs)
    .where(and(eq(jobs.name, "licensing.paymentEvent"), like(jobs.dedupeKey, `%${eventId}`)));
  expect(queued).toHaveLength(1);
  expect(await readPaymentEvent(job, { eventId: newId("evt") })).toBeNull();
});
