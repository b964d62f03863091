import "@/tests/support/database";
import { and, count, eq, inArray, like } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { mailOutbox } from "@/db/schema/infrastructure";
import { auditLog } from "@/db/schema/kernel";
import { ledgerAccounts, ledgerEntries, ledgerTransfers } from "@/db/schema/ledger";
import { invoices, licenceRecords, numberSeries, orderLines, orders } from "@/db/schema/licensing";
import { placeHold } from "@/lib/catalogue";
import { system } from "@/lib/kernel/actor";
import { isMod3736 } from "@/lib/kernel/check-characters";
import { checkLedger } from "@/lib/ledger";
import {
  approveOrder,
  completePayment,
  getLicence,
  getOrder,
  issueRecords,
  openCheckout,
  openSeries,
  placeOrder,
  priceUse,
  refundLines,
  sendRefund,
  withdrawOrder,
} from "@/lib/licensing";
import { TERMS_VERSION } from "@/lib/licensing/terms";
import { readCheckout } from "@/lib/payments";
import { makeCompany } from "@/tests/support/make";
import {
  approved,
  deliver,
  makeCue,
  makeMasters,
  makeProduction,
  makeShop,
  ONLINE,
  openTill,
  PROGRAMME,
  paid,
  proposed,
  type Till,
} from "./shop";

let till: Till;
beforeAll(async () => {
  till = await openTill();
  await openSeries(system("tests"), { name: "order", last: 1040 });
  await openSeries(system("tests"), { name: "licence:2026", last: 100 });
});
afterAll(() => till.close());

const orderRow = async (orderId: string) => {
  const [row] = await db().select().from(orders).where(eq(orders.id, orderId));
  if (!row) throw new Error(`no order ${orderId}`);
  return row;
};
const entriesOf = (orderId: string) =>
  db().select().from(ledgerEntries).where(eq(ledgerEntries.orderId, orderId));
const recordsOf = (productionId: string) =>
  db().select().from(licenceRecords).where(eq(licenceRecords.productionId, productionId));
const licencesOf = async (orderId: string) =>
  (await db().select().from(orderLines).where(eq(orderLines.orderId, orderId))).map(
    (line) => line.licenceNumber,
  );
const isDone =
  (checkoutId: string) =>
  ({ type, text }: { type: string; text: string }) =>
    type === "checkout.session.completed" && text.includes(checkoutId);

/** What an order has left in clearing: what came less what went. */
async function clearingOf(orderId: string): Promise<bigint> {
  const ids = (await entriesOf(orderId)).map(({ id }) => id);
  const legs = await db().select().from(ledgerTransfers).where(inArray(ledgerTransfers.entryId, ids));
  const accounts = await db()
    .select({ id: ledgerAccounts.id })
    .from(ledgerAccounts)
    .where(eq(ledgerAccounts.kind, "processor clearing"));
  const isClearing = (id: string) => accounts.some((account) => account.id === id);
  const signed = ({ debitAccountId, creditAccountId, amountMinor }: (typeof legs)[number]) =>
    (isClearing(debitAccountId) ? amountMinor : 0n) - (isClearing(creditAccountId) ? amountMinor : 0n);
  return legs.reduce((sum, leg) => sum + signed(leg), 0n);
}

