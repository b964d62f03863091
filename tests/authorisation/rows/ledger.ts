import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { payees, payoutRuns, payouts } from "@/db/schema/ledger";
import { system } from "@/lib/kernel/actor";
import { newId } from "@/lib/kernel/ids";
import { postCapture } from "@/lib/ledger";
import { makeMembership, makePerson } from "@/tests/support/make";
import type { Column, Rows, World } from "../columns";

const SYSTEM: readonly Column[] = ["system"];
/** Who looks after a payee: each its own. */
const PAYEES: readonly Column[] = [
  "composer",
  "otherComposer",
  "owner",
  "otherOwner",
  "accountant",
  "otherAccountant",
];
const LONG_AGO = new Date("2026-01-05T09:00:00Z");

async function writerOf(world: World): Promise<string> {
  const { id } = await makePerson();
  await makeMembership({ personId: id, role: "composer", libraryId: world.libraryId });
  return id;
}

async function capturedOrder(world: World): Promise<string> {
  const orderId = newId("ord");
  const personId = await writerOf(world);
  await db().transaction((tx) =>
    postCapture(tx, {
      orderId,
      libraryId: world.libraryId,
      currency: "GBP",
      eventAt: LONG_AGO,
      taxCountry: "GB",
      composerPoolBps: 5000,
      processorFeeMinor: 200n,
      chargeId: newId("ch"),
      facts: { orderNumber: "O-1", buyer: "A buyer", productionTitle: "A film", libraryName: "A library" },
      lines: [
        {
          orderLineId: newId("lin"),
          licenceNumber: null,
          familyId: newId("fam"),
          productionId: null,
          netMinor: 10_000n,
          taxMinor: 2000n,
          writers: [{ personId, shareBps: 10_000, position: 0 }],
          cueTitle: "A cue",
          scopeWords: "a use",
        },
      ],
      now: LONG_AGO,
      actor: system("the matrix"),
    }),
  );
  return orderId;
}

async function payeeOf(
  kind: "library" | "person",
  holderId: string,
): Promise<{ id: string; account: string }> {
  const [there] = await db().select().from(payees).where(eq(payees.holderId, holderId));
  const account = there?.processorAccount ?? newId("acct");
  if (there) {
    await db().update(payees).set({ processorAccount: account }).where(eq(payees.id, there.id));
    return { id: there.id, account };
  }
  const id = newId("pay");
  await db().insert(payees).values({
    id,
    kind,
    holderId,
    processorAccount: account,
    legalName: "A payee",
    countryCode: "GB",
    state: "ready",
    createdAt: LONG_AGO,
  });
  return { id, account };
}

/** The payee of whoever asks, so that having none is never the reason of a refusal. */
async function ownPayee(world: World, column: Column): Promise<Record<string, never>> {
  const actor = world.actors[column];
  if (actor.kind === "composer") await payeeOf("person", actor.personId);
  else if ("libraryId" in actor && actor.libraryId) await payeeOf("library", actor.libraryId);
  return {};
}

async function payoutIn(
  world: World,
  run: "prepared" | "released" | "confirmed",
  state: "prepared" | "sending" = "prepared",
): Promise<{ runId: string; payoutId: string }> {
  const [runId, payoutId] = [newId("run"), newId("po")];
  const [first, second] = [(await makePerson()).id, (await makePerson()).id];
  const composer = world.actors.composer;
  const holderId = composer.kind === "composer" ? composer.personId : "";
  const payee = await payeeOf("person", holderId);
  const { libraryId } = world;
  await db()
    .insert(payoutRuns)
    .values({
      id: runId,
      libraryId,
      currency: "GBP",
      state: run,
      preparedBy: first,
      preparedAt: LONG_AGO,
      ...(run === "prepared" ? {} : { releasedBy: first, releasedAt: LONG_AGO }),
      ...(run === "confirmed" ? { confirmedBy: second, confirmedAt: LONG_AGO } : {}),
    });
  await db().insert(payouts).values({
    id: payoutId,
    runId,
    libraryId,
    kind: "person",
    holderId,
    payeeId: payee.id,
    amountMinor: 2500n,
    currency: "GBP",
    state,
    reason: "made by a test",
  });
  return { runId, payoutId };
}

