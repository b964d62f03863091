import Stripe from "stripe";
import { afterAll, beforeAll, expect, test } from "vitest";
import { startPayments } from "@/fixtures/services/payments/payments";
import type { StandIn } from "@/fixtures/services/server";
import { money } from "@/lib/kernel/money";
import {
  answerDispute,
  constructEvent,
  createCheckout,
  createPayee,
  expireCheckout,
  listEventsSince,
  listMovements,
  onboardingLink,
  openPayments,
  PaymentError,
  type PaymentsClient,
  paymentKeys,
  readBalance,
  readCheckout,
  readDispute,
  readPayee,
  readPayment,
  refund,
  transfer,
} from "@/lib/payments";
import { control, Receiver, STRIPE_SECRET_KEY, STRIPE_WEBHOOK_SECRET, temporaryDir } from "./support";

const site = new Receiver();
const dir = temporaryDir();
let service: StandIn;
let client: PaymentsClient;
let orders = 0;

beforeAll(async () => {
  await site.start();
  service = await startPayments({
    port: 0,
    dataDir: dir.path,
    secretKey: STRIPE_SECRET_KEY,
    webhookSecret: STRIPE_WEBHOOK_SECRET,
    webhookUrl: `${site.url}/api/webhooks/payments`,
    firstRetryMs: 10,
  });
  client = openPayments({ STRIPE_SECRET_KEY, STRIPE_WEBHOOK_SECRET, STRIPE_API_BASE: service.url });
});

afterAll(async () => {
  await service.close();
  await site.stop();
  dir.remove();
});

const gbp = (minor: bigint) => money(minor, "GBP");

function nextOrder(): string {
  orders += 1;
  return `ord_contract_${orders}`;
}

async function openCheckout(orderId: string, amounts: readonly bigint[] = [12_000n]) {
  return createCheckout(
    {
      orderId,
      lines: amounts.map((minor, index) => ({
        name: `Line ${index + 1} & <b>its</b> tax`,
        amount: gbp(minor),
      })),
      customerEmail: "noor@thistlemoth.example",
      successUrl: `${site.url}/orders/${orderId}?checkout={CHECKOUT_SESSION_ID}`,
      cancelUrl: `${site.url}/orders/${orderId}`,
      idempotencyKey: paymentKeys.checkout(orderId, 1),
    },
    client,
  );
}

async function paidOrder(amounts?: readonly bigint[]) {
  const orderId = nextOrder();
  const { checkoutId } = await openCheckout(orderId, amounts);
  await control(service.url, { pay: checkoutId });
  const { payment } = await readCheckout(checkoutId, client);
  if (!payment) throw new Error("the payment is missing");
  return { orderId, checkoutId, payment };
}

function eventOf(type: string, id: string) {
  return site.until((all) => all.find(({ body }) => body.includes(`"type":"${type}"`) && body.includes(id)));
}

async function reasonOf(work: Promise<unknown>): Promise<string> {
  const error = await work.then(
    () => undefined,
    (caught: unknown) => caught,
  );
  if (!(error instanceof PaymentError)) throw new Error(`expected a PaymentError, got ${String(error)}`);
  return error.reason;
}

test("a paid checkout gives gross, fee and net: 438.00 less 1.5 % and 0.20 is 431.23", async () => {
  const { orderId, checkoutId, payment } = await paidOrder([24_000n, 12_500n, 7_300n]);
  const checkout = await readCheckout(checkoutId, client);
  expect(checkout).toMatchObject({ orderId, state: "paid", total: gbp(43_800n), url: null });
  expect(payment).toMatchObject({
    gross: gbp(43_800n),
    fee: gbp(677n),
    net: gbp(43_123n),
    isDisputed: false,
  });
  expect(await readPayment(payment.paymentId, client)).toEqual(payment);
});

test("the buyer pays on the far end's page, and what it shows is escaped", async () => {
  const { checkoutId, url } = await openCheckout(nextOrder());
  const page = await (await fetch(url)).text();
  expect(page).toContain("Line 1 &amp; &lt;b&gt;its&lt;/b&gt; tax");
  expect(page).toContain("£120.00");
  const answer = await fetch(url, {
    method: "POST",
    body: new URLSearchParams({ do: "pay" }),
    redirect: "manual",
  });
  expect(answer.status).toBe(303);
  expect(answer.headers.get("location")).toContain(`checkout=${checkoutId}`);
  expect((await readCheckout(checkoutId, client)).state).toBe("paid");
});

