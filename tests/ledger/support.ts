import { eq } from "drizzle-orm";
import { z } from "zod";
import { db } from "@/db/client";
import { ledgerAccounts, ledgerEntries, ledgerTransfers, payees, payouts } from "@/db/schema/ledger";
import { type Actor, system } from "@/lib/kernel/actor";
import { withBusinessClock } from "@/lib/kernel/clock";
import { newId } from "@/lib/kernel/ids";
import { command, open } from "@/lib/kernel/verb";
import {
  beginPayout,
  type Capture,
  confirmPayoutRun,
  type DisputeOfPayment,
  type EntryToPost,
  postCapture,
  postDispute,
  postDisputeWon,
  postEntry,
  postRefund,
  preparePayoutRun,
  type RefundOfLines,
  recordAdvance,
  recordPayoutSent,
  releaseHolds,
  releasePayoutRun,
  settlePayments,
  type WonDispute,
} from "@/lib/ledger";
import { type AccountRef, type Leg, netByAccount } from "@/lib/ledger/legs";
import type { AccountKind } from "@/lib/ledger/states";
import { makeLibrary, makeMembership, makePerson } from "@/tests/support/make";
import { minor, show } from "./invented-sale";

type Given<T> = Omit<T, "now" | "actor">;
const anything = <T>() => z.custom<T>(() => true);

/** The steps that another room takes inside its own transaction, each in one of the tests'. */
export const steps = {
  entry: command({
    name: "test.postEntry",
    who: ["system"],
    input: anything<Given<EntryToPost>>(),
    authorise: open("tests"),
    run: ({ tx, input, now, actor }) => postEntry(tx, { ...input, now, actor }),
    audit: () => ({ subject: "-" }),
  }),
  capture: command({
    name: "test.postCapture",
    who: ["system"],
    input: anything<Given<Capture>>(),
    authorise: open("tests"),
    run: ({ tx, input, now, actor }) => postCapture(tx, { ...input, now, actor }),
    audit: () => ({ subject: "-" }),
  }),
  refund: command({
    name: "test.postRefund",
    who: ["system"],
    input: anything<Given<RefundOfLines>>(),
    authorise: open("tests"),
    run: ({ tx, input, now, actor }) => postRefund(tx, { ...input, now, actor }),
    audit: () => ({ subject: "-" }),
  }),
  dispute: command({
    name: "test.postDispute",
    who: ["system"],
    input: anything<Given<DisputeOfPayment>>(),
    authorise: open("tests"),
    run: ({ tx, input, now, actor }) => postDispute(tx, { ...input, now, actor }),
    audit: () => ({ subject: "-" }),
  }),
  disputeWon: command({
    name: "test.postDisputeWon",
    who: ["system"],
    input: anything<Given<WonDispute>>(),
    authorise: open("tests"),
    run: ({ tx, input, now, actor }) => postDisputeWon(tx, { ...input, now, actor }),
    audit: () => ({ subject: "-" }),
  }),
};

export const job = system("tests");

export interface Shop {
  libraryId: string;
  /** The writers A, C and E of the worked sale. */
  A: string;
  C: string;
  E: string;
  owner: Actor & { kind: "owner" };
  accountant: Actor & { kind: "accountant" };
  marketplace: Actor & { kind: "accountant" };
  composer: (personId: string) => Actor & { kind: "composer" };
}

export async function makeShop(): Promise<Shop> {
  const libraryId = await makeLibrary();
  const person = async (role: string, scope: string | null) => {
    const { id, name } = await makePerson();
    await makeMembership({ personId: id, role, libraryId: scope });
    return { personId: id, name, secondFactorAt: new Date().toISOString() };
  };
  const writers = [await person("composer", libraryId), await person("composer", libraryId)] as const;
  const third = await person("composer", libraryId);
  return {
    libraryId,
    A: writers[0].personId,
    C: writers[1].personId,
    E: third.personId,
    owner: { kind: "owner", libraryId, ...(await person("owner", libraryId)) },
    accountant: { kind: "accountant", libraryId, ...(await person("accountant", libraryId)) },
    marketplace: { kind: "accountant", libraryId: null, ...(await person("accountant", null)) },
    composer: (personId) => ({ kind: "composer", libraryId, personId, name: "A writer" }),
  };
}

