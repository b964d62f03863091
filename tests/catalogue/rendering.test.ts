import "@/tests/support/database";
import { execFileSync } from "node:child_process";
import { createHash } from "node:crypto";
import { createWriteStream, readFileSync } from "node:fs";
import { join } from "node:path";
import { pipeline } from "node:stream/promises";
import { eq } from "drizzle-orm";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { db } from "@/db/client";
import { families, licensedMasters, recordings } from "@/db/schema/catalogue";
import { auditLog } from "@/db/schema/kernel";
import { writeWav } from "@/fixtures/audio";
import { probe } from "@/lib/audio";
import { recordMaster, recordPreview } from "@/lib/catalogue";
import { catalogueHandlers } from "@/lib/catalogue/jobs";
import { closeRendering } from "@/lib/catalogue/rendering/render-recording";
import { enqueue, runWorker } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { readStored, storeFile } from "@/lib/uploads";
import { makeFamily, makeLibrary, makeRecording } from "@/tests/support/make";
import { type StandIns, startStandIns } from "@/tests/support/world";

const RATE_HZ = 48_000;
const SECONDS = 20;
const QUIET_DB = -36;
const LOUD_DB = -12;
const actor = system("test");
let standIns: StandIns;
let recordingId: string;
let masterPath: string;

/** Ten quiet seconds and ten loud ones of a 997 Hz tone. */
function tone(): Float32Array {
  return Float32Array.from({ length: RATE_HZ * SECONDS }, (_, i) => {
    const level = 10 ** ((i < (RATE_HZ * SECONDS) / 2 ? QUIET_DB : LOUD_DB) / 20);
    return level * Math.sin((2 * Math.PI * 997 * i) / RATE_HZ);
  });
}

const renderBoth = async () => {
  await db().transaction(async (tx) => {
    await enqueue(tx, "catalogue.renderPreview", { recordingId });
    await enqueue(tx, "catalogue.renderMaster", { recordingId });
  });
  await runWorker({
    handlers: catalogueHandlers,
    signal: new AbortController().signal,
    untilIdle: true,
    idleMs: 50,
  });
};

const stored = async (key: string, name: string): Promise<string> => {
  const path = join(standIns.folder, name);
  await pipeline((await readStored(key)).body, createWriteStream(path));
  return path;
};

const ffprobe = (path: string) =>
  JSON.parse(
    execFileSync("ffprobe", ["-v", "error", "-show_streams", "-show_format", "-of", "json", path], {
      encoding: "utf8",
    }),
  ) as { streams: Record<string, string>[]; format: { tags?: Record<string, string> } };

const rowOf = async () => {
  const [row] = await db().select().from(recordings).where(eq(recordings.id, recordingId));
  if (!row) throw new Error("no recording");
  return row;
};
const masterOf = async () => {
  const [row] = await db().select().from(licensedMasters).where(eq(licensedMasters.recordingId, recordingId));
  if (!row) throw new Error("no master");
  return row;
};

beforeAll(async () => {
  standIns = await startStandIns();
  masterPath = join(standIns.folder, "delivered.wav");
  const channel = tone();
  writeWav(masterPath, { sampleRateHz: RATE_HZ, channels: [channel, channel] });
  const fileKey = await storeFile(masterPath, { name: "delivered.wav", type: "audio/wav" });
  const libraryId = await makeLibrary({ name: "Saltmarrow Music Library" });
  const familyId = await makeFamily({
    libraryId,
    title: "Kettle Before Dawn",
    catalogueNumber: "ZZ0008",
    sections: [
      { atS: 0, label: "quiet", energy: 1 },
      { atS: SECONDS / 2, label: "loud", energy: 5 },
    ],
  });
  recordingId = await makeRecording({
    familyId,
    libraryId,
    fileKey,
    fileName: "delivered.wav",
    isrc: "XXDM12599908",
    durationS: SECONDS,
    loudnessLufs: -15,
    loudnessRangeLu: 3,
    truePeakDbtp: -12,
  });
  await db().update(families).set({ headRecordingId: recordingId }).where(eq(families.id, familyId));
  await renderBoth();
}, 120_000);

afterAll(closeRendering);

