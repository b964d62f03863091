import { eq } from "drizzle-orm";
import { db } from "@/db/client";
import { orderLines, orderRefunds, orders } from "@/db/schema/licensing";
import { recordingsOfFamily } from "@/lib/catalogue";
import { system } from "@/lib/kernel/actor";
import { newId } from "@/lib/kernel/ids";
import { importLicence, setRateCard } from "@/lib/licensing";
import { TERMS_VERSION } from "@/lib/licensing/terms";
import { INVENTED_CARD } from "@/tests/licensing/invented-card";
import { makeCue, makeProduction, PROGRAMME } from "@/tests/licensing/shop";
import { COLUMNS, type Column, type Rows, type World } from "../columns";

const EVERYBODY = [...COLUMNS];
const SYSTEM: readonly Column[] = ["system"];
const BUYER: readonly Column[] = ["buyer"];
const PARTIES: readonly Column[] = ["buyer", "owner", "accountant", "marketplaceAccountant", "auditor"];
const READERS: readonly Column[] = [...PARTIES, "staff"];

const carded = new Set<string>();
async function cueOf({ libraryId }: World) {
  if (!carded.has(libraryId)) {
    carded.add(libraryId);
    await setRateCard(system("the matrix"), { libraryId, card: INVENTED_CARD });
  }
  return makeCue(libraryId);
}

/** An order of the world's company from the world's library, in a state. */
async function order(world: World, state: string) {
  const { familyId, head } = await cueOf(world);
  const orderId = newId("ord");
  const lineId = newId("lin");
  const { actors, companyId, libraryId } = world;
  const buyer = actors.buyer;
  if (buyer.kind !== "buyer") throw new Error("the buyer is a buyer");
  await db()
    .insert(orders)
    .values({
      id: orderId,
      number: Math.floor(Math.random() * 2e9),
      companyId,
      productionId: await makeProduction(companyId),
      libraryId,
      currency: "GBP",
      netMinor: 24_000n,
      taxMinor: 4_800n,
      grossMinor: 28_800n,
      taxWords: "VAT 20 %",
      state,
      stateWords: "Made by a test.",
      licensee: { name: "A company", endClient: null, address: "1 Row", countryCode: "GB", taxNumber: null },
      acceptance: null,
      placedBy: buyer.personId,
      placedAt: new Date(),
    });
  await db()
    .insert(orderLines)
    .values({
      id: lineId,
      orderId,
      number: 1,
      familyId,
      recordingIds: [head],
      use: {},
      price: {
        totalMinor: "24000",
        currency: "GBP",
        sentence: "150 × 1.6",
        factors: [],
        minimumApplied: false,
        cardVersion: "T 1",
        inputs: { ...PROGRAMME, episodes: 1, cutdowns: 0, tagChanges: 0 },
      },
      netMinor: 24_000n,
      taxMinor: 4_800n,
    });
  return { orderId, lineId, head };
}

const withOrder = (state: string) => async (world: World) => ({
  orderId: (await order(world, state)).orderId,
});

async function refundOf(world: World): Promise<string> {
  const { orderId } = await order(world, "refused");
  const id = newId("ref");
  await db().insert(orderRefunds).values({
    id,
    orderId,
    lineIds: [],
    amountMinor: 28_800n,
    currency: "GBP",
    words: "Made by a test.",
    state: "asked",
    paymentIntent: "pi_test",
    askedAt: new Date(),
  });
  return id;
}

let serial = 100_000;
async function importInput(world: World) {
  const { familyId } = await cueOf(world);
  serial += 1;
  return {
    libraryId: world.libraryId,
    number: `LR-2024-${serial}`,
    licensedOn: "2026-02-20",
    companyId: world.companyId,
    productionId: null,
    licensee: { name: "A company", endClient: null, address: null },
    production: { title: "A production", type: "advert", parts: "One" },
    familyId,
    use: PROGRAMME,
    net: "240.00",
    acceptedBy: null,
  };
}

async function licence(world: World) {
  return importLicence(system("the matrix"), await importInput(world));
}
const withNumber = async (world: World) => ({ number: (await licence(world)).number });
/** Each from an address of its own: the limit is not what is tried here. */
const withProof = async (world: World) => ({
  proof: (await licence(world)).proofCode,
  address: newId("adr"),
});