export const WORKED_AT = new Date("2026-03-14T10:00:00Z");

/** The worked order of two lines; each shop has its own. */
export function workedSale(shop: Shop, changes: Partial<Given<Capture>> = {}): Given<Capture> {
  const line = (number: number, net: string, tax: string, writers: [string, number][]) => ({
    orderLineId: newId("lin"),
    licenceNumber: `LR-2026-010${number}-X`,
    familyId: newId("fam"),
    productionId: newId("pro"),
    netMinor: minor(net),
    taxMinor: minor(tax),
    writers: writers.map(([personId, shareBps], position) => ({ personId, shareBps, position })),
    cueTitle: `Cue ${number}`,
    scopeWords: "TV programme, the UK and Ireland, one year",
  });
  return {
    orderId: newId("ord"),
    libraryId: shop.libraryId,
    currency: "GBP",
    eventAt: WORKED_AT,
    taxCountry: "GB",
    composerPoolBps: 5000,
    processorFeeMinor: minor("6.77"),
    chargeId: newId("ch"),
    facts: {
      orderNumber: "O-1041",
      buyer: "Quillbeck Media",
      productionTitle: "Harbour Mornings",
      libraryName: "Saltmarrow",
    },
    lines: [
      line(1, "240.00", "48.00", [
        [shop.A, 6000],
        [shop.C, 4000],
      ]),
      line(2, "125.00", "25.00", [
        [shop.A, 3334],
        [shop.C, 3333],
        [shop.E, 3333],
      ]),
    ],
    ...changes,
  };
}

export const lineOf = (sale: Given<Capture>, number: 1 | 2): string =>
  sale.lines[number - 1]?.orderLineId ?? "";

async function accountNames(shop: Shop): Promise<Map<string, AccountRef & { name: string }>> {
  const letter = new Map([
    [shop.libraryId, "SM"],
    [shop.A, "A"],
    [shop.C, "C"],
    [shop.E, "E"],
  ]);
  const rows = await db().select().from(ledgerAccounts);
  return new Map(
    rows.map((row) => {
      const holder = row.holderId === "-" ? "" : ` ${letter.get(row.holderId) ?? row.holderId}`;
      return [row.id, { kind: row.kind as AccountKind, holderId: row.holderId, name: row.kind + holder }];
    }),
  );
}

/** The entries of one library as a journal prints them, one net debit or credit an account. */
export async function journal(
  shop: Shop,
): Promise<{ code: string; on: string; nets: Record<string, string> }[]> {
  const names = await accountNames(shop);
  const rows = await db()
    .select({ entry: ledgerEntries, transfer: ledgerTransfers })
    .from(ledgerEntries)
    .innerJoin(ledgerTransfers, eq(ledgerTransfers.entryId, ledgerEntries.id))
    .where(eq(ledgerEntries.libraryId, shop.libraryId))
    .orderBy(ledgerEntries.postedAt, ledgerEntries.id, ledgerTransfers.number);
  const entries = new Map<string, { code: string; on: string; legs: Leg[] }>();
  for (const { entry, transfer } of rows) {
    const [debit, credit] = [names.get(transfer.debitAccountId)!, names.get(transfer.creditAccountId)!];
    const found = entries.get(entry.id) ?? {
      code: entry.code,
      on: entry.eventAt.toISOString().slice(0, 10),
      legs: [],
    };
    found.legs.push({ debit, credit, amountMinor: transfer.amountMinor, orderLineId: null, shareBps: null });
    entries.set(entry.id, found);
  }
  return [...entries.values()].map(({ code, on, legs }) => ({
    code,
    on,
    nets: Object.fromEntries(
      netByAccount(legs).map((net) => [
        [...names.values()].find((one) => one.kind === net.kind && one.holderId === net.holderId)!.name,
        `${net.debitMinor > 0n ? "Dr" : "Cr"} ${show(net.debitMinor).replace("-", "")}`,
      ]),
    ),
  }));
}