test("a page of another origin cannot press the far end's buttons", async () => {
  const { checkoutId, url } = await openCheckout(nextOrder());
  const answer = await fetch(url, {
    method: "POST",
    headers: { origin: "https://elsewhere.example" },
    body: new URLSearchParams({ do: "pay" }),
  });
  expect(answer.status).toBe(403);
  expect((await readCheckout(checkoutId, client)).state).toBe("open");
});

test("a declined card leaves the checkout open, and it can be paid after that", async () => {
  const { checkoutId } = await openCheckout(nextOrder());
  await control(service.url, { decline: checkoutId });
  const declined = await readCheckout(checkoutId, client);
  expect(declined).toMatchObject({ state: "open", payment: null, lastDecline: "Your card was declined." });
  await control(service.url, { pay: checkoutId });
  expect(await readCheckout(checkoutId, client)).toMatchObject({ state: "paid", lastDecline: null });
});

test("an expired checkout cannot be paid, and a paid one cannot be expired", async () => {
  const { checkoutId } = await openCheckout(nextOrder());
  expect(await expireCheckout(checkoutId, paymentKeys.expiry(checkoutId), client)).toBe(true);
  await control(service.url, { pay: checkoutId });
  expect(await readCheckout(checkoutId, client)).toMatchObject({ state: "expired", payment: null });
  const paid = await paidOrder();
  expect(await expireCheckout(paid.checkoutId, paymentKeys.expiry(paid.checkoutId), client)).toBe(false);
});

test("PAYMENTS-1: a signed event is accepted; an altered, an old and an unsigned one are refused", async () => {
  const { orderId, checkoutId } = await paidOrder();
  const { body, headers } = await eventOf("checkout.session.completed", checkoutId);
  const signature = String(headers["stripe-signature"]);
  expect(constructEvent(body, signature, client).subject).toEqual({
    kind: "checkout_completed",
    checkoutId,
    orderId,
  });
  const refusedWith = (text: string, header: string) =>
    reasonOf(Promise.resolve().then(() => constructEvent(text, header, client)));
  expect(await refusedWith(body.replace('"amount_total":12000', '"amount_total":1'), signature)).toBe(
    "bad_signature",
  );
  const stripe = new Stripe(STRIPE_SECRET_KEY);
  const sign = (timestamp: number, secret: string) =>
    stripe.webhooks.generateTestHeaderString({ payload: body, secret, timestamp });
  const nowS = Math.floor(Date.now() / 1000);
  // The SDK's documented tolerance is 300 seconds.
  expect(await refusedWith(body, sign(nowS - 301, STRIPE_WEBHOOK_SECRET))).toBe("bad_signature");
  expect(await refusedWith(body, sign(nowS, "whsec_other"))).toBe("bad_signature");
  expect(await refusedWith(body, "")).toBe("bad_signature");
});

test("PAYMENTS-2: the same key refunds once, and the same key with another amount is refused", async () => {
  const { orderId, payment } = await paidOrder();
  const request = {
    paymentId: payment.paymentId,
    orderId,
    amount: gbp(5_000n),
    reason: "requested_by_customer",
    idempotencyKey: paymentKeys.refund(orderId, "crn_1"),
  } as const;
  const first = await refund(request, client);
  expect(await refund(request, client)).toEqual(first);
  expect(await reasonOf(refund({ ...request, amount: gbp(6_000n) }, client))).toBe("key_reused");
  expect((await readPayment(payment.paymentId, client))?.refunded).toEqual(gbp(5_000n));
});