export const rows = {
  "ledger.settlePayments": { input: async () => ({ movements: [] }), may: SYSTEM },
  "ledger.listUnsettled": { input: async () => ({ movementIds: [newId("txn")] }), may: SYSTEM },
  "ledger.listDueHolds": { input: async () => ({}), may: SYSTEM },
  "ledger.releaseHolds": {
    input: async (world) => ({ orderId: await capturedOrder(world) }),
    may: SYSTEM,
  },
  "ledger.recordAdvance": {
    input: async (world) => ({
      libraryId: world.libraryId,
      personId: await writerOf(world),
      amountMinor: 4500n,
      currency: "GBP",
    }),
    may: ["owner", "system"],
  },
  "ledger.recordPaymentEvent": {
    input: async () => ({ eventId: newId("evt"), type: "charge.refunded", subject: {} }),
    may: SYSTEM,
  },
  "ledger.readPaymentEvent": { input: async () => ({ eventId: newId("evt") }), may: SYSTEM },
  "ledger.startPayee": {
    input: async (world, column) => {
      const actor = world.actors[column];
      const holderId =
        actor.kind === "composer" ? actor.personId : "libraryId" in actor ? actor.libraryId : null;
      if (holderId)
        await db().update(payees).set({ processorAccount: null }).where(eq(payees.holderId, holderId));
      return { legalName: "A payee", countryCode: "GB" };
    },
    may: PAYEES,
  },
  "ledger.getOwnPayee": { input: ownPayee, may: PAYEES },
  "ledger.getOwnProcessorAccount": { input: ownPayee, may: PAYEES },
  "ledger.readPayeeToOpen": {
    input: async (world) => ({ payeeId: (await payeeOf("library", world.libraryId)).id }),
    may: SYSTEM,
  },
  "ledger.recordPayeeAccount": {
    input: async (world) => ({
      payeeId: (await payeeOf("library", world.libraryId)).id,
      accountId: newId("acct"),
    }),
    may: SYSTEM,
  },
  "ledger.recordPayeeReady": {
    input: async (world) => ({
      accountId: (await payeeOf("library", world.libraryId)).account,
      isReady: true,
      bank: null,
    }),
    may: SYSTEM,
  },
  "ledger.preparePayoutRun": {
    input: async (world) => ({ libraryId: world.libraryId, currency: "EUR" }),
    may: ["accountant"],
    orAnswers: ["precondition"],
  },
  "ledger.releasePayoutRun": {
    input: async (world) => ({ runId: (await payoutIn(world, "prepared")).runId }),
    may: ["accountant"],
  },
  "ledger.confirmPayoutRun": {
    input: async (world) => ({ runId: (await payoutIn(world, "released")).runId }),
    may: ["marketplaceAccountant"],
  },
  "ledger.beginPayout": {
    input: async (world) => ({ payoutId: (await payoutIn(world, "confirmed")).payoutId }),
    may: SYSTEM,
  },
  "ledger.recordPayoutSent": {
    input: async (world) => ({
      payoutId: (await payoutIn(world, "confirmed", "sending")).payoutId,
      transferId: newId("tr"),
    }),
    may: SYSTEM,
  },
  "ledger.recordPayoutFailed": {
    input: async (world) => ({
      payoutId: (await payoutIn(world, "confirmed", "sending")).payoutId,
      reason: "Refused by the payment service.",
    }),
    may: SYSTEM,
  },
  "ledger.getSales": {
    input: async () => ({}),
    may: ["owner", "otherOwner", "accountant", "otherAccountant", "auditor"],
  },
  "ledger.getPayouts": {
    input: async () => ({}),
    may: [
      "owner",
      "otherOwner",
      "staff",
      "accountant",
      "otherAccountant",
      "marketplaceAccountant",
      "auditor",
    ],
  },
  "ledger.getPayout": {
    input: async (world) => ({ payoutId: (await payoutIn(world, "prepared")).payoutId }),
    may: ["composer", "owner", "staff", "accountant", "marketplaceAccountant", "auditor"],
  },
  "ledger.getStatement": {
    input: async () => ({ period: "2026-03" }),
    may: [...PAYEES, "auditor"],
  },
  "ledger.listStatements": { input: async () => ({}), may: [...PAYEES, "auditor"] },
  "ledger.getTrialBalance": {
    input: async () => ({}),
    may: ["accountant", "otherAccountant", "marketplaceAccountant", "auditor"],
  },
  "ledger.getJournal": {
    input: async () => ({ period: "2026-03" }),
    may: ["accountant", "otherAccountant", "marketplaceAccountant", "auditor"],
  },
  "ledger.checkLedger": { input: async () => ({}), may: ["marketplaceAccountant", "system"] },
} satisfies Rows;
