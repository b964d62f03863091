import "@/tests/support/database";
import { existsSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { eq, ne } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { jobs } from "@/db/schema/infrastructure";
import { orders } from "@/db/schema/licensing";
import { writeWav } from "@/fixtures/audio";
import { buildBext } from "@/lib/audio";
import {
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
import { system } from "@/lib/kernel/actor";
import { newId } from "@/lib/kernel/ids";
import { placeOrder } from "@/lib/licensing";
import { mailHandlers } from "@/lib/mail/jobs";
import { storeFile } from "@/lib/uploads";
import { makeCue, makeShop, PROGRAMME } from "@/tests/licensing/shop";
import { makeLibrary } from "@/tests/support/make";
import {
  arriveMeasured,
  composerOf,
  DECLARATION,
  makeDraft,
  makeWriter,
  signDraft,
  WHOLE_DRAFT,
} from "@/tests/support/make-delivery";
import { type StandIns, startStandIns } from "@/tests/support/world";

/* What people write and name, as they should not. README.md says where the other rows are proved. */
let standIns: StandIns;
beforeAll(async () => {
  standIns = await startStandIns();
});
afterAll(closeMeasuring);

const composer = async (ipi: string, libraryId?: string) => {
  libraryId ??= await makeLibrary();
  const writer = await makeWriter(libraryId, ipi);
  return { writer, actor: composerOf(libraryId, writer) };
};

const handlers = { ...deliveriesHandlers, ...mailHandlers };
const drain = () =>
  runWorker({ handlers, signal: new AbortController().signal, untilIdle: true, idleMs: 50 });

/** A WAV with a `bext` chunk before its samples. */
function withBext(path: string, description: string): void {
  const body = Buffer.from(
    buildBext({ description, originator: "=1+1", timeReferenceSamples: 172_800_000n }),
  );
  const chunk = Buffer.alloc(8);
  chunk.write("bext", 0, "latin1");
  chunk.writeUInt32LE(body.length, 4);
  const channel = Float32Array.from(
    { length: 480_000 },
    (_, index) => 0.3 * Math.sin(index * 0.0576) * Math.exp(-(index % 48_000) / 20_000),
  );
  writeWav(path, { sampleRateHz: 48_000, channels: [channel, channel.map((value) => value * 0.9)] });
  const plain = readFileSync(path);
  const whole = Buffer.concat([plain.subarray(0, 12), chunk, body, plain.subarray(12)]);
  whole.writeUInt32LE(whole.length - 8, 4);
  writeFileSync(path, whole);
}

describe("text that is not meant as text", () => {
  const WORDS = [
    '<script>alert("title")</script>',
    '=HYPERLINK("http://127.0.0.1/","here")',
    "{{7*7}} $(7*7) %s %00 '; drop table families; --",
    "Ночь 夜 ليلة 🎹 e\u0301 \u202Eevil",
    "One line\r\nBcc: everybody@test.example",
  ];
  const NAMES = [
    '"><img src=x onerror=alert(1)>_full.wav',
    "../../../../etc/passwd_bed.wav",
    "=cmd|' /C calc'!A0_30.wav",
    "Ночь 夜 🎹_60.wav",
    "con.aux_15.wav",
  ];

  test("titles, descriptions and file names are kept and given back to the letter, and a letter shows them without running them", async () => {
    const { writer, actor } = await composer("99900000158");
    for (const [index, words] of WORDS.entries()) {
      const { deliveryId } = await startDelivery(actor, { title: words });
      const description = `${words} `.padEnd(120, "and more words ").trim();
      const writers = [{ name: writer.name, ipi: writer.ipi, email: "", role: "C", share: "100.00" }];
      await saveDraft(actor, {
        deliveryId,
        draft: { ...WHOLE_DRAFT, title: words, description, writers, publishers: [] },
      });
      const name = NAMES[index] ?? "";
      const versionId = await arriveMeasured({ deliveryId, personId: writer.id, name });
      await setVersion(actor, { deliveryId, versionId, versionRole: "full" });
      await signDraft(actor, deliveryId);
      const view = await getDelivery(actor, { deliveryId });
      expect(view.title).toBe(words);
      expect(view.draft.description).toBe(description);
      expect(view.versions.map((version) => version.fileName)).toEqual([name]);
    }
    await db().update(jobs).set({ state: "done" }).where(ne(jobs.name, "mail.send"));
    await drain();
    const answer = await fetch(`${standIns.mail.url}/inbox?to=${writer.email}`);
    const { mails } = (await answer.json()) as { mails: { subject: string; html: string; text: string }[] };
    expect(mails).toHaveLength(WORDS.length);
    for (const words of WORDS)
      expect(mails.some((mail) => mail.subject.includes(words.replace("\r\n", " ")))).toBe(true);
    for (const { subject } of mails) expect(subject).not.toMatch(/[\r\n]/);
    for (const { html } of mails) expect(html).not.toMatch(/<script|<img[^>]*onerror/i);
    const all = mails.map(({ text }) => text).join("\n");
    for (const name of NAMES) expect(all).toContain(name);
  });

  test("a Broadcast Wave is measured whatever its text holds, and its words come back as words", async () => {
    const { writer, actor } = await composer("99900000256");
    const { deliveryId } = await startDelivery(actor, { title: "A text in the file" });
    const name = "../up/and away_full.wav";
    const path = join(standIns.folder, "bext.wav");
    withBext(path, WORDS[0] ?? "");
    const key = await storeFile(path, { name: "bext.wav", type: "audio/wav" });
    await fileArrived(system("tests"), { deliveryId, personId: writer.id, key, name, sizeBytes: 1 });
    await drain();
    const [version] = (await getDelivery(actor, { deliveryId })).versions;
    expect(version?.state).toBe("measured");
    expect(version?.facts).toMatchObject({ bext: { description: WORDS[0], originator: "=1+1" } });
    // The copy on the worker's disk took no word of the name, and is gone.
    expect(readdirSync(join(standIns.folder, "media", "copies"))).toEqual([]);
    expect(existsSync(join(standIns.folder, "up"))).toBe(false);
  });
});

describe("an identifier with a wrong check digit", () => {
  test.each([
    ["an IPI", { ipi: "99900000159" }, {}, /check digits.*did you mean 99900000158\?/i],
    // T-034.524.680-1 is the example of ISO 15707; its check digit is 1.
    ["an ISWC", {}, { iswc: "T-034.524.680-2" }, /check digit.*did you mean T-?034\.?524\.?680-?1\?/i],
  ])(
    "%s at the signature: which digit, a suggestion, and everything kept",
    async (_name, writerPart, draftPart, words) => {
      const { writer, actor } = await composer("99900000354");
      const row = { name: writer.name, ipi: writer.ipi, share: "100.00", ...writerPart };
      const { deliveryId } = await makeDraft(actor, [row], draftPart);
      await expect(signDraft(actor, deliveryId)).rejects.toMatchObject({
        code: "invalid",
        message: expect.stringMatching(words),
      });
      const view = await getDelivery(actor, { deliveryId });
      expect(view).toMatchObject({ state: "draft", draft: { description: WHOLE_DRAFT.description } });
      expect(view.versions).toHaveLength(1);
    },
  );
});

describe("the same click twice", () => {
  test("one order, however often and however quickly the button was pressed", async () => {
    const shop = await makeShop();
    const { familyId } = await makeCue(shop.libraryId);
    const wish = { productionId: shop.productionId, lines: [{ familyId, use: PROGRAMME }] };
    const click = () => placeOrder(shop.proposer, wish, { operationId: "one form, one click" });
    const answers = await Promise.all(Array.from({ length: 10 }, click));
    expect(new Set(answers.map(({ orderId }) => orderId)).size).toBe(1);
    expect(await click()).toEqual(answers[0]);
    const placed = await db().select().from(orders).where(eq(orders.productionId, shop.productionId));
    expect(placed).toHaveLength(1);
  });

  test("one signature: the second is told that it is signed, and there is one declaration and one family", async () => {
    const { writer, actor } = await composer("99900000452");
    const { deliveryId } = await makeDraft(actor, [{ name: writer.name, ipi: writer.ipi, share: "100.00" }]);
    const input = { deliveryId, declaration: DECLARATION };
    const click = () => signDelivery(actor, input, { operationId: `sign ${deliveryId}` });
    const answers = await Promise.all([click(), click(), click()]);
    expect(new Set(answers.map(({ familyId }) => familyId)).size).toBe(1);
    await expect(signDelivery(actor, input)).rejects.toMatchObject({ code: "precondition" });
    expect((await getDelivery(actor, { deliveryId })).declarations).toHaveLength(1);
  });
});

describe("somebody else's id", () => {
  test("is answered to the letter as an id that nobody has", async () => {
    const { writer, actor } = await composer("99900000550");
    const { deliveryId } = await makeDraft(actor, [{ name: writer.name, ipi: writer.ipi, share: "100.00" }]);
    const { actor: other } = await composer("99900000648", actor.libraryId);
    const refusal = (id: string) =>
      getDelivery(other, { deliveryId: id }).then(
        () => null,
        (error: Error) => [error.name, error.message, { ...error }],
      );
    const nobodys = await refusal(newId("del"));
    expect(nobodys).not.toBeNull();
    expect(await refusal(deliveryId)).toEqual(nobodys);
  });
});
