import "@/tests/support/database";
import { join } from "node:path";
import { and, eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { jobs, mailOutbox } from "@/db/schema/infrastructure";
import { reportedWorks } from "@/db/schema/reports";
import { caseGroups, cases } from "@/db/schema/review";
import { indexLog } from "@/db/schema/screening";
import { renderReported, renderVersion, writeWav } from "@/fixtures/audio";
import { getDelivery } from "@/lib/deliveries";
import { deliveriesHandlers } from "@/lib/deliveries/jobs";
import { closeMeasuring } from "@/lib/deliveries/measuring/measure-version";
import { runWorker } from "@/lib/jobs";
import { type ActorOf, ANONYMOUS, system } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import {
  admitConfidential,
  confidentialArrived,
  confirmReporterAddress,
  judgeNotice,
  setEvidenceLevel,
  submitNotice,
} from "@/lib/reports";
import { reportsHandlers } from "@/lib/reports/jobs";
import { getCase } from "@/lib/review";
import { reviewHandlers } from "@/lib/review/jobs";
import { closeScreeningEngine } from "@/lib/screening/engine/engine";
import { screeningHandlers } from "@/lib/screening/jobs";
import { storeFile } from "@/lib/uploads";
import { deliverOne, makeComposer, type Sound } from "@/tests/support/deliver";
import { makeLibrary } from "@/tests/support/make";
import { makeModerator } from "@/tests/support/make-case";
import { type StandIns, startStandIns } from "@/tests/support/world";

/*
 * From a stranger's report to a held delivery, on real audio: the demonstration's synthesiser, the store's SDK, the real
 * worker and database. Forty seconds a recording; it says nothing of how little the engine finds in real music.
 */
const SECONDS = 40;
const handlers = { ...deliveriesHandlers, ...screeningHandlers, ...reviewHandlers, ...reportsHandlers };
const drain = () =>
  runWorker({ handlers, signal: new AbortController().signal, untilIdle: true, idleMs: 50 });
const REASONS = "The label's papers and both recordings support it. The passage is the same performance.";

let standIns: StandIns;
let libraryId: string;
let marketplace: ActorOf<"moderator">;

beforeAll(async () => {
  standIns = await startStandIns();
  libraryId = await makeLibrary();
  await makeModerator(libraryId);
  marketplace = await makeModerator(null);
});
afterAll(async () => {
  await closeScreeningEngine();
  await closeMeasuring();
});

/** A report as a stranger sends it, its recording handed in with the one-use ticket, and a moderator's decision. */
async function report(
  workTitle: string,
  sound: Sound,
  level: "claimed" | "supported",
): Promise<{ reportedWorkId: string; fileKey: string }> {
  const { noticeId } = await submitNotice(ANONYMOUS, {
    name: "A Label",
    capacity: "owner",
    email: `${workTitle.toLowerCase().replaceAll(" ", "-")}@test.example`,
    countryCode: "GB",
    workTitle,
    concerns: "recording",
    owner: "A Label",
    where: "we do not know yet",
    grounds: ["sample"],
    why: "We fear that parts of our recording are handed in under other names.",
    hasRecording: true,
    goodFaith: true,
    accuracy: true,
    signedName: "A Label",
    fromAddress: workTitle,
  });
  const [mail] = await db()
    .select({ props: mailOutbox.props })
    .from(mailOutbox)
    .where(and(eq(mailOutbox.subjectId, noticeId), eq(mailOutbox.template, "report-confirm-address")));
  const secret = new URL(String(mail?.props.url)).searchParams.get("confirm") ?? "";
  const { uploadTicket } = await confirmReporterAddress(ANONYMOUS, { secret });
  await admitConfidential(ANONYMOUS, { ticket: uploadTicket ?? "", sizeBytes: 1, files: 1 });
  const path = join(standIns.folder, `${noticeId}.wav`);
  writeWav(path, sound);
  const fileKey = await storeFile(path, { name: `${noticeId}.wav`, type: "audio/wav" });
  await confidentialArrived(system("tests"), { noticeId, fileKey });
  const { reportedWorkId } = await judgeNotice(marketplace, {
    noticeId,
    decision: "accept",
    reasons: REASONS,
    level,
    holdTarget: false,
  });
  await drain();
  return { reportedWorkId: reportedWorkId ?? "", fileKey };
}

const part = (sound: Sound, fromS: number, toS: number): Sound => {
  const cut = (channel: Float32Array) =>
    channel.slice(Math.round(fromS * sound.sampleRateHz), Math.round(toS * sound.sampleRateHz));
  return { ...sound, channels: [cut(sound.channels[0]), cut(sound.channels[1])] };
};

/** Other music, with a stretch of the reported recording laid over it. */
function under(bed: Sound, over: Sound, atS: number): Sound {
  const lay = (index: 0 | 1) => {
    const from = Math.round(atS * bed.sampleRateHz);
    return bed.channels[index].map(
      (value, place) => 0.3 * value + 0.65 * (over.channels[index][place - from] ?? 0),
    );
  };
  return { ...bed, channels: [lay(0), lay(1)] };
}

const indexChanges = async (subjectId: string) =>
  (await db().select().from(indexLog).where(eq(indexLog.subjectId, subjectId)))
    .sort((a, b) => a.seq - b.seq)
    .map((row) => row.change);

async function outcome(title: string, sound: Sound, ipi: string) {
  const composer = await makeComposer(libraryId, ipi);
  const deliveryId = await deliverOne(composer, { title, sound, folder: standIns.folder, drain });
  const { ipi: _ipi, ...actor } = composer;
  const view = await getDelivery(actor, { deliveryId });
  const [row] = await db().select().from(cases).where(eq(cases.deliveryId, deliveryId));
  return { state: view.versions[0]?.state, view, row };
}

describe("a reported recording", () => {
  test("REPORTS-4: supported, it joins the index, and a delivery that contains fourteen seconds of it under other music is held for the marketplace", {
    timeout: 240_000,
  }, async () => {
    const reported = renderReported("RW-02", { seconds: SECONDS });
    const { reportedWorkId, fileKey } = await report("Copper Sparrow", reported, "supported");
    expect(await indexChanges(reportedWorkId)).toEqual(["add"]);
    const [work] = await db().select().from(reportedWorks).where(eq(reportedWorks.id, reportedWorkId));
    expect(work).toMatchObject({ fingerprinted: true, level: "supported" });

    const sound = under(renderVersion(17, "full", { seconds: SECONDS }), part(reported, 8, 22), 12);
    const { state, row, view } = await outcome("Under Other Music", sound, "99900000158");
    expect(state).toBe("held");
    expect(row?.libraryId).toBeNull();
    const [group] = await db()
      .select()
      .from(caseGroups)
      .where(eq(caseGroups.caseId, row?.id ?? ""));
    expect(group).toMatchObject({ referenceKind: "reported", referenceKey: reportedWorkId });
    const seen = await getCase(marketplace, { caseId: row?.id ?? "" });
    const [passage] = seen.groups[0]?.hits[0]?.passages ?? [];
    expect(passage?.startS).toBeGreaterThan(9);
    expect(passage?.endS).toBeLessThan(29);
    await expect(getCase(await makeModerator(libraryId), { caseId: row?.id ?? "" })).rejects.toThrow(
      NotFound,
    );
    // Neither the reporter, nor the work's title, nor the confidential file reaches the deliverer.
    for (const secret of ["Copper Sparrow", "A Label", fileKey])
      expect(JSON.stringify(view)).not.toContain(secret);
  });

  test("REPORTS-4: merely claimed, its recording is not compared, and the whole of it comes through clear", {
    timeout: 240_000,
  }, async () => {
    const claimed = renderReported("RW-04", { seconds: SECONDS });
    const { reportedWorkId } = await report("Meadow Signal", claimed, "claimed");
    expect(await indexChanges(reportedWorkId)).toEqual([]);
    const { state, row } = await outcome("The Claimed One", claimed, "99900000256");
    expect(state).toBe("clear");
    expect(row).toBeUndefined();
  });

  test("REPORTS-4: lowered to claimed it leaves the index, and the whole of it comes through clear", {
    timeout: 240_000,
  }, async () => {
    const lowered = renderReported("RW-01", { seconds: SECONDS });
    const { reportedWorkId } = await report("Harbour Without Lamps", lowered, "supported");
    await setEvidenceLevel(marketplace, {
      reportedWorkId,
      level: "claimed",
      words: "The papers turned out to concern another recording.",
    });
    await drain();
    expect(await indexChanges(reportedWorkId)).toEqual(["add", "remove"]);
    const { state } = await outcome("The Lowered One", lowered, "99900000354");
    expect(state).toBe("clear");
  });

  test("no job of it failed", async () => {
    expect(await db().select().from(jobs).where(eq(jobs.state, "failed"))).toEqual([]);
  });
});