describe("an order", () => {
  test("the first order and its licences go on where the installation's numbers began", async () => {
    const shop = await makeShop();
    const [one, eight] = [
      await makeCue(shop.libraryId),
      await makeCue(shop.libraryId, { shares: [3334, 3333, 3333] }),
    ];
    const orderId = await paid(shop, till, [
      { familyId: one.familyId, use: PROGRAMME },
      { familyId: eight.familyId, use: ONLINE },
    ]);
    const order = await getOrder(shop.proposer, { orderId });
    // The worked order of the demonstration: 240.00 and 125.00 net, 20 % VAT.
    expect(order).toMatchObject({
      number: "O-1041",
      state: "licensed",
      net: "£365.00",
      tax: "£73.00",
      gross: "£438.00",
    });
    expect(order.lines.map(({ licenceNumber }) => licenceNumber?.slice(0, -2))).toEqual([
      "LR-2026-0101",
      "LR-2026-0102",
    ]);
    for (const { licenceNumber } of order.lines)
      expect(isMod3736(licenceNumber?.replaceAll("-", "") ?? "")).toBe(true);
    const [entry] = await entriesOf(orderId);
    expect(entry).toMatchObject({ code: "capture", currency: "GBP" });
    const legs = await db()
      .select()
      .from(ledgerTransfers)
      .where(eq(ledgerTransfers.entryId, entry?.id ?? ""));
    // 1.5 % of 438.00 and 0.20, as the far end takes it, is 6.77.
    expect(legs.some((leg) => leg.amountMinor === 677n)).toBe(true);
  });

  test("LICENSING-3: a seat that may only propose cannot accept or pay, and another company's order does not exist", async () => {
    const shop = await makeShop();
    const stranger = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const orderId = await proposed(shop, [{ familyId, use: PROGRAMME }]);
    const terms = { orderId, termsVersion: TERMS_VERSION, mayAccept: true } as const;
    await expect(approveOrder(shop.proposer, terms)).rejects.toMatchObject({ code: "forbidden" });
    await expect(approveOrder(stranger.approver, terms)).rejects.toMatchObject({ code: "not_found" });
    await expect(getOrder(stranger.approver, { orderId })).rejects.toMatchObject({ code: "not_found" });
    await approveOrder(shop.approver, terms);
    await expect(openCheckout(shop.proposer, { orderId })).rejects.toMatchObject({ code: "forbidden" });
    await expect(openCheckout(stranger.approver, { orderId })).rejects.toMatchObject({ code: "not_found" });
    expect(await getOrder(shop.proposer, { orderId })).toMatchObject({
      state: "awaiting payment",
      mayApprove: false,
    });
  });

  test("approval without the sentence about authority, or of other terms than today's, is refused", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const orderId = await proposed(shop, [{ familyId, use: PROGRAMME }]);
    await expect(
      approveOrder(shop.approver, {
        orderId,
        termsVersion: TERMS_VERSION,
        mayAccept: false as unknown as true,
      }),
    ).rejects.toMatchObject({ code: "invalid" });
    await expect(
      approveOrder(shop.approver, { orderId, termsVersion: "1999-1", mayAccept: true }),
    ).rejects.toMatchObject({ code: "precondition" });
  });

  test("opening the payment page twice is one checkout; after it lapsed a new one is begun", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const { orderId, checkoutId } = await approved(shop, [{ familyId, use: PROGRAMME }]);
    const again = await openCheckout(shop.approver, { orderId });
    expect(again).toMatchObject({ state: "open", url: expect.stringContaining(checkoutId) });
    await till.tell({ expire: checkoutId });
    await deliver(({ type, text }) => type === "checkout.session.expired" && text.includes(checkoutId));
    expect((await orderRow(orderId)).stateWords).toContain("lapsed");
    const fresh = await openCheckout(shop.approver, { orderId });
    expect(fresh.state === "open" && fresh.url.includes(checkoutId)).toBe(false);
  });

  test("one order is one library", async () => {
    const [shop, other] = [await makeShop(), await makeShop()];
    const [here, there] = [await makeCue(shop.libraryId), await makeCue(other.libraryId)];
    await expect(
      proposed(shop, [
        { familyId: here.familyId, use: PROGRAMME },
        { familyId: there.familyId, use: PROGRAMME },
      ]),
    ).rejects.toMatchObject({ code: "invalid" });
  });

  test("a use that is held already is warned of by number, and can be ordered on purpose", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const orderId = await paid(shop, till, [{ familyId, use: PROGRAMME }]);
    const [number] = await licencesOf(orderId);
    const wish = { productionId: shop.productionId, lines: [{ familyId, use: PROGRAMME }] };
    await expect(placeOrder(shop.proposer, wish)).rejects.toMatchObject({
      code: "conflict",
      message: expect.stringContaining(`You already hold ${number}`),
    });
    const priced = await priceUse(shop.proposer, {
      familyId,
      use: PROGRAMME,
      productionId: shop.productionId,
    });
    expect(priced.held).toEqual([number]);
    const longer = { ...PROGRAMME, episodes: 6 };
    expect(
      await priceUse(shop.proposer, { familyId, use: longer, productionId: shop.productionId }),
    ).toMatchObject({ held: [] });
    expect(await placeOrder(shop.proposer, { ...wish, evenIfHeld: true })).toMatchObject({
      number: expect.stringMatching(/^O-\d+$/),
    });
  });

  test("a buyer abroad with a tax number pays no tax and reads why; without one there is no sale", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const buy = async (taxNumber: string | null) => {
      const companyId = await makeCompany({ countryCode: "CA", taxNumber });
      const actor = { ...shop.proposer, companyId } as typeof shop.proposer;
      const productionId = await makeProduction(companyId);
      const { orderId } = await placeOrder(actor, { productionId, lines: [{ familyId, use: PROGRAMME }] });
      return getOrder(actor, { orderId });
    };
    expect(await buy("CA123")).toMatchObject({
      tax: "£0.00",
      gross: "£240.00",
      taxWords: expect.stringContaining("Reverse charge"),
    });
    await expect(buy(null)).rejects.toMatchObject({ code: "precondition" });
  });
});