test("PAYMENTS-2: a refund whose answer is lost is repeated with its key and moves money once", async () => {
  const { orderId, payment } = await paidOrder();
  await control(service.url, { rules: [{ match: "POST /v1/refunds", act: "lose" }] });
  await refund(
    {
      paymentId: payment.paymentId,
      orderId,
      reason: "duplicate",
      idempotencyKey: paymentKeys.refund(orderId, orderId),
    },
    client,
  );
  const now = await readPayment(payment.paymentId, client);
  expect(now?.refunded).toEqual(gbp(12_000n));
  expect(
    await reasonOf(
      refund(
        {
          paymentId: payment.paymentId,
          orderId,
          reason: "duplicate",
          idempotencyKey: paymentKeys.refund(orderId, "again"),
        },
        client,
      ),
    ),
  ).toBe("already_refunded");
});

test("PAYMENTS-2: two checkouts of one order under one key are one checkout", async () => {
  const orderId = nextOrder();
  const [first, second] = await Promise.all([openCheckout(orderId), openCheckout(orderId)]);
  expect(second).toEqual(first);
});

test("PAYMENTS-3: an event that is answered with an error comes again until it is taken", async () => {
  const { checkoutId } = await openCheckout(nextOrder());
  let failures = 2;
  site.answerWith = ({ body }) =>
    body.includes("checkout.session.completed") && body.includes(checkoutId) && failures-- > 0 ? 500 : 200;
  await control(service.url, { pay: checkoutId });
  const bodies = await site.until((all) => {
    const found = all.filter(
      ({ body }) => body.includes("checkout.session.completed") && body.includes(checkoutId),
    );
    return found.length === 3 ? found.map(({ body }) => body) : undefined;
  });
  site.answerWith = () => 200;
  expect(new Set(bodies).size).toBe(1);
});

test("PAYMENTS-3: events can come twice and in the wrong order, and each names what to read", async () => {
  const { checkoutId } = await openCheckout(nextOrder());
  await control(service.url, {
    rules: [
      { match: "outgoing payment_intent.succeeded", act: "hold" },
      { match: "outgoing charge.succeeded", act: "hold" },
      { match: "outgoing checkout.session.completed", act: "repeat", count: 1 },
    ],
  });
  await control(service.url, { pay: checkoutId });
  const { payment } = await readCheckout(checkoutId, client);
  await site.until((all) =>
    all.filter(({ body }) => body.includes("checkout.session.completed") && body.includes(checkoutId))
      .length === 2
      ? true
      : undefined,
  );
  await control(service.url, { release: "reversed" });
  await eventOf("payment_intent.succeeded", payment?.paymentId ?? "none");
  const types = site.received
    .filter(({ body }) => body.includes(payment?.paymentId ?? "none"))
    .map(({ body }) => (JSON.parse(body) as { type: string }).type);
  expect(types).toEqual([
    "checkout.session.completed",
    "checkout.session.completed",
    "charge.succeeded",
    "payment_intent.succeeded",
  ]);
});

test("PAYMENTS-4: an amount that is not positive is refused before anything is sent", async () => {
  await expect(openCheckout(nextOrder(), [0n])).rejects.toThrow(RangeError);
});

test("a dispute takes gross and a charge of 15.00; won gives the gross back, lost keeps it", async () => {
  for (const outcome of ["won", "lost"] as const) {
    const { payment, orderId } = await paidOrder();
    const opened = (await control(service.url, {
      openDispute: { charge: payment.chargeId, reason: "fraudulent" },
    })) as { id: string };
    const event = await eventOf("charge.dispute.created", opened.id);
    const { subject } = constructEvent(event.body, String(event.headers["stripe-signature"]), client);
    expect(subject).toEqual({ kind: "dispute_opened", disputeId: opened.id, paymentId: payment.paymentId });
    expect(await readDispute(opened.id, client)).toMatchObject({
      state: "open",
      amount: gbp(12_000n),
      fee: gbp(1_500n),
    });
    expect((await readPayment(payment.paymentId, client))?.isDisputed).toBe(true);
    const retry = refund(
      {
        paymentId: payment.paymentId,
        orderId,
        reason: "duplicate",
        idempotencyKey: paymentKeys.refund(orderId, "no"),
      },
      client,
    );
    expect(await reasonOf(retry)).toBe("disputed");
    const answer = {
      disputeId: opened.id,
      customerEmail: "noor@thistlemoth.example",
      text: "Licence record attached.",
    };
    expect(
      (await answerDispute({ ...answer, idempotencyKey: paymentKeys.evidence(opened.id, 1) }, client)).state,
    ).toBe("answered");
    await control(service.url, { closeDispute: { dispute: opened.id, outcome } });
    expect((await readDispute(opened.id, client)).state).toBe(outcome);
    const movements = await listMovements(
      { since: new Date(Date.now() - 60_000), until: new Date(Date.now() + 60_000) },
      client,
    );
    const net = movements
      .filter(({ sourceId }) => sourceId === opened.id)
      .reduce((sum, movement) => sum + movement.net.minor, 0n);
    expect(net).toBe(outcome === "won" ? -1_500n : -13_500n);
  }
});

