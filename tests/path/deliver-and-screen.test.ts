import "@/tests/support/database";
import { mkdirSync } from "node:fs";
import { join } from "node:path";
import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { confirmedNames } from "@/db/schema/accounts";
import { families } from "@/db/schema/catalogue";
import { jobs } from "@/db/schema/infrastructure";
import { cases } from "@/db/schema/review";
import { indexLog } from "@/db/schema/screening";
import { renderVersion, writeWav } from "@/fixtures/audio";
import {
  acceptEditorial,
  answerSplit,
  fileArrived,
  getDelivery,
  saveDraft,
  setVersion,
  signDelivery,
  startDelivery,
} from "@/lib/deliveries";
import { deliveriesHandlers } from "@/lib/deliveries/jobs";
import { closeMeasuring } from "@/lib/deliveries/measuring/measure-version";
import { runWorker } from "@/lib/jobs";
import type { ActorOf } from "@/lib/kernel/actor";
import { system } from "@/lib/kernel/actor";
import { reviewHandlers } from "@/lib/review/jobs";
import { closeScreeningEngine } from "@/lib/screening/engine/engine";
import { screeningHandlers } from "@/lib/screening/jobs";
import { storeFile } from "@/lib/uploads";
import { makeLibrary, makeMembership, makePerson } from "@/tests/support/make";
import { type StandIns, startStandIns } from "@/tests/support/world";

/*
 * The main job on real audio: the demonstration's own synthesiser at forty seconds a cue, the real store's SDK, the real
 * worker, the real database.
 */
let standIns: StandIns;
let libraryId: string;
const handlers = { ...deliveriesHandlers, ...screeningHandlers, ...reviewHandlers };
const SECONDS = 40;

const drain = () =>
  runWorker({ handlers, signal: new AbortController().signal, untilIdle: true, idleMs: 50 });

const DRAFT = {
  otherTitles: [],
  bpm: 72,
  musicalKey: "D minor",
  genre: "chamber",
  moods: ["bittersweet"],
  instruments: ["piano"],
  uses: [],
  voice: "none",
  ending: "ring-out",
  shape: "builds",
  density: "sparse",
  description: "Sparse piano over one bowed cello; it opens late and leaves the piano alone at the close.",
};

type Writer = { id: string; name: string; ipi: string };

async function makeWriter(ipi: string): Promise<Writer> {
  const person = await makePerson();
  await makeMembership({ personId: person.id, role: "composer", libraryId });
  await db()
    .insert(confirmedNames)
    .values({
      id: `nam_${person.id.slice(4)}`,
      libraryId,
      personId: person.id,
      legalName: person.name,
      creditName: person.name,
      ipi,
      confirmedBy: "test",
      confirmedAt: new Date(),
    });
  return { id: person.id, name: person.name, ipi };
}

const composer = (writer: Writer): ActorOf<"composer"> => ({
  kind: "composer",
  personId: writer.id,
  name: writer.name,
  libraryId,
});

async function deliver(
  writer: Writer,
  title: string,
  files: { name: string; role: string; audio: ReturnType<typeof renderVersion> }[],
  writers = [{ name: writer.name, ipi: writer.ipi, email: null, role: "C", share: "100.00" }],
) {
  const actor = composer(writer);
  const { deliveryId } = await startDelivery(actor, { title });
  await saveDraft(actor, { deliveryId, draft: { ...DRAFT, title, writers, publishers: [] } });
  for (const file of files) {
    const path = join(standIns.folder, file.name);
    writeWav(path, file.audio);
    const key = await storeFile(path, { name: `${title}-${file.name}`, type: "audio/wav" });
    const { versionId } = await fileArrived(system("tests"), {
      deliveryId,
      personId: writer.id,
      key,
      name: file.name,
      sizeBytes: 1,
    });
    await setVersion(actor, { deliveryId, versionId, versionRole: file.role });
  }
  await drain();
  return { actor, deliveryId };
}

const sign = (actor: ActorOf<"composer">, deliveryId: string) =>
  signDelivery(actor, {
    deliveryId,
    declaration: {
      authorship: true,
      recordingOwner: "the library",
      performers: "all performed by me",
      samples: [],
      preExisting: "none",
      preExistingWords: "",
      deal: "exclusive",
      truth: true,
      signedName: actor.name,
    },
  });

