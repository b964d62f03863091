import "@/tests/support/database";
import { and, eq } from "drizzle-orm";
import { beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { families, recordings } from "@/db/schema/catalogue";
import { deliveries, deliveryVersions, deliveryWriters } from "@/db/schema/deliveries";
import { jobs, mailOutbox } from "@/db/schema/infrastructure";
import { setRecordingState } from "@/lib/catalogue";
import {
  acceptEditorial,
  answerSplit,
  askWriterAgain,
  fileArrived,
  findUnanswered,
  getDelivery,
  handInAgain,
  listSplitRequests,
  paperArrived,
  readPaper,
  remindWriters,
  returnEditorial,
  saveDraft,
  setVersion,
  startDelivery,
  tryListing,
} from "@/lib/deliveries";
import { recordMeasurement } from "@/lib/deliveries/record-measurement";
import { type ActorOf, system } from "@/lib/kernel/actor";
import { businessNow } from "@/lib/kernel/clock";
import { Invalid, NotFound, Precondition } from "@/lib/kernel/errors";
import { makeLibrary } from "@/tests/support/make";
import {
  arriveMeasured,
  composerOf,
  freshTitle,
  type MadeWriter,
  makeDraft,
  makeWriter,
  signDraft,
  WHOLE_DRAFT,
} from "@/tests/support/make-delivery";

const worker = system("tests");
let libraryId: string;
let ailsa: MadeWriter;
let celandine: MadeWriter;
let composer: ActorOf<"composer">;
let coWriter: ActorOf<"composer">;
let owner: ActorOf<"owner">;

beforeAll(async () => {
  libraryId = await makeLibrary();
  ailsa = await makeWriter(libraryId, "99900000158");
  celandine = await makeWriter(libraryId, "99900000354");
  composer = composerOf(libraryId, ailsa);
  coWriter = composerOf(libraryId, celandine);
  owner = { kind: "owner", personId: "per_owner", name: "The owner", libraryId };
});

const alone = () => [{ name: ailsa.name, ipi: ailsa.ipi, share: "100.00" }];
const both = (second = "40.00") => [
  { name: ailsa.name, ipi: ailsa.ipi, share: "60.00" },
  { name: celandine.name, ipi: celandine.ipi, share: second },
];

/** As the screening's end leaves a version that was let through. */
async function letThrough(deliveryId: string): Promise<void> {
  const rows = await db().select().from(deliveryVersions).where(eq(deliveryVersions.deliveryId, deliveryId));
  for (const row of rows) {
    if (!row.recordingId || row.state !== "screening") continue;
    const { recordingId } = row;
    await db().update(deliveryVersions).set({ state: "clear" }).where(eq(deliveryVersions.id, row.id));
    await db().transaction((tx) =>
      setRecordingState(tx, recordingId, "clear", { words: "Screened.", now: businessNow() }),
    );
  }
}

const mailsAbout = (deliveryId: string, template: string) =>
  db()
    .select()
    .from(mailOutbox)
    .where(and(eq(mailOutbox.subjectId, deliveryId), eq(mailOutbox.template, template)));

describe("DELIVERIES-1: nothing that was entered is lost", () => {
  test("DELIVERIES-1: a draft keeps what each step brought, of any completeness", async () => {
    const { deliveryId } = await startDelivery(composer, { title: freshTitle() });
    await saveDraft(composer, { deliveryId, draft: { bpm: 84 } });
    await saveDraft(composer, { deliveryId, draft: { writers: both("39.99") } });
    const view = await getDelivery(composer, { deliveryId });
    expect(view.draft).toMatchObject({ bpm: 84, writers: both("39.99") });
    expect(view.standing).toBeNull();
  });

  test("DELIVERIES-1: a refused signature changes nothing of the draft", async () => {
    const { deliveryId } = await makeDraft(composer, both("39.99"));
    await expect(signDraft(composer, deliveryId)).rejects.toThrow(/99\.99, missing 0\.01/);
    const view = await getDelivery(composer, { deliveryId });
    expect(view.state).toBe("draft");
    expect(view.draft.description).toBe(WHOLE_DRAFT.description);
    expect(view.versions).toHaveLength(1);
  });

  test("DELIVERIES-1: a file in another's place keeps its role, its place and all answers", async () => {
    const { deliveryId, versionId } = await makeDraft(composer, alone());
    await setVersion(composer, { deliveryId, versionId, versionRole: "full" });
    const newId = await arriveMeasured({
      deliveryId,
      personId: ailsa.id,
      name: "anything at all.wav",
      replaces: versionId,
    });
    const view = await getDelivery(composer, { deliveryId });
    expect(view.versions.map((version) => [version.id, version.versionRole, version.position])).toEqual([
      [newId, "full", 0],
    ]);
    expect(view.draft.genre).toBe("chamber");
  });

  test("DELIVERIES-1: a delivery that the library sent back goes in again with everything kept", async () => {
    const { deliveryId } = await makeDraft(composer, alone());
    await signDraft(composer, deliveryId);
    await returnEditorial(owner, {
      deliveryId,
      codes: ["Q01"],
      notes: ["The cello is out of tune from 0:40.", "The piano clips at 1:02."],
    });
    const back = await getDelivery(composer, { deliveryId });
    expect(back.standing).toBe("needs you");
    await handInAgain(composer, { deliveryId, words: "Both are mended." });
    const again = await getDelivery(composer, { deliveryId });
    expect(again.state).toBe("delivered");
    expect(again.versions.map((version) => version.sha256)).toEqual(
      back.versions.map((version) => version.sha256),
    );
    expect(again.declarations).toHaveLength(1);
  });
});

describe("DELIVERIES-2: the same file is one version", () => {
  test("DELIVERIES-2: the store announces one file five times", async () => {
    const { deliveryId } = await startDelivery(composer, { title: freshTitle() });
    const announce = () =>
      fileArrived(worker, {
        deliveryId,
        personId: ailsa.id,
        key: `key-of-${deliveryId}`,
        name: "Work.wav",
        sizeBytes: 10,
      });
    const answers = await Promise.all([announce(), announce(), announce(), announce(), announce()]);
    expect(new Set(answers.map((answer) => answer.versionId)).size).toBe(1);
    expect((await getDelivery(composer, { deliveryId })).versions).toHaveLength(1);
  });

  test("DELIVERIES-2: the same bytes a second time in one delivery are answered with the first file's name", async () => {
    const { deliveryId, versionId } = await makeDraft(composer, alone());
    const first = (await getDelivery(composer, { deliveryId })).versions[0];
    await arriveMeasured({
      deliveryId,
      personId: ailsa.id,
      name: "Work_bed.wav",
      sha256: first?.sha256 ?? "",
    });
    const view = await getDelivery(composer, { deliveryId });
    const second = view.versions.find((version) => version.id !== versionId);
    expect(second?.state).toBe("returned");
    expect(second?.words).toContain("You already delivered this as Work_full.wav");
    await expect(signDraft(composer, deliveryId)).rejects.toThrow(Invalid);
  });
});

describe("DELIVERIES-3 and DELIVERIES-4: what software returns, and what it screens", () => {
  test("DELIVERIES-3: a version that the checks sent back is screened all the same, and stays sent back", async () => {
    const { deliveryId, versionId } = await makeDraft(composer, alone());
    await recordMeasurement(worker, {
      versionId,
      sha256: "a".repeat(64),
      checks: [{ code: "T01", verdict: "return", what: "The signal is clipped in 2 places." }],
    });
    await signDraft(composer, deliveryId);
    const version = (await getDelivery(composer, { deliveryId })).versions[0];
    expect(version?.state).toBe("returned");
    const asked = await db().select().from(jobs).where(eq(jobs.name, "screening.screen"));
    expect(asked.some((job) => JSON.stringify(job.payload).includes(version?.recordingId ?? "none"))).toBe(
      true,
    );
    const [recording] = await db()
      .select()
      .from(recordings)
      .where(eq(recordings.id, version?.recordingId ?? ""));
    expect(recording?.state).toBe("returned");
  });

  test("DELIVERIES-4: bytes that the same writer delivered before come back with the title, and without blame", async () => {
    const before = await makeDraft(composer, alone());
    await signDraft(composer, before.deliveryId);
    const held = (await getDelivery(composer, { deliveryId: before.deliveryId })).versions[0];
    const { deliveryId } = await startDelivery(composer, { title: freshTitle() });
    await arriveMeasured({ deliveryId, personId: ailsa.id, sha256: held?.sha256 ?? "" });
    const view = await getDelivery(composer, { deliveryId });
    expect(view.versions[0]?.words).toBe(
      `You already delivered this as ${before.title}. One recording is held once; nothing else is needed.`,
    );
  });

  test("DELIVERIES-4: who was named as a writer by somebody else and has not accepted is questioned like anybody", async () => {
    const before = await makeDraft(composer, both());
    await signDraft(composer, before.deliveryId);
    const held = (await getDelivery(composer, { deliveryId: before.deliveryId })).versions[0];
    const { deliveryId } = await startDelivery(coWriter, { title: freshTitle() });
    await arriveMeasured({ deliveryId, personId: celandine.id, sha256: held?.sha256 ?? "" });
    expect((await getDelivery(coWriter, { deliveryId })).versions[0]?.state).toBe("measured");
  });

  test("DELIVERIES-4: the same bytes from somebody else are not returned by software", async () => {
    const before = await makeDraft(composer, alone());
    await signDraft(composer, before.deliveryId);
    const held = (await getDelivery(composer, { deliveryId: before.deliveryId })).versions[0];
    const { deliveryId } = await startDelivery(coWriter, { title: freshTitle() });
    await arriveMeasured({ deliveryId, personId: celandine.id, sha256: held?.sha256 ?? "" });
    expect((await getDelivery(coWriter, { deliveryId })).versions[0]?.state).toBe("measured");
  });
});

describe("DELIVERIES-5: shares and the writers' own answers", () => {
  test("DELIVERIES-5: only the writer named answers, from their own account, and the gate opens with the last answer", async () => {
    const { deliveryId } = await makeDraft(composer, both());
    await signDraft(composer, deliveryId);
    expect(await mailsAbout(deliveryId, "split-acceptance-request")).toHaveLength(1);
    const asked = await listSplitRequests(coWriter, {});
    expect(asked.map((request) => request.deliveryId)).toContain(deliveryId);
    const stranger = composerOf(libraryId, await makeWriter(libraryId, "99900000256"));
    await expect(answerSplit(stranger, { deliveryId, accept: true })).rejects.toThrow(NotFound);
    await expect(answerSplit(owner, { deliveryId, accept: true })).rejects.toThrow(NotFound);
    await expect(answerSplit(composer, { deliveryId, accept: true })).rejects.toThrow(Precondition);
    expect((await getDelivery(composer, { deliveryId })).writersAcceptedAt).toBeNull();
    await answerSplit(coWriter, { deliveryId, accept: true });
    expect((await getDelivery(composer, { deliveryId })).writersAcceptedAt).not.toBeNull();
  });

  test("DELIVERIES-5: a writer without IPI and address is nobody on the roster, and shown as unconfirmed", async () => {
    const { deliveryId } = await makeDraft(composer, [
      { name: ailsa.name, ipi: ailsa.ipi, share: "60.00" },
      { name: "Somebody Unknown", share: "40.00" },
    ]);
    await signDraft(composer, deliveryId);
    const unknown = (await getDelivery(composer, { deliveryId })).writers[1];
    expect(unknown).toMatchObject({ state: "asked", confirmed: false, isYou: false });
    const [row] = await db()
      .select()
      .from(deliveryWriters)
      .where(eq(deliveryWriters.id, unknown?.id ?? ""));
    expect(row?.personId).toBeNull();
  });

  test("DELIVERIES-5: one reminder a slot, and after fourteen days it goes back to the deliverer, who asks again", async () => {
    const { deliveryId } = await makeDraft(composer, both());
    await signDraft(composer, deliveryId);
    const daysAgo = (days: number) => new Date(businessNow().getTime() - days * 86_400_000);
    const set = (askedAt: Date, answerUntil: Date) =>
      db()
        .update(deliveryWriters)
        .set({ askedAt, answerUntil })
        .where(and(eq(deliveryWriters.deliveryId, deliveryId), eq(deliveryWriters.state, "asked")));
    expect(await findUnanswered(worker, {})).not.toContain(deliveryId);
    await set(daysAgo(3), daysAgo(-11));
    expect(await findUnanswered(worker, {})).toContain(deliveryId);
    const slot = { operationId: `remind:2026-05-21:${deliveryId}` };
    expect(await remindWriters(worker, { deliveryId }, slot)).toEqual({ reminded: 1, lapsed: 0 });
    await remindWriters(worker, { deliveryId }, slot);
    expect(await mailsAbout(deliveryId, "split-acceptance-request")).toHaveLength(2);
    await set(daysAgo(15), daysAgo(1));
    expect(await remindWriters(worker, { deliveryId })).toEqual({ reminded: 0, lapsed: 1 });
    const view = await getDelivery(composer, { deliveryId });
    expect(view.writers[1]?.state).toBe("lapsed");
    expect(await mailsAbout(deliveryId, "co-writer-not-accepted")).toHaveLength(1);
    await expect(answerSplit(coWriter, { deliveryId, accept: true })).rejects.toThrow(
      /time to answer is over/,
    );
    await askWriterAgain(composer, { deliveryId, writerId: view.writers[1]?.id ?? "" });
    await answerSplit(coWriter, { deliveryId, accept: true });
    expect((await getDelivery(composer, { deliveryId })).writersAcceptedAt).not.toBeNull();
  });
});

describe("DELIVERIES-6: when a family lists", () => {
  const listing = async (deliveryId: string) => {
    await tryListing(worker, { deliveryId });
    return (await getDelivery(composer, { deliveryId })).state;
  };

  test("DELIVERIES-6: clear, accepted by the writers and by the library: each alone is not enough", async () => {
    const { deliveryId } = await makeDraft(composer, both());
    await signDraft(composer, deliveryId);
    expect(await listing(deliveryId)).toBe("delivered");
    await acceptEditorial(owner, { deliveryId });
    expect(await listing(deliveryId)).toBe("delivered");
    await answerSplit(coWriter, { deliveryId, accept: true });
    expect(await listing(deliveryId)).toBe("delivered");
    await letThrough(deliveryId);
    expect(await listing(deliveryId)).toBe("listed");
    const [row] = await db().select().from(deliveries).where(eq(deliveries.id, deliveryId));
    const [family] = await db()
      .select()
      .from(families)
      .where(eq(families.id, row?.familyId ?? ""));
    expect(family?.state).toBe("listed");
  });

  test("DELIVERIES-6: a version that clears later joins by the same call", async () => {
    const { deliveryId } = await makeDraft(composer, alone());
    const bed = await arriveMeasured({ deliveryId, personId: ailsa.id, name: "Work_bed.wav" });
    await signDraft(composer, deliveryId);
    await db().update(deliveryVersions).set({ state: "held" }).where(eq(deliveryVersions.id, bed));
    await letThrough(deliveryId);
    await acceptEditorial(owner, { deliveryId });
    expect(await listing(deliveryId)).toBe("listed");
    const states = async () =>
      (await getDelivery(composer, { deliveryId })).versions.map((version) => version.state);
    expect(await states()).toEqual(["listed", "held"]);
    await db().update(deliveryVersions).set({ state: "screening" }).where(eq(deliveryVersions.id, bed));
    await letThrough(deliveryId);
    await listing(deliveryId);
    expect(await states()).toEqual(["listed", "listed"]);
  });
});

describe("DELIVERIES-7: who may add versions to a family, and who sees a delivery at all", () => {
  test("DELIVERIES-7: its accepted writer may; another composer of the library is told that there is no such family", async () => {
    const { deliveryId } = await makeDraft(composer, alone());
    await signDraft(composer, deliveryId);
    const [row] = await db().select().from(deliveries).where(eq(deliveries.id, deliveryId));
    const linkedFamilyId = row?.familyId ?? "";
    const theirs = await makeDraft(
      coWriter,
      [{ name: celandine.name, ipi: celandine.ipi, share: "100.00" }],
      { linkedFamilyId },
    );
    await expect(signDraft(coWriter, theirs.deliveryId)).rejects.toThrow(NotFound);
    const own = await makeDraft(composer, alone(), { linkedFamilyId });
    expect((await signDraft(composer, own.deliveryId)).familyId).toBe(linkedFamilyId);
  });

  test("DELIVERIES-7: a writer who was named and has not accepted may not add to it yet", async () => {
    const { deliveryId } = await makeDraft(composer, both());
    await signDraft(composer, deliveryId);
    const [row] = await db().select().from(deliveries).where(eq(deliveries.id, deliveryId));
    const linked = { linkedFamilyId: row?.familyId ?? "" };
    const own = [{ name: celandine.name, ipi: celandine.ipi, share: "100.00" }];
    const theirs = await makeDraft(coWriter, own, linked);
    await expect(signDraft(coWriter, theirs.deliveryId)).rejects.toThrow(NotFound);
    await answerSplit(coWriter, { deliveryId, accept: true });
    expect((await signDraft(coWriter, theirs.deliveryId)).familyId).toBe(linked.linkedFamilyId);
  });

  test("another composer's delivery, and one of another library, answer like one that does not exist", async () => {
    const { deliveryId, versionId } = await makeDraft(composer, alone());
    const elsewhere: ActorOf<"owner"> = { ...owner, libraryId: await makeLibrary() };
    const stranger = composerOf(libraryId, await makeWriter(await makeLibrary(), "99900000452"));
    const missing = await getDelivery(composer, { deliveryId: "del_none" }).catch((error: unknown) => error);
    for (const actor of [coWriter, elsewhere, stranger]) {
      const answer = await getDelivery(actor, { deliveryId }).catch((error: unknown) => error);
      expect(answer).toEqual(missing);
      expect(answer).toBeInstanceOf(NotFound);
    }
    await expect(setVersion(coWriter, { deliveryId, versionId, versionRole: "bed" })).rejects.toThrow(
      NotFound,
    );
    await expect(saveDraft(owner, { deliveryId, draft: { bpm: 1 } })).rejects.toThrow(NotFound);
  });

  test("a paper is read by its deliverer and library; a co-writer does not see it", async () => {
    const { deliveryId } = await makeDraft(composer, both());
    await signDraft(composer, deliveryId);
    const key = `paper-${deliveryId}`;
    const arrive = () =>
      paperArrived(worker, {
        deliveryId,
        personId: ailsa.id,
        key,
        name: "receipt.pdf",
        mime: "application/pdf",
        sizeBytes: 3,
      });
    await arrive();
    await arrive();
    expect((await getDelivery(composer, { deliveryId })).papers).toHaveLength(1);
    expect(await readPaper(owner, { deliveryId, key })).toMatchObject({ name: "receipt.pdf" });
    expect((await getDelivery(coWriter, { deliveryId })).papers).toEqual([]);
    await expect(readPaper(coWriter, { deliveryId, key })).rejects.toThrow(NotFound);
    const other = await makeDraft(composer, alone());
    await expect(readPaper(composer, { deliveryId: other.deliveryId, key })).rejects.toThrow(NotFound);
  });
});