describe("the preview of a recording", () => {
  test("is an MP3 of at least 192 kbit/s at 48 kHz that names nobody", async () => {
    const { previewKey } = await rowOf();
    const { streams, format } = ffprobe(await stored(previewKey ?? "", "preview.mp3"));
    expect(streams[0]).toMatchObject({ codec_name: "mp3", sample_rate: "48000" });
    expect(Number(streams[0]?.bit_rate)).toBeGreaterThanOrEqual(192_000);
    expect(format.tags?.title).toBeUndefined();
  });

  test("starts and ends with its master, to the sample, once its gapless tag is honoured", async () => {
    const { previewKey } = await rowOf();
    const path = await stored(previewKey ?? "", "preview.mp3");
    const samples = execFileSync("ffmpeg", ["-v", "error", "-i", path, "-f", "s16le", "-ac", "1", "-"], {
      maxBuffer: 1e8,
    });
    expect(samples.length / 2).toBe(RATE_HZ * SECONDS);
  });

  test("brings the soundings of its sections: a 997 Hz tone at full scale in both channels is 0 LUFS", async () => {
    // ITU-R BS.1770-5, Annex 1: a 0 dBFS sine of 997 Hz in one of the front channels reads −3.01 LKFS.
    const { sectionLoudness } = await rowOf();
    expect(sectionLoudness).toHaveLength(2);
    expect(sectionLoudness?.[0]).toBeCloseTo(QUIET_DB, 0);
    expect(sectionLoudness?.[1]).toBeCloseTo(LOUD_DB, 0);
  });
});

describe("the licensed master", () => {
  test("is a 48 kHz, 24-bit WAV with bext, and its stored hash is of its bytes", async () => {
    const master = await masterOf();
    const path = await stored(master.fileKey, "master.wav");
    const facts = await probe(path);
    expect(facts).toMatchObject({ container: "WAV", sampleRateHz: 48_000, bitDepth: 24, channels: 2 });
    expect(facts.bext).toMatchObject({
      description: "Kettle Before Dawn, full (ZZ0008)",
      originator: "Saltmarrow Music Library",
      originatorReference: "XXDM12599908",
      loudnessLufs: -15,
      maxTruePeakDbtp: -12,
    });
    const bytes = readFileSync(path);
    expect(createHash("sha256").update(bytes).digest("hex")).toBe(master.sha256);
    expect(bytes.length).toBe(master.sizeBytes);
    expect(master.durationSamples).toBe(RATE_HZ * SECONDS);
  });

  test("holds the delivered samples to the bit", async () => {
    const path = await stored((await masterOf()).fileKey, "master-again.wav");
    const raw = (file: string) =>
      createHash("sha256")
        .update(execFileSync("ffmpeg", ["-v", "error", "-i", file, "-f", "s24le", "-"], { maxBuffer: 1e8 }))
        .digest("hex");
    expect(raw(path)).toBe(raw(masterPath));
  });
});

describe("rendering again", () => {
  test("CATALOGUE-3: changes nothing: the first preview and the first master stay", async () => {
    const before = [await rowOf(), await masterOf()];
    await renderBoth();
    expect([await rowOf(), await masterOf()]).toEqual(before);
  });

  test("CATALOGUE-3: of two renderings that raced, the second is told that it was not kept", async () => {
    const before = await masterOf();
    await expect(
      recordPreview(actor, { recordingId, previewKey: "another", sectionLoudness: null }),
    ).resolves.toEqual({ kept: false });
    await expect(
      recordMaster(actor, {
        recordingId,
        fileKey: "another",
        sha256: "b".repeat(64),
        sizeBytes: 1,
        durationSamples: 1,
      }),
    ).resolves.toEqual({ kept: false });
    expect(await masterOf()).toEqual(before);
  });

  test("every rendering that was kept has its line in the audit log", async () => {
    const rows = await db().select().from(auditLog).where(eq(auditLog.subject, recordingId));
    const kept = rows.filter((row) => (row.detail as { kept?: boolean }).kept);
    expect(kept.map((row) => row.verb).sort()).toEqual(["catalogue.recordMaster", "catalogue.recordPreview"]);
  });
});