describe("a payment", () => {
  test("LICENSING-2: a hold placed between order and payment: everything goes back, nothing is issued, the buyer is told", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const { orderId, checkoutId } = await approved(shop, [{ familyId, use: PROGRAMME }]);
    await db().transaction((tx) =>
      placeHold(tx, {
        familyId,
        cause: "reported work",
        causeId: "not_x",
        reason: "A question is open.",
        now: new Date(),
      }),
    );
    await till.tell({ pay: checkoutId });
    await deliver(isDone(checkoutId));
    const order = await orderRow(orderId);
    expect(order).toMatchObject({ state: "refused", stateWords: expect.stringContaining("on hold") });
    const { refunds } = await getOrder(shop.proposer, { orderId });
    expect(refunds).toMatchObject([{ amount: "£288.00", state: "asked" }]);
    await sendAsked(orderId);
    expect((await readCheckout(checkoutId)).payment?.refunded.minor).toBe(28_800n);
    expect(await recordsOf(shop.productionId)).toHaveLength(0);
    expect(await db().select().from(invoices).where(eq(invoices.orderId, orderId))).toHaveLength(0);
    expect((await entriesOf(orderId)).map(({ code }) => code).sort()).toEqual([
      "payment refused",
      "payment returned",
    ]);
    // 1.5 % of 288.00 and 0.20: the far end keeps its fee, and the platform bears it.
    expect(await clearingOf(orderId)).toBe(-452n);
    expect(await checkLedger(system("tests"), {})).toEqual([]);
    const [mail] = await db()
      .select()
      .from(mailOutbox)
      .where(and(eq(mailOutbox.subjectId, orderId), eq(mailOutbox.template, "refund-notice")));
    expect(mail?.props).toMatchObject({ amount: { minor: "28800", currency: "GBP" } });
  });

  test("a hold and a payment at the same moment: sold before it or refunded after it, forty times out of forty", async () => {
    const shop = await makeShop();
    for (let round = 0; round < 40; round++) {
      const { familyId } = await makeCue(shop.libraryId);
      const { orderId, checkoutId } = await approved(shop, [{ familyId, use: PROGRAMME }]);
      await till.tell({ pay: checkoutId });
      const hold = () =>
        db().transaction(
          (tx) =>
            placeHold(tx, {
              familyId,
              cause: "reported work",
              causeId: "not_r",
              reason: "A question.",
              now: new Date(),
            }),
          { isolationLevel: "read committed" },
        );
      await Promise.all([deliver(isDone(checkoutId)), hold()]);
      const { state } = await orderRow(orderId);
      const records = await db().select().from(licenceRecords).where(eq(licenceRecords.familyId, familyId));
      expect([state, records.length]).toEqual(state === "licensed" ? ["licensed", 1] : ["refused", 0]);
    }
  }, 120_000);

  test("LICENSING-8: the same event twenty times, doubled at once and late, moves money once", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const { orderId, checkoutId } = await approved(shop, [{ familyId, use: PROGRAMME }]);
    await till.tell({ pay: checkoutId });
    await deliver(isDone(checkoutId), (ids) => Array.from({ length: 20 }, () => ids[0] ?? ""));
    await Promise.all(Array.from({ length: 8 }, () => deliver(isDone(checkoutId))));
    expect((await entriesOf(orderId)).map(({ code }) => code)).toEqual(["capture"]);
    expect(await recordsOf(shop.productionId)).toHaveLength(1);
    expect(await db().select().from(invoices).where(eq(invoices.orderId, orderId))).toHaveLength(1);
    const mails = await db().select().from(mailOutbox).where(eq(mailOutbox.subjectId, orderId));
    expect(mails.map(({ template }) => template)).toEqual(["order-confirmation"]);
  });

  test("another amount than was due goes back, and an order that is paid twice gives the second payment back", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const orderId = await proposed(shop, [{ familyId, use: PROGRAMME }]);
    await approveOrder(shop.approver, { orderId, termsVersion: TERMS_VERSION, mayAccept: true });
    const payment = { orderId, chargeId: "ch_x", currency: "GBP", feeMinor: 452n };
    expect(
      await completePayment(system("tests"), {
        ...payment,
        checkoutId: "cs_short",
        paymentId: "pi_short",
        grossMinor: 100n,
      }),
    ).toEqual({ outcome: "refused" });
    const second = await paid(shop, till, [{ familyId, use: PROGRAMME }]);
    expect(
      await completePayment(system("tests"), {
        ...payment,
        orderId: second,
        checkoutId: "cs_2",
        paymentId: "pi_2",
        grossMinor: 28_800n,
      }),
    ).toEqual({ outcome: "refused" });
    expect(await orderRow(second)).toMatchObject({ state: "licensed" });
    expect((await getOrder(shop.approver, { orderId: second })).refunds).toMatchObject([
      { amount: "£288.00" },
    ]);
  });

  test("an order that was withdrawn and is paid all the same gives the payment back", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const { orderId, checkoutId } = await approved(shop, [{ familyId, use: PROGRAMME }]);
    await withdrawOrder(shop.proposer, { orderId });
    await till.tell({ pay: checkoutId });
    await deliver(isDone(checkoutId));
    expect(await orderRow(orderId)).toMatchObject({ state: "refused" });
    expect(await recordsOf(shop.productionId)).toHaveLength(0);
  });

  test("LICENSING-4: twenty payments at once have gapless invoice and licence numbers", async () => {
    const shop = await makeShop();
    const cue = await makeCue(shop.libraryId);
    const orders = [];
    for (let index = 0; index < 20; index++) {
      const productionId = await makeProduction(shop.companyId);
      orders.push(await approved({ ...shop, productionId }, [{ familyId: cue.familyId, use: PROGRAMME }]));
    }
    const before = await lastOf("licence:2026");
    await Promise.all(
      orders.map(({ orderId, checkoutId }) =>
        completePayment(
          system("tests"),
          {
            orderId,
            checkoutId,
            paymentId: `pi_${orderId}`,
            chargeId: `ch_${orderId}`,
            grossMinor: 28_800n,
            currency: "GBP",
            feeMinor: 452n,
          },
          { operationId: `payment:${checkoutId}` },
        ),
      ),
    );
    const rows = await db().select().from(invoices).where(eq(invoices.libraryId, shop.libraryId));
    const serials = rows.map(({ number }) => Number(number.slice(-4))).sort((a, b) => a - b);
    expect(serials).toEqual(Array.from({ length: 20 }, (_, index) => index + 1));
    const licences = (await Promise.all(orders.map(({ orderId }) => licencesOf(orderId)))).flat();
    const numbers = licences.map((number) => Number(number?.split("-")[2])).sort((a, b) => a - b);
    expect(numbers).toEqual(Array.from({ length: 20 }, (_, index) => before + index + 1));
  }, 120_000);

  test("masters that are still being rendered: paid and invoiced at once, the records signed with their hashes later", async () => {
    const shop = await makeShop();
    const { familyId, head, bed } = await makeCue(shop.libraryId, { masters: false });
    const orderId = await paid(shop, till, [{ familyId, use: PROGRAMME }]);
    expect(await getOrder(shop.proposer, { orderId })).toMatchObject({
      state: "paid",
      papers: [{ kind: "invoice" }],
    });
    expect(await recordsOf(shop.productionId)).toHaveLength(0);
    await issueRecords(system("tests"), { orderId, round: 1 });
    expect(await orderRow(orderId)).toMatchObject({ state: "paid" });
    await makeMasters([head, bed]);
    await issueRecords(system("tests"), { orderId, round: 2 });
    const [number] = await licencesOf(orderId);
    const { record } = await getLicence(shop.proposer, { number: number ?? "" });
    expect(record.cue.versions.map(({ masterSha256 }) => masterSha256)).toEqual([
      "ab".repeat(32),
      "ab".repeat(32),
    ]);
  });
});

