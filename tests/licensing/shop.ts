import "@/tests/support/database";
import { db } from "@/db/client";
import { licensedMasters, splitShares, splitVersions } from "@/db/schema/catalogue";
import { productions } from "@/db/schema/productions";
import { certificates } from "@/db/schema/screening";
import { startPayments } from "@/fixtures/services/payments/payments";
import type { StandIn } from "@/fixtures/services/server";
import { type Actor, system } from "@/lib/kernel/actor";
import { withBusinessClock } from "@/lib/kernel/clock";
import { newId } from "@/lib/kernel/ids";
import { recordPaymentEvent } from "@/lib/ledger";
import { approveOrder, openCheckout, placeOrder, setRateCard } from "@/lib/licensing";
import { licensingHandlers } from "@/lib/licensing/jobs";
import type { UseInput } from "@/lib/licensing/rate-card";
import { TERMS_VERSION } from "@/lib/licensing/terms";
import { listEventsSince } from "@/lib/payments";
import { control, temporaryDir } from "@/tests/contract/support";
import {
  makeCompany,
  makeFamily,
  makeLibrary,
  makeMembership,
  makePerson,
  makeRecording,
} from "@/tests/support/make";
import { INVENTED_CARD } from "./invented-card";

export const PROGRAMME: UseInput = {
  mediaClass: "MC06",
  territory: { kind: "region", region: "UK+IE" },
  termMonths: 12,
};
export const ONLINE: UseInput = { mediaClass: "MC02", territory: { kind: "world" }, termMonths: null };

export interface Shop {
  libraryId: string;
  companyId: string;
  productionId: string;
  approver: Actor;
  proposer: Actor;
  owner: Actor;
}

const NOW = () => new Date("2026-01-02T09:00:00Z");

/** A library with the invented card, a buyer company with a production, and a seat of each kind. */
export async function makeShop(): Promise<Shop> {
  const libraryId = await makeLibrary();
  await withBusinessClock(NOW(), () => setRateCard(system("tests"), { libraryId, card: INVENTED_CARD }));
  const companyId = await makeCompany({ taxNumber: null });
  const seat = async (mayApprove: boolean): Promise<Actor> => {
    const { id, name } = await makePerson();
    await makeMembership({ personId: id, role: "buyer", companyId, mayApprove });
    return { kind: "buyer", companyId, mayApprove, personId: id, name };
  };
  const [approver, proposer] = [await seat(true), await seat(false)];
  const { id, name } = await makePerson();
  const owner: Actor = {
    kind: "owner",
    libraryId,
    personId: id,
    name,
    secondFactorAt: new Date().toISOString(),
  };
  const productionId = await makeProduction(companyId);
  return { libraryId, companyId, productionId, approver, proposer, owner };
}

export async function makeProduction(companyId: string): Promise<string> {
  const id = newId("pro");
  await db().insert(productions).values({
    id,
    companyId,
    title: "Harbour Mornings",
    kind: "online film or series",
    client: "Quay Television",
    createdBy: "per_test",
    createdAt: NOW(),
  });
  return id;
}

/** A listed cue with two versions, an accepted split, a certificate, and (unless told otherwise) its masters. */
export async function makeCue(
  libraryId: string,
  options: { masters?: boolean; restricted?: string[]; publisher?: string; shares?: number[] } = {},
): Promise<{ familyId: string; head: string; bed: string }> {
  const [head, bed] = [newId("rec"), newId("rec")];
  const familyId = await makeFamily({
    libraryId,
    headRecordingId: head,
    restrictedTerritories: options.restricted ?? [],
    refusedUses: ["political advertising"],
    iswc: null,
    yearRecorded: 2024,
  });
  await makeRecording({ id: head, familyId, libraryId });
  await makeRecording({ id: bed, familyId, libraryId, versionRole: "bed", position: 1 });
  const splitVersionId = newId("spl");
  await db()
    .insert(splitVersions)
    .values({ id: splitVersionId, familyId, version: 1, validFrom: NOW(), createdAt: NOW() });
  const shares = options.shares ?? [6000, 4000];
  const rows = await Promise.all(
    shares.map(async (shareBps, position) => {
      const { id: personId, name } = await makePerson();
      return { side: "writer", position, personId, name, role: "C", shareBps, acceptedAt: NOW() };
    }),
  );
  await db()
    .insert(splitShares)
    .values([
      ...rows.map((row) => ({ id: newId("sha"), splitVersionId, ipi: null, ...row })),
      {
        id: newId("sha"),
        splitVersionId,
        side: "publisher",
        position: 9,
        personId: null,
        name: options.publisher ?? "The library's own house",
        ipi: options.publisher ? "99900002250" : "99900002152",
        role: "E",
        shareBps: 10_000,
        acceptedAt: NOW(),
      },
    ]);
  await db()
    .insert(certificates)
    .values({
      id: newId("cer"),
      recordingId: head,
      runId: newId("run"),
      body: {
        screenedAt: "2026-01-02T10:00:00.000Z",
        index: { engineVersion: 1, sequence: 40, recordings: 112, hours: 4 },
        words: "Nothing shared outside its own family.",
      },
      sha256: "0".repeat(64),
      issuedAt: NOW(),
    });
  if (options.masters !== false) await makeMasters([head, bed]);
  return { familyId, head, bed };
}