export const rows = {
  "licensing.setRateCard": {
    input: async (world) => ({ libraryId: world.libraryId, card: INVENTED_CARD }),
    may: ["owner", "system"],
  },
  // Each answers for the library of the actor, so another library's owner gets that library's.
  "licensing.getRateCard": { input: async () => ({}), may: ["owner", "otherOwner", "staff"] },
  "licensing.priceUse": {
    input: async (world) => ({ familyId: (await cueOf(world)).familyId, use: PROGRAMME }),
    may: EVERYBODY,
  },
  "licensing.getCardForCue": {
    input: async (world) => ({ familyId: (await cueOf(world)).familyId }),
    may: EVERYBODY,
  },
  "licensing.listFromPrices": { input: async () => ({}), may: EVERYBODY },
  "licensing.priceShortlist": {
    input: async (world) => ({ productionId: await makeProduction(world.companyId) }),
    may: BUYER,
  },
  "licensing.placeOrder": {
    input: async (world) => ({
      productionId: await makeProduction(world.companyId),
      lines: [{ familyId: (await cueOf(world)).familyId, use: PROGRAMME }],
    }),
    may: BUYER,
  },
  "licensing.approveOrder": {
    input: async (world) => ({
      ...(await withOrder("proposed")(world)),
      termsVersion: TERMS_VERSION,
      mayAccept: true,
    }),
    may: BUYER,
  },
  "licensing.withdrawOrder": { input: withOrder("proposed"), may: BUYER },
  "licensing.readPayable": { input: withOrder("awaiting payment"), may: BUYER },
  "licensing.recordCheckout": {
    input: async (world) => ({
      ...(await withOrder("awaiting payment")(world)),
      attempt: 1,
      checkoutId: null,
    }),
    may: BUYER,
  },
  "licensing.completePayment": {
    input: async (world) => ({
      ...(await withOrder("withdrawn")(world)),
      checkoutId: newId("cs"),
      paymentId: newId("pi"),
      chargeId: newId("ch"),
      grossMinor: 28_800n,
      currency: "GBP",
      feeMinor: 452n,
    }),
    may: SYSTEM,
  },
  "licensing.issueRecords": {
    input: async (world) => ({ ...(await withOrder("refused")(world)), round: 1 }),
    may: SYSTEM,
  },
  "licensing.readOrderPayment": { input: withOrder("paid"), may: SYSTEM },
  "licensing.noteUnpaid": {
    input: async (world) => ({ ...(await withOrder("awaiting payment")(world)), words: "Declined." }),
    may: SYSTEM,
  },
  "licensing.refundLines": {
    input: async (world) => {
      const { orderId, lineId } = await order(world, "licensed");
      await db().update(orders).set({ paymentIntent: "pi_test" }).where(eq(orders.id, orderId));
      return { orderId, lineIds: [lineId], words: "A goodwill refund." };
    },
    may: ["owner", "marketplaceAccountant", "system"],
  },
  "licensing.readRefund": { input: async (world) => ({ refundId: await refundOf(world) }), may: SYSTEM },
  "licensing.completeRefund": {
    input: async (world) => ({ refundId: await refundOf(world), processorRefund: null }),
    may: SYSTEM,
  },
  "licensing.recordOutsideRefund": {
    input: async (world) => ({
      ...(await withOrder("licensed")(world)),
      paymentId: "pi_other",
      refundedMinor: 0n,
    }),
    may: SYSTEM,
  },
  "licensing.recordDispute": {
    input: async (world) => ({
      ...(await withOrder("paid")(world)),
      disputeId: "du_test",
      amountMinor: 28_800n,
      feeMinor: 1_500n,
    }),
    may: SYSTEM,
    orAnswers: ["precondition"],
  },
  "licensing.closeDispute": {
    input: async (world) => ({ ...(await withOrder("paid")(world)), disputeId: "du_test", won: true }),
    may: SYSTEM,
    orAnswers: ["precondition"],
  },
  "licensing.getOrder": { input: withOrder("proposed"), may: PARTIES },
  "licensing.getInvoices": { input: withOrder("proposed"), may: PARTIES },
  // Both answer for the buyer's own company.
  "licensing.listOpenOrders": { input: async () => ({}), may: ["buyer", "otherBuyer"] },
  "licensing.listLicences": { input: async () => ({}), may: ["buyer", "otherBuyer"] },
  "licensing.getLicence": { input: withNumber, may: READERS },
  "licensing.getLicenceFile": { input: withNumber, may: READERS },
  "licensing.setWithheld": {
    input: async (world) => ({ ...(await withNumber(world)), withheld: [] }),
    may: BUYER,
  },
  "licensing.verifyByProof": { input: withProof, may: EVERYBODY },
  "licensing.getPublicFile": { input: withProof, may: EVERYBODY },
  "licensing.verifyFile": { input: async () => ({ text: "{}", address: newId("adr") }), may: EVERYBODY },
  "licensing.listKeys": { input: async () => ({}), may: EVERYBODY },
  "licensing.listRoots": { input: async () => ({}), may: EVERYBODY },
  "licensing.publishDays": { input: async () => ({ before: "2020-01-01" }), may: SYSTEM },
  "licensing.openSeries": { input: async () => ({ name: "licence:2024", last: 1 }), may: SYSTEM },
  "licensing.importLicence": { input: importInput, may: ["owner", "system"] },
  "licensing.downloadMaster": {
    input: async (world) => {
      const input = await importInput(world);
      const { number } = await importLicence(system("the matrix"), input);
      const [recording] = await recordingsOfFamily(db(), input.familyId);
      return { number, recordingId: recording?.id ?? "" };
    },
    may: BUYER,
  },
  // The link is what admits; a link that is not ours opens nothing for anybody.
  "licensing.readMaster": { input: async () => ({ token: "not.ours" }), may: [] },
} satisfies Rows;
