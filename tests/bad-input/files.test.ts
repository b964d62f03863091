import "@/tests/support/database";
import { execFileSync } from "node:child_process";
import { readFileSync, truncateSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { recordings } from "@/db/schema/catalogue";
import { deliveryVersions } from "@/db/schema/deliveries";
import { cases } from "@/db/schema/review";
import { certificates, screeningRuns } from "@/db/schema/screening";
import { renderVersion, writeWav } from "@/fixtures/audio";
import { measureFile } from "@/lib/audio";
import {
  fileArrived,
  getDelivery,
  removeVersion,
  saveDraft,
  setVersion,
  startDelivery,
} from "@/lib/deliveries";
import { system } from "@/lib/kernel/actor";
import { storeFile } from "@/lib/uploads";
import { queueIsEmpty, spawnWorker, type WorkerProcess } from "@/tests/faults/workers";
import { makeComposer, type Sound } from "@/tests/support/deliver";
import { makeLibrary } from "@/tests/support/make";
import { composerOf, freshTitle, signDraft, WHOLE_DRAFT } from "@/tests/support/make-delivery";
import { type StandIns, startStandIns } from "@/tests/support/world";

/*
 * What is no good master, handed in as one: stored through the store's SDK, announced, and taken by a worker in a process of
 * its own. README.md says where the other rows are proved.
 */
const RATE_HZ = 48_000;
let standIns: StandIns;
let composer: Awaited<ReturnType<typeof makeComposer>>;
let worker: WorkerProcess;

const at = (name: string) => join(standIns.folder, name);
const ffmpeg = (...args: string[]) => execFileSync("ffmpeg", ["-v", "error", "-y", ...args]);

beforeAll(async () => {
  standIns = await startStandIns();
  composer = await makeComposer(await makeLibrary(), "99900000158");
  worker = spawnWorker();
  await worker.begin();
  writeWav(at("good.wav"), ending());
});
afterAll(() => worker?.kill());

/** Ten seconds of music that pass the checks. */
function ending(): Sound {
  const whole = renderVersion(1, "full", { seconds: 25 });
  const cut = (channel: Float32Array) =>
    channel.slice(-10 * RATE_HZ).map((value, index) => value * Math.min(1, index / 4800));
  return { ...whole, channels: [cut(whole.channels[0]), cut(whole.channels[1])] };
}

/** A draft with everything filled in and these files; resolves when the worker has taken them all. */
async function handIn(files: readonly { path: string; name: string }[]) {
  const actor = composerOf(composer.libraryId, { id: composer.personId, name: composer.name });
  const title = freshTitle();
  const writers = [{ name: composer.name, ipi: composer.ipi, email: "", role: "C", share: "100.00" }];
  const { deliveryId } = await startDelivery(actor, { title });
  await saveDraft(actor, { deliveryId, draft: { ...WHOLE_DRAFT, title, writers, publishers: [] } });
  for (const { path, name } of files) {
    const key = await storeFile(path, { name, type: "audio/wav" });
    const file = { deliveryId, personId: composer.personId, key, name, sizeBytes: 1 };
    await fileArrived(system("tests"), file);
  }
  await queueIsEmpty();
  const { versions } = await getDelivery(actor, { deliveryId });
  return {
    actor,
    deliveryId,
    versions,
    words: Object.fromEntries(versions.map((one) => [one.fileName, one])),
  };
}

describe("a file that is not audio, or claims another type than its bytes", () => {
  test("is refused with what was found and what is accepted; the good file beside it stays, and can be signed without it", async () => {
    writeFileSync(at("paper"), `%PDF-1.7\n${"x".repeat(900)}`);
    writeFileSync(at("program"), Buffer.concat([Buffer.from("\x7fELF", "latin1"), Buffer.alloc(2000, 1)]));
    ffmpeg("-i", at("good.wav"), "-b:a", "192k", at("lossy.mp3"));
    const { actor, deliveryId, versions } = await handIn([
      { path: at("good.wav"), name: "Good_full.wav" },
      { path: at("paper"), name: "Contract_bed.wav" },
      { path: at("program"), name: "Setup_30.wav" },
      { path: at("lossy.mp3"), name: "Lossy_60.wav" },
    ]);
    expect(versions.map((version) => version.state)).toEqual([
      "measured",
      "unreadable",
      "unreadable",
      "returned",
    ]);
    expect(versions[1]?.words).toMatch(/is a PDF document, not audio\. Accepted are WAV, .*AIFF and FLAC/);
    expect(versions[2]?.words).toMatch(/not audio\. Accepted are WAV/);
    expect(versions[3]?.words).toContain("T02");
    await expect(signDraft(actor, deliveryId)).rejects.toThrow(
      "Contract_bed.wav cannot be read: replace it or take it out. Everything else is kept.",
    );
    const after = await getDelivery(actor, { deliveryId });
    expect(after.versions.map((version) => version.state)).toEqual(versions.map((version) => version.state));
    expect(after.draft.description).toBe(WHOLE_DRAFT.description);
    for (const { id: versionId } of versions.slice(1)) await removeVersion(actor, { deliveryId, versionId });
    expect(await signDraft(actor, deliveryId)).toMatchObject({ versions: 1 });
  });
});

describe("truncated or damaged audio", () => {
  test("says how far it can be read, and is never screened as if it were whole", async () => {
    const good = readFileSync(at("good.wav"));
    writeFileSync(at("half.wav"), good.subarray(0, Math.floor(good.length / 2)));
    ffmpeg("-i", at("good.wav"), "-sample_fmt", "s32", at("good.flac"));
    const flac = readFileSync(at("good.flac"));
    writeFileSync(at("half.flac"), flac.subarray(0, Math.floor(flac.length / 2)));
    const noisy = Buffer.from(flac);
    for (let index = 0; index < 4096; index++)
      noisy[Math.floor(flac.length / 2) + index] = (index * 197 + 91) & 255;
    writeFileSync(at("noisy.flac"), noisy);
    const { actor, deliveryId, versions } = await handIn([
      { path: at("half.wav"), name: "Half_full.wav" },
      { path: at("half.flac"), name: "Half_bed.flac" },
      { path: at("noisy.flac"), name: "Noisy_60.flac" },
    ]);
    expect(versions.map((version) => version.state)).toEqual(["unreadable", "unreadable", "unreadable"]);
    const readable = versions.map((version) =>
      Number(/(\d+\.\d\d) s of (?:10\.00) s can be read/.exec(version.words)?.[1]),
    );
    // Half of the bytes of a WAV is half of its ten seconds; of a FLAC it depends on the music.
    expect(readable[0]).toBeCloseTo(5, 1);
    for (const seconds of readable) {
      expect(seconds).toBeGreaterThan(0);
      expect(seconds).toBeLessThan(10);
    }
    await expect(signDraft(actor, deliveryId)).rejects.toMatchObject({ code: "invalid" });
    expect(versions.map((version) => version.recordingId ?? null)).toEqual([null, null, null]);
  });
});

function wave64Header(seconds: number): Buffer {
  const bytes = BigInt(seconds) * BigInt(RATE_HZ * 6);
  const head = Buffer.alloc(80);
  head.write("RF64", 0, "latin1");
  head.writeUInt32LE(0xffffffff, 4);
  head.write("WAVEds64", 8, "latin1");
  head.writeUInt32LE(28, 16);
  head.writeBigUInt64LE(bytes + 72n, 20);
  head.writeBigUInt64LE(bytes, 28);
  head.writeBigUInt64LE(bytes / 6n, 36);
  head.write("fmt ", 48, "latin1");
  head.writeUInt32LE(16, 52);
  head.writeUInt16LE(1, 56);
  head.writeUInt16LE(2, 58);
  head.writeUInt32LE(RATE_HZ, 60);
  head.writeUInt32LE(RATE_HZ * 6, 64);
  head.writeUInt16LE(6, 68);
  head.writeUInt16LE(24, 70);
  head.write("data", 72, "latin1");
  head.writeUInt32LE(0xffffffff, 76);
  return head;
}

const residentBytes = () =>
  Number(/VmRSS:\s+(\d+)/.exec(readFileSync(`/proc/${worker.pid}/status`, "utf8"))?.[1]) * 1024;

/** The worker's greatest growth while `work` runs. */
async function workerGrowth<T>(work: () => Promise<T>): Promise<{ result: T; bytes: number }> {
  const before = residentBytes();
  let most = before;
  const timer = setInterval(() => {
    most = Math.max(most, residentBytes());
  }, 20);
  const result = await work();
  clearInterval(timer);
  return { result, bytes: most - before };
}

describe("a huge file, a very long one, a decompression bomb", () => {
  test("a header that declares ten hours is refused before anything is decoded", async () => {
    // EBU Tech 3306: RF64 with its sizes in ds64.
    writeFileSync(at("declared.wav"), Buffer.concat([wave64Header(36_000), Buffer.alloc(600_000)]));
    const { versions } = await handIn([{ path: at("declared.wav"), name: "Endless_full.wav" }]);
    expect(versions[0]?.state).toBe("unreadable");
    expect(versions[0]?.words).toContain("the limit is 15300 s");
  });

  test("a file over eight gibibytes is refused at its size, whatever its header says", async () => {
    // Sparse: it takes no disk, and reading it through would take minutes.
    writeFileSync(at("sparse.wav"), wave64Header(60));
    truncateSync(at("sparse.wav"), 9 * 2 ** 30);
    await expect(measureFile(at("sparse.wav"))).rejects.toMatchObject({
      code: "too-large",
      sizeBytes: 9 * 2 ** 30,
    });
  });

  test("five hours in a few megabytes that declare no length are refused on the way, in bounded memory", {
    timeout: 300_000,
  }, async () => {
    ffmpeg("-f", "lavfi", "-i", "anullsrc=r=8000:cl=mono", "-t", "18000", "-c:a", "flac", at("bomb.flac"));
    const bomb = readFileSync(at("bomb.flac"));
    // STREAMINFO's count of samples, the last 36 bits before its MD5: 0 is "unknown" (RFC 9639, 8.2).
    bomb[21] = (bomb[21] ?? 0) & 0xf0;
    bomb.fill(0, 22, 26);
    writeFileSync(at("bomb.flac"), bomb);
    const decodedBytes = 18_000 * 8000 * 4;
    expect(decodedBytes / bomb.length).toBeGreaterThan(100);
    // The thread that measures is there already: its own start is no part of the growth.
    await handIn([{ path: at("good.wav"), name: "Before_full.wav" }]);
    const { result, bytes } = await workerGrowth(() =>
      handIn([{ path: at("bomb.flac"), name: "Bomb_full.flac" }]),
    );
    expect(result.versions[0]?.state).toBe("unreadable");
    expect(result.versions[0]?.words).toContain("the limit is 15300 s");
    process.stdout.write(
      `bomb: ${bomb.length} bytes declare nothing and decode to ${decodedBytes}; the worker grew by ${bytes}\n`,
    );
    expect(bytes).toBeLessThan(decodedBytes / 2);
  });
});

describe("silence, a tone, two seconds", () => {
  const wave = (seconds: number, value: (index: number) => number): Sound => {
    const channel = Float32Array.from({ length: seconds * RATE_HZ }, (_, index) => value(index));
    return { sampleRateHz: RATE_HZ, channels: [channel, channel.map((one) => one * 0.9)] };
  };
  const tone = (index: number) => 0.2 * Math.sin((2 * Math.PI * 440 * index) / RATE_HZ);

  test.each([
    ["silence", () => wave(12, () => 0)],
    ["a tone", () => wave(12, tone)],
    [
      "two seconds of music",
      () => {
        const sound = ending();
        const cut = (channel: Float32Array) => channel.slice(0, 2 * RATE_HZ);
        return { ...sound, channels: [cut(sound.channels[0]), cut(sound.channels[1])] } as Sound;
      },
    ],
  ])("%s is not comparable, never clear and never called original", async (name, make) => {
    const path = at(`${name.replaceAll(" ", "-")}.wav`);
    writeWav(path, make());
    const { actor, deliveryId, versions } = await handIn([{ path, name: "Nothing_full.wav" }]);
    const versionId = versions[0]?.id ?? "";
    await setVersion(actor, { deliveryId, versionId, versionRole: "full" });
    await queueIsEmpty();
    await signDraft(actor, deliveryId);
    await queueIsEmpty();
    const view = await getDelivery(actor, { deliveryId });
    expect(["held", "returned"]).toContain(view.versions[0]?.state);
    const [row] = await db().select().from(deliveryVersions).where(eq(deliveryVersions.id, versionId));
    const recordingId = row?.recordingId ?? "";
    const [run] = await db().select().from(screeningRuns).where(eq(screeningRuns.recordingId, recordingId));
    expect(run?.outcome).toBe("not comparable");
    expect(run?.outcomeWords).toMatch(/^It could not be compared: .*That says nothing for or against it\.$/);
    const [certificate] = await db()
      .select()
      .from(certificates)
      .where(eq(certificates.recordingId, recordingId));
    expect(JSON.stringify(certificate?.body)).not.toMatch(/\b(clear|original)\b/i);
    const [recording] = await db().select().from(recordings).where(eq(recordings.id, recordingId));
    expect(["clear", "listed"]).not.toContain(recording?.state);
    expect(await db().select().from(cases).where(eq(cases.deliveryId, deliveryId))).toHaveLength(
      view.versions[0]?.state === "held" ? 1 : 0,
    );
  });
});
