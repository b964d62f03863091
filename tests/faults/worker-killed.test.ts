import "@/tests/support/database";
import { readdirSync, utimesSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { eq, isNull } from "drizzle-orm";
import { afterAll, beforeAll, expect, test } from "vitest";
import { db } from "@/db/client";
import { deliveryVersions } from "@/db/schema/deliveries";
import { jobs, mailOutbox } from "@/db/schema/infrastructure";
import { caseGroups, cases } from "@/db/schema/review";
import {
  certificates,
  indexHead,
  indexLog,
  recordingFingerprints,
  screeningRuns,
} from "@/db/schema/screening";
import { renderVersion } from "@/fixtures/audio";
import { deliverOne, makeComposer, type Sound } from "@/tests/support/deliver";
import { makeLibrary } from "@/tests/support/make";
import { type StandIns, startStandIns } from "@/tests/support/world";
import { randomInstants, sleep } from "./random-instants";
import { lapseLeases, queueIsEmpty, spawnWorker, type WorkerProcess } from "./workers";

/*
 * Recordings of ten seconds are handed in one after the other, through store, draft and signature, while the worker process
 * is killed at random instants, each time followed by another. Every second recording is a copy of the one before it from
 * somebody else, so that cases and their listening are under way too when a worker dies.
 */
const KILLS = 20;
/** So that no job is killed as often as it may be tried: that would rightly be shown as failed. */
const KILLS_PER_RECORDING = 2;
const LENGTH_S = 10;
const CUES = [1, 2, 4, 8, 9, 10, 17, 19, 21, 24];

let standIns: StandIns;
let composers: Awaited<ReturnType<typeof makeComposer>>[];
let working: WorkerProcess;
let waiting: WorkerProcess;
const handedIn: { deliveryId: string; isCopy: boolean }[] = [];
const sounds = new Map<number, Sound>();

/** The last ten seconds of a short rendition; a copy is a little quieter, so that its bytes are its own. */
function ending(cue: number, gain: number): Sound {
  const whole = sounds.get(cue) ?? renderVersion(cue, "full", { seconds: 25 });
  sounds.set(cue, whole);
  const from = whole.channels[0].length - LENGTH_S * whole.sampleRateHz;
  const cut = (channel: Float32Array) =>
    channel.slice(from).map((value, at) => gain * value * Math.min(1, at / 4800));
  return { ...whole, channels: [cut(whole.channels[0]), cut(whole.channels[1])] };
}

async function handIn(round: number): Promise<{ deliveryId: string; isCopy: boolean }> {
  const isCopy = round % 2 === 1;
  const composer = composers[isCopy ? 1 : 0];
  const cue = CUES[Math.floor(round / 2)];
  if (!composer || !cue) throw new Error("no composer or cue for this round");
  const deliveryId = await deliverOne(composer, {
    title: `Round ${round} ${isCopy ? "again" : "first"}`,
    sound: ending(cue, isCopy ? 0.8 : 0.9),
    folder: standIns.folder,
    drain: queueIsEmpty,
  });
  return { deliveryId, isCopy };
}

beforeAll(async () => {
  standIns = await startStandIns();
  const libraryId = await makeLibrary();
  composers = [await makeComposer(libraryId, "99900000158"), await makeComposer(libraryId, "99900000256")];
  working = spawnWorker();
  await working.begin();
  waiting = spawnWorker();
});
afterAll(async () => {
  await working?.kill();
  await waiting?.kill();
});

const countEach = (names: readonly string[]) =>
  Object.fromEntries([...new Set(names)].map((name) => [name, names.filter((one) => one === name).length]));

async function expectOneOfEach({ deliveryId, isCopy }: (typeof handedIn)[number]): Promise<void> {
  const [version, ...more] = await db()
    .select()
    .from(deliveryVersions)
    .where(eq(deliveryVersions.deliveryId, deliveryId));
  expect(more).toEqual([]);
  const recordingId = version?.recordingId ?? "";
  const runs = await db().select().from(screeningRuns).where(eq(screeningRuns.recordingId, recordingId));
  expect(runs.map((run) => [run.outcome, run.supersededBy])).toEqual([[isCopy ? "held" : "clear", null]]);
  expect(version?.state).toBe(isCopy ? "held" : "clear");
  expect(
    await db().select().from(certificates).where(eq(certificates.recordingId, recordingId)),
  ).toHaveLength(1);
  const prints = await db()
    .select({ channel: recordingFingerprints.channel })
    .from(recordingFingerprints)
    .where(eq(recordingFingerprints.subjectId, recordingId));
  expect(new Set(prints.map((row) => row.channel)).size).toBe(prints.length);
  const numbers = await db().select().from(indexLog).where(eq(indexLog.subjectId, recordingId));
  expect(numbers.map((row) => row.change)).toEqual(["add"]);
  const opened = await db().select().from(cases).where(eq(cases.deliveryId, deliveryId));
  expect(opened).toHaveLength(isCopy ? 1 : 0);
  for (const one of opened)
    expect(await db().select().from(caseGroups).where(eq(caseGroups.caseId, one.id))).toHaveLength(1);
  const mails = await db().select().from(mailOutbox).where(eq(mailOutbox.subjectId, deliveryId));
  expect(mails.map((mail) => [mail.template, mail.state])).toEqual([["delivery-receipt", "sent"]]);
}

async function expectWhole(): Promise<void> {
  for (const one of handedIn) await expectOneOfEach(one);

  expect(await db().select().from(jobs).where(eq(jobs.state, "failed"))).toEqual([]);
  const log = await db().select({ seq: indexLog.seq }).from(indexLog);
  const [head] = await db().select().from(indexHead).where(eq(indexHead.name, "index"));
  expect(log.map((row) => row.seq).sort((a, b) => a - b)).toEqual(
    Array.from({ length: handedIn.length }, (_, index) => index + 1),
  );
  expect(head?.seq).toBe(handedIn.length);
  const current = await db().select().from(screeningRuns).where(isNull(screeningRuns.supersededBy));
  expect(current).toHaveLength(handedIn.length);

  // The far end's own book: what the mail service was made to send.
  const answer = await fetch(`${standIns.mail.url}/inbox`);
  const { mails } = (await answer.json()) as { mails: { subject: string }[] };
  expect(mails).toHaveLength(handedIn.length);
  expect(new Set(mails.map((mail) => mail.subject)).size).toBe(handedIn.length);
}

test(`a worker killed at ${KILLS} random instants while it measures and screens: nothing is lost and nothing is doubled`, {
  timeout: 600_000,
}, async () => {
  // The first is handed in undisturbed: it shows how long one takes here.
  const startedMs = performance.now();
  handedIn.push(await handIn(0));
  const roundMs = performance.now() - startedMs;
  const instants = randomInstants("worker killed");
  const heldAtDeath: string[] = [];
  let kills = 0;
  let isUnderWay = 0;
  const killing = (async () => {
    for (; kills < KILLS; kills++) {
      while (kills >= (handedIn.length + isUnderWay - 1) * KILLS_PER_RECORDING) await sleep(20);
      await sleep(instants.nextMs(roundMs));
      await working.kill();
      heldAtDeath.push(...(await lapseLeases()));
      working = waiting;
      await working.begin();
      waiting = spawnWorker();
    }
  })();
  while (kills < KILLS) {
    isUnderWay = 1;
    const made = await handIn(handedIn.length);
    isUnderWay = 0;
    handedIn.push(made);
  }
  await killing;
  await queueIsEmpty();
  const held = JSON.stringify(countEach(heldAtDeath));
  process.stdout.write(
    `worker killed: ${handedIn.length} recordings, ${Math.round(roundMs)} ms each undisturbed; held at death ${held}\n`,
  );
  await expectWhole();
});

test("workers killed after each job's work and before its last word: every job done twice leaves everything once", {
  timeout: 600_000,
}, async () => {
  const { affectedRows } = (await db().update(jobs).set({ state: "ready" }).where(eq(jobs.state, "done")))[0];
  expect(affectedRows).toBeGreaterThan(handedIn.length * 3);
  await queueIsEmpty();
  await expectWhole();
});

test("what killed workers left on the disk is gone when the next one starts, and only what is old", {
  timeout: 120_000,
}, async () => {
  const folder = join(standIns.folder, "media", "copies");
  const left = readdirSync(folder);
  const [old, fresh] = [join(folder, "left-by-the-dead.wav"), join(folder, "in-use.wav")];
  for (const path of [old, fresh]) writeFileSync(path, "bytes");
  const threeHoursAgo = new Date(Date.now() - 3 * 3_600_000);
  for (const path of [old, ...left.map((name) => join(folder, name))])
    utimesSync(path, threeHoursAgo, threeHoursAgo);
  await waiting.begin();
  expect(readdirSync(folder)).toEqual(["in-use.wav"]);
});
