import "@/tests/support/database";
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, expect, test, vi } from "vitest";
import { db } from "@/db/client";
import { startPayments } from "@/fixtures/services/payments/payments";
import type { StandIn } from "@/fixtures/services/server";
import { releaseLapsedLeases, runWorker } from "@/lib/jobs";
import { ledgerHandlers } from "@/lib/ledger/jobs";
import { approveOrder, openCheckout, placeOrder } from "@/lib/licensing";
import { licensingHandlers } from "@/lib/licensing/jobs";
import { TERMS_VERSION } from "@/lib/licensing/terms";
import { listMovements } from "@/lib/payments";
import { control } from "@/tests/contract/support";
import { makeCue, makeProduction, makeShop, ONLINE, PROGRAMME, type Shop } from "@/tests/licensing/shop";
import { expectLedgerSound } from "@/tests/support/expect-ledger-sound";
import { type OwnDatabase, startOwnDatabase } from "./own-database";
import { randomInstants, sleep } from "./random-instants";
import { again, expectNumbersWithoutGap, expectSoldOnce, stateOf } from "./sales";
import { startWebhookSite } from "./webhook-site";
import { lapseLeases } from "./workers";

// Next replaces this marker when it builds; outside a build there is no such module.
vi.mock("server-only", () => ({}));

/*
 * From the order to the licence record, through the buyer's verbs, the payment service's page, its signed webhook, the
 * site's route handler and the worker. The database server is killed at a random instant of it and started again. The buyer
 * clicks again where the page says so, with the same operation id as the form sends; the service sends its event again.
 */
const KILLS = 20;
/** Longer than a transaction is repeated, so that failures also reach the buyer, the service and the job. */
const AWAY_MS = 2500;
const dir = mkdtempSync(join(tmpdir(), "sedgewren-faults-"));
const stop = new AbortController();

let database: OwnDatabase;
let site: Awaited<ReturnType<typeof startWebhookSite>>;
let service: StandIn;
let working: Promise<void>;
let shop: Shop;
let families: string[];

beforeAll(async () => {
  database = await startOwnDatabase();
  const { POST } = await import("@/app/api/webhooks/payments/route");
  site = await startWebhookSite(POST);
  service = await startPayments({
    port: 0,
    dataDir: dir,
    secretKey: process.env.STRIPE_SECRET_KEY ?? "",
    webhookSecret: process.env.STRIPE_WEBHOOK_SECRET ?? "",
    webhookUrl: site.url,
    firstRetryMs: 200,
  });
  process.env.STRIPE_API_BASE = service.url;
  const [row] = (await db().execute("select @@port as port"))[0] as unknown as { port: number }[];
  expect(row?.port).toBe(database.port);
  shop = await makeShop();
  families = [(await makeCue(shop.libraryId)).familyId, (await makeCue(shop.libraryId)).familyId];
  const handlers = { ...licensingHandlers, ...ledgerHandlers };
  working = runWorker({ handlers, signal: stop.signal, idleMs: 50 });
});
afterAll(async () => {
  stop.abort();
  await working;
  await service?.close();
  await site?.close();
  await database?.close();
  rmSync(dir, { recursive: true, force: true });
});

/** One sale of two lines, every step repeated with its own operation id until it is answered. */
async function buy(round: number): Promise<string> {
  const productionId = await again(() => makeProduction(shop.companyId));
  const lines = families.map((familyId, index) => ({ familyId, use: index === 0 ? PROGRAMME : ONLINE }));
  const operation = (name: string) => ({ operationId: `${name}:${round}` });
  const { orderId } = await again(() =>
    placeOrder(shop.proposer, { productionId, lines }, operation("place")),
  );
  const terms = { orderId, termsVersion: TERMS_VERSION, mayAccept: true } as const;
  await again(() => approveOrder(shop.approver, terms, operation("approve")));
  const opened = await again(() => openCheckout(shop.approver, { orderId }));
  if (opened.state !== "open") throw new Error("the checkout is not open");
  await control(service.url, { pay: opened.url.split("/").at(-1) });
  for (let waitedMs = 0; (await again(() => stateOf(orderId))) !== "licensed"; waitedMs += 100) {
    await sleep(100);
    // A job that ended while there was no database to write that into waits for its lease; its minute passes at once. What
    // still runs then runs twice, as with a worker that was asleep.
    if (waitedMs % 1000 === 900) await again(() => lapseLeases().then(releaseLapsedLeases));
  }
  return orderId;
}

test(`the database killed at ${KILLS} random instants between order and record: each is sold once, and the journal is sound`, {
  timeout: 600_000,
}, async () => {
  const sold = [await buy(0)];
  const startedMs = performance.now();
  sold.push(await buy(1));
  const roundMs = performance.now() - startedMs;
  const instants = randomInstants("database killed");
  for (let round = 2; round < KILLS + 2; round++) {
    const killed = sleep(instants.nextMs(roundMs)).then(() =>
      database.killAndRestart(instants.nextMs(AWAY_MS)),
    );
    const [orderId] = await Promise.all([buy(round), killed]);
    sold.push(orderId);
  }
  const refused = site.answers.filter((status) => status === 503).length;
  process.stdout.write(
    `database killed: a sale lasts ${Math.round(roundMs)} ms undisturbed; ${refused} events were refused and sent again\n`,
  );
  for (const orderId of sold) await expectSoldOnce(orderId);
  await expectNumbersWithoutGap({ invoices: sold.length, licences: 2 * sold.length });
  const { charges } = await booked();
  expect(charges).toBe(sold.length);
  await expectLedgerSound();
});

/** The payment service's own book. */
async function booked(): Promise<{ charges: number }> {
  const movements = await listMovements({
    since: new Date(0),
    until: new Date(Date.now() + 400 * 86_400_000),
  });
  return { charges: movements.filter((one) => one.kind === "payment").length };
}