beforeAll(async () => {
  standIns = await startStandIns();
  mkdirSync(standIns.folder, { recursive: true });
  libraryId = await makeLibrary();
});
afterAll(async () => {
  await closeScreeningEngine();
  await closeMeasuring();
});

describe("from a master to a listing, and a question", () => {
  let writer: Writer;

  test("a family with its bed and cutdown is measured, screened, accepted by its co-writer and the library, and listed", {
    timeout: 180_000,
  }, async () => {
    writer = await makeWriter("99900000158");
    const other = await makeWriter("99900000354");
    const { actor, deliveryId } = await deliver(
      writer,
      "Salt on the Window Frame",
      [
        { name: "Salt_full.wav", role: "full", audio: renderVersion(1, "full", { seconds: SECONDS }) },
        { name: "Salt_30.wav", role: "30", audio: renderVersion(1, "30", { seconds: SECONDS }) },
      ],
      [
        { name: writer.name, ipi: writer.ipi, email: null, role: "C", share: "60.00" },
        { name: other.name, ipi: other.ipi, email: null, role: "C", share: "40.00" },
      ],
    );
    const measured = await getDelivery(actor, { deliveryId });
    expect(measured.versions.map((version) => [version.versionRole, version.state, version.words])).toEqual([
      ["full", "measured", "Measured; it passes the checks."],
      ["30", "measured", "Measured; it passes the checks."],
    ]);
    await sign(actor, deliveryId);
    await drain();
    const screened = await getDelivery(actor, { deliveryId });
    expect(screened.versions.map((version) => version.state)).toEqual(["clear", "clear"]);
    expect(screened.versions[1]?.matches).toMatchObject([{ explainedBy: "family" }]);
    expect(screened.words).toBe("Screened and clear. It waits for its co-writers and the library to listen.");

    await answerSplit(composer(other), { deliveryId, accept: true });
    await acceptEditorial(
      { kind: "owner", personId: "per_owner", name: "The owner", libraryId },
      { deliveryId },
    );
    await drain();
    const listed = await getDelivery(actor, { deliveryId });
    expect(listed.state).toBe("listed");
    expect(listed.versions.map((version) => version.state)).toEqual(["listed", "listed"]);
    const [family] = await db().select().from(families).where(eq(families.title, "Salt on the Window Frame"));
    expect(family?.state).toBe("listed");
  });

  test("the same recording from somebody else is held for a person, and becomes a case; it is never refused by software", {
    timeout: 180_000,
  }, async () => {
    const stranger = await makeWriter("99900000256");
    const master = renderVersion(1, "full", { seconds: SECONDS });
    const shifted = {
      ...master,
      channels: master.channels.map((channel) =>
        Float32Array.from({ length: channel.length + 38_400 }, (_, i) =>
          i < 38_400 ? 0 : (channel[i - 38_400] ?? 0) * 0.9,
        ),
      ) as unknown as typeof master.channels,
    };
    const { actor, deliveryId } = await deliver(stranger, "Window Salt (final)", [
      { name: "Window.wav", role: "full", audio: shifted },
    ]);
    await sign(actor, deliveryId);
    await drain();
    const held = await getDelivery(actor, { deliveryId });
    expect(held.versions[0]?.state).toBe("held");
    expect(held.standing).toBe("held for a person");
    const [row] = await db().select().from(cases).where(eq(cases.deliveryId, deliveryId));
    expect(row?.state).toBe("open");
    const failed = await db().select().from(jobs).where(eq(jobs.state, "failed"));
    expect(failed).toEqual([]);
  });

  test("the same writer delivering the same bytes again is told so, and nothing goes on record", {
    timeout: 120_000,
  }, async () => {
    const { actor, deliveryId } = await deliver(writer, "Salt again", [
      { name: "again.wav", role: "full", audio: renderVersion(1, "full", { seconds: SECONDS }) },
    ]);
    const view = await getDelivery(actor, { deliveryId });
    expect(view.versions[0]?.state).toBe("returned");
    expect(view.versions[0]?.words).toContain("You already delivered this as Salt on the Window Frame");
  });

  test("SCREENING-1: the index log has no gap", async () => {
    const rows = await db().select({ seq: indexLog.seq }).from(indexLog);
    expect(rows.map((row) => row.seq).sort((a, b) => a - b)).toEqual(rows.map((_, index) => index + 1));
  });
});