/** What one library's entries leave on each account, debit balances positive; accounts at nothing are left out. */
export async function balances(shop: Shop): Promise<Record<string, string>> {
  const names = await accountNames(shop);
  const rows = await db()
    .select({ transfer: ledgerTransfers })
    .from(ledgerEntries)
    .innerJoin(ledgerTransfers, eq(ledgerTransfers.entryId, ledgerEntries.id))
    .where(eq(ledgerEntries.libraryId, shop.libraryId));
  const sums = new Map<string, bigint>();
  const add = (id: string, amount: bigint) => {
    const name = names.get(id)!.name;
    sums.set(name, (sums.get(name) ?? 0n) + amount);
  };
  for (const { transfer } of rows) {
    add(transfer.debitAccountId, transfer.amountMinor);
    add(transfer.creditAccountId, -transfer.amountMinor);
  }
  return Object.fromEntries(
    [...sums].filter(([, sum]) => sum !== 0n).map(([name, sum]) => [name, show(sum)]),
  );
}

/** A payee that can be paid, without the processor. */
export async function makePayee(
  kind: "library" | "person",
  holderId: string,
  values: Partial<typeof payees.$inferInsert> = {},
): Promise<string> {
  const id = newId("pay");
  await db()
    .insert(payees)
    .values({
      id,
      kind,
      holderId,
      legalName: "A payee",
      countryCode: "GB",
      state: "ready",
      processorAccount: `acct_${id}`,
      createdAt: new Date(),
      ...values,
    });
  return id;
}

const at =
  (instant: string) =>
  <T>(work: () => Promise<T>) =>
    withBusinessClock(new Date(instant), work);

/** Prepares, releases, confirms and sends a run as its jobs do, but for the processor's own part. */
export async function payOut(shop: Shop, currency = "GBP"): Promise<string[]> {
  const { runId } = await preparePayoutRun(shop.accountant, { libraryId: shop.libraryId, currency });
  await releasePayoutRun(shop.accountant, { runId });
  await confirmPayoutRun(shop.marketplace, { runId });
  const rows = await db().select().from(payouts).where(eq(payouts.runId, runId));
  for (const { id } of rows)
    if (await beginPayout(job, { payoutId: id }))
      await recordPayoutSent(job, { payoutId: id, transferId: `tr_${id}` });
  return rows.map(({ id }) => id);
}

/** The worked sale from capture to dispute, on its days; "march" stops after the payout. */
export async function playWorkedSale(shop: Shop, until: "march" | "april", currency = "GBP") {
  const sale = workedSale(shop, { currency });
  const { libraryId } = shop;
  const paidAt = new Date("2025-11-03T00:00:00Z");
  await recordAdvance(shop.owner, {
    libraryId,
    personId: shop.C,
    amountMinor: 4500n,
    currency,
    paidAt,
  });
  await makePayee("library", libraryId);
  await makePayee("person", shop.A);
  await at("2026-03-14T10:00:00Z")(() => steps.capture(job, sale));
  const movement = (sourceId: string | null, amount: string) => ({
    movements: [{ movementId: newId("txn"), sourceId: sourceId ?? "", netMinor: minor(amount), currency }],
  });
  await at("2026-03-17T09:00:00Z")(() => settlePayments(job, movement(sale.chargeId, "431.23")));
  await at("2026-03-28T00:00:00Z")(() => releaseHolds(job, { orderId: sale.orderId }));
  await at("2026-03-31T09:00:00Z")(() => payOut(shop, currency));
  if (until === "march") return sale;
  const eventAt = new Date("2026-04-02T11:00:00Z");
  const words = "Bought twice by mistake: refunded.";
  const refund = { orderId: sale.orderId, words, processorFeeAbsorbed: true as const, eventAt };
  await at("2026-04-02T11:00:00Z")(() => steps.refund(job, { ...refund, orderLineIds: [lineOf(sale, 2)] }));
  const dispute = { orderId: sale.orderId, disputeId: newId("dp"), chargeMinor: 1500n };
  await at("2026-04-20T08:00:00Z")(() =>
    steps.dispute(job, {
      ...dispute,
      words: "The buyer's bank took this payment back.",
      eventAt: new Date("2026-04-20T08:00:00Z"),
    }),
  );
  return sale;
}