export async function makeMasters(recordingIds: readonly string[]): Promise<void> {
  await db()
    .insert(licensedMasters)
    .values(
      recordingIds.map((recordingId) => ({
        recordingId,
        fileKey: `master-${recordingId}`,
        sha256: "ab".repeat(32),
        sizeBytes: 1000,
        durationSamples: 5_760_000,
        createdAt: NOW(),
      })),
    );
}

/** The far end for money, in this process. */
export async function openTill() {
  const dir = temporaryDir();
  const service: StandIn = await startPayments({
    port: 0,
    dataDir: dir.path,
    secretKey: process.env.STRIPE_SECRET_KEY ?? "",
    webhookSecret: process.env.STRIPE_WEBHOOK_SECRET ?? "",
    webhookUrl: null,
  });
  process.env.STRIPE_API_BASE = service.url;
  return {
    tell: (message: Record<string, unknown>) => control(service.url, message),
    close: async () => {
      await service.close();
      dir.remove();
    },
  };
}
export type Till = Awaited<ReturnType<typeof openTill>>;

export async function proposed(
  shop: Shop,
  lines: ReadonlyArray<{ familyId: string; use: UseInput }>,
): Promise<string> {
  const { orderId } = await placeOrder(shop.proposer, {
    productionId: shop.productionId,
    lines: lines.map((line) => ({ ...line })),
  });
  return orderId;
}

export async function approved(
  shop: Shop,
  lines: ReadonlyArray<{ familyId: string; use: UseInput }>,
): Promise<{ orderId: string; checkoutId: string }> {
  const orderId = await proposed(shop, lines);
  await approveOrder(shop.approver, { orderId, termsVersion: TERMS_VERSION, mayAccept: true });
  const opened = await openCheckout(shop.approver, { orderId });
  if (opened.state !== "open") throw new Error("the checkout is not open");
  return { orderId, checkoutId: opened.url.split("/").at(-1) ?? "" };
}

const handle = (eventId: string) => licensingHandlers["licensing.paymentEvent"].handle({ eventId });

/** Keeps every event about one thing of the processor's and hands it to the job, in the order given. */
export async function deliver(
  about: (event: { type: string; text: string }) => boolean,
  order: (ids: string[]) => string[] = (ids) => ids,
): Promise<number> {
  const events = (await listEventsSince(new Date(0))).filter((event) =>
    about({ type: event.type, text: JSON.stringify(event.subject) }),
  );
  for (const { eventId, type, subject } of events)
    await recordPaymentEvent(system("tests"), { eventId, type, subject: { ...subject } });
  const ids = order(events.map(({ eventId }) => eventId));
  for (const id of ids) await handle(id);
  return ids.length;
}

export async function paid(
  shop: Shop,
  till: Till,
  lines: ReadonlyArray<{ familyId: string; use: UseInput }>,
): Promise<string> {
  const { orderId, checkoutId } = await approved(shop, lines);
  await till.tell({ pay: checkoutId });
  await deliver(({ type, text }) => type === "checkout.session.completed" && text.includes(checkoutId));
  return orderId;
}