const lastOf = async (name: string) => {
  const [row] = await db().select().from(numberSeries).where(eq(numberSeries.name, name));
  return row?.last ?? 0;
};

async function sendAsked(orderId: string): Promise<void> {
  const { orderRefunds } = await import("@/db/schema/licensing");
  const rows = await db()
    .select()
    .from(orderRefunds)
    .where(and(eq(orderRefunds.orderId, orderId), eq(orderRefunds.state, "asked")));
  for (const { id } of rows) await sendRefund(id);
}

describe("after the sale", () => {
  test("a refund of one licence: credit note, journal, a dated end, and the other licence untouched", async () => {
    const shop = await makeShop();
    const [one, two] = [await makeCue(shop.libraryId), await makeCue(shop.libraryId)];
    const orderId = await paid(shop, till, [
      { familyId: one.familyId, use: PROGRAMME },
      { familyId: two.familyId, use: ONLINE },
    ]);
    const [, line] = (await getOrder(shop.owner, { orderId })).lines;
    const wish = {
      orderId,
      lineIds: [line?.id ?? ""],
      words: "Bought twice by mistake; refunded as goodwill.",
    };
    await expect(
      refundLines({ ...shop.owner, secondFactorAt: null } as typeof shop.owner, wish),
    ).rejects.toMatchObject({ code: "precondition" });
    await refundLines(shop.owner, wish);
    await expect(refundLines(shop.owner, wish)).rejects.toMatchObject({ code: "precondition" });
    await sendAsked(orderId);
    await deliver(({ type, text }) => type === "charge.refunded" && text.includes(orderId));
    const order = await getOrder(shop.owner, { orderId });
    expect(order.lines.map(({ status, isRefunded }) => [status?.kind, isRefunded])).toEqual([
      ["in force", false],
      ["refunded", true],
    ]);
    expect(order.papers).toMatchObject([
      { kind: "invoice", gross: "438.00" },
      { kind: "credit note", gross: "150.00" },
    ]);
    expect((await entriesOf(orderId)).map(({ code }) => code).sort()).toEqual(["capture", "refund"]);
  });

  test("LICENSING-8: a dispute whose closing is heard of before its opening and before the sale itself", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const { orderId, checkoutId } = await approved(shop, [{ familyId, use: PROGRAMME }]);
    await till.tell({ pay: checkoutId });
    const { payment } = await readCheckout(checkoutId);
    const opened = (await till.tell({ openDispute: { charge: payment?.chargeId } })) as { id: string };
    await till.tell({ closeDispute: { dispute: opened.id, outcome: "won" } });
    const about = ({ type, text }: { type: string; text: string }) =>
      isDone(checkoutId)({ type, text }) || (type.startsWith("charge.dispute.") && text.includes(opened.id));
    await deliver(about, (ids) => [...ids].reverse());
    await deliver(about, (ids) => [...ids, ...ids]);
    const [line] = (await getOrder(shop.proposer, { orderId })).lines;
    const page = await getLicence(shop.proposer, { number: line?.licenceNumber ?? "" });
    expect(page.history.map(({ kind }) => kind)).toEqual([
      "in force",
      "payment disputed",
      "dispute withdrawn",
    ]);
    expect(page.today.answer).toBe("in force");
    const codes = (await entriesOf(orderId)).map(({ code }) => code).sort();
    expect(codes).toEqual(["capture", "dispute", "dispute charge", "reversal"]);
  });

  test("a lost dispute ends the licence by a dated line", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const { orderId, checkoutId } = await approved(shop, [{ familyId, use: PROGRAMME }]);
    await till.tell({ pay: checkoutId });
    await deliver(isDone(checkoutId));
    const { payment } = await readCheckout(checkoutId);
    const opened = (await till.tell({ openDispute: { charge: payment?.chargeId } })) as { id: string };
    const dispute = ({ type, text }: { type: string; text: string }) =>
      type.startsWith("charge.dispute.") && text.includes(opened.id);
    await deliver(dispute);
    const [number] = await licencesOf(orderId);
    expect((await getLicence(shop.proposer, { number: number ?? "" })).today.sentence).toContain("disputed");
    await till.tell({ closeDispute: { dispute: opened.id, outcome: "lost" } });
    await deliver(dispute);
    const page = await getLicence(shop.proposer, { number: number ?? "" });
    expect(page.history.map(({ kind }) => kind)).toEqual([
      "in force",
      "payment disputed",
      "payment reversed",
    ]);
    const [line] = (await getOrder(shop.owner, { orderId })).lines;
    await expect(
      refundLines(shop.owner, { orderId, lineIds: [line?.id ?? ""], words: "Too late." }),
    ).rejects.toMatchObject({
      code: "precondition",
    });
  });

  test("a refund made at the processor itself is found and written down once", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const { orderId, checkoutId } = await approved(shop, [{ familyId, use: PROGRAMME }]);
    await till.tell({ pay: checkoutId });
    await deliver(isDone(checkoutId));
    const { refund } = await import("@/lib/payments");
    const { payment } = await readCheckout(checkoutId);
    await refund({
      paymentId: payment?.paymentId ?? "",
      orderId,
      reason: "requested_by_customer",
      idempotencyKey: `outside:${orderId}`,
    });
    const about = ({ type, text }: { type: string; text: string }) =>
      type === "charge.refunded" && text.includes(orderId);
    await deliver(about);
    await deliver(about);
    expect((await entriesOf(orderId)).map(({ code }) => code).sort()).toEqual(["capture", "refund"]);
    expect((await getOrder(shop.owner, { orderId })).lines.map(({ isRefunded }) => isRefunded)).toEqual([
      true,
    ]);
  });

  test("every order, licence and refund has its audit row", async () => {
    const verbs = [
      "licensing.placeOrder",
      "licensing.approveOrder",
      "licensing.completePayment",
      "licensing.completeRefund",
    ];
    const rows = await db()
      .select({ verb: auditLog.verb, times: count() })
      .from(auditLog)
      .where(and(like(auditLog.verb, "licensing.%"), inArray(auditLog.verb, verbs)))
      .groupBy(auditLog.verb);
    expect(rows.map(({ verb }) => verb).sort()).toEqual([...verbs].sort());
  });
});