test("a payee is paid after the form is filled in, and only from what is available", async () => {
  const { accountId } = await createPayee(
    {
      payeeId: "per_ailsa",
      country: "GB",
      email: "ailsa@saltmarrow.example",
      idempotencyKey: paymentKeys.payee("per_ailsa"),
    },
    client,
  );
  expect(await readPayee(accountId, client)).toMatchObject({ isReady: false, bankAccount: null });
  const pay = (payoutId: string, amount: bigint) =>
    transfer(
      { payoutId, accountId, amount: gbp(amount), idempotencyKey: paymentKeys.payout(payoutId) },
      client,
    );
  expect(await reasonOf(pay("po_1", 7_720n))).toBe("payee_not_ready");
  const { url } = await onboardingLink(
    { accountId, returnUrl: `${site.url}/payouts`, refreshUrl: `${site.url}/payouts/again` },
    client,
  );
  const submitted = await fetch(url, {
    method: "POST",
    body: new URLSearchParams({ last4: "4321" }),
    redirect: "manual",
  });
  expect(submitted.headers.get("location")).toBe(`${site.url}/payouts`);
  expect(await readPayee(accountId, client)).toMatchObject({
    isReady: true,
    bankAccount: { last4: "4321", currency: "GBP" },
  });
  const reused = await fetch(url, { redirect: "manual" });
  expect(reused.headers.get("location")).toBe(`${site.url}/payouts/again`);
  const bank = await eventOf("account.external_account.created", accountId);
  expect(constructEvent(bank.body, String(bank.headers["stripe-signature"]), client).subject).toEqual({
    kind: "bank_changed",
    accountId,
  });

  await paidOrder([50_000n]);
  const before = await readBalance(client);
  const availableBefore = before.available.find(({ currency }) => currency === "GBP")?.minor ?? 0n;
  expect(before.pending.find(({ currency }) => currency === "GBP")?.minor).toBeGreaterThan(0n);
  expect(await reasonOf(pay("po_2", 7_720n))).toBe("insufficient_balance");
  expect(availableBefore).toBeLessThan(7_720n);
  await control(service.url, { settle: true });
  const settled =
    (await readBalance(client)).available.find(({ currency }) => currency === "GBP")?.minor ?? 0n;
  const paid = await pay("po_3", 7_720n);
  expect(await pay("po_3", 7_720n)).toEqual(paid);
  expect((await readBalance(client)).available).toContainEqual(gbp(settled - 7_720n));
});

test("an unknown object and a wrong key are told apart from a far end that is away", async () => {
  expect(await reasonOf(readCheckout("cs_test_none", client))).toBe("not_found");
  const stranger = openPayments({
    STRIPE_SECRET_KEY: "sk_test_other",
    STRIPE_WEBHOOK_SECRET,
    STRIPE_API_BASE: service.url,
  });
  expect(await reasonOf(readBalance(stranger))).toBe("refused");
  await control(service.url, { rules: [{ match: "GET /v1/balance", act: "drop", times: 3 }] });
  expect(await reasonOf(readBalance(client))).toBe("unreachable");
});

test("a site that was away can read every event since, oldest first, page by page", async () => {
  const events = await listEventsSince(new Date(Date.now() - 600_000), client);
  const received = new Set(site.received.map(({ body }) => (JSON.parse(body) as { id: string }).id));
  for (const id of received) expect(events.map(({ eventId }) => eventId)).toContain(id);
  expect(events.map(({ createdAt }) => createdAt.getTime())).toEqual(
    events.map(({ createdAt }) => createdAt.getTime()).sort((a, b) => a - b),
  );
});
