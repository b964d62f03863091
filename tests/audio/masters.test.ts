import { execFileSync } from "node:child_process";
import { readFileSync, statSync } from "node:fs";
import { join } from "node:path";
import { beforeAll, describe, expect, it } from "vitest";
import {
  buildBext,
  decodeWhole,
  encodeFlac,
  encodePreview,
  measureFile,
  parseBext,
  probe,
  readBext,
  renderMaster,
} from "@/lib/audio";
import { MARK_FREE_S, MARK_S, markTimes } from "@/lib/audio/preview-mark";
import { wavHeader } from "@/lib/audio/wav-writer";
import { ffmpeg, tempFolder, writeFloatWav } from "./files";
import { CHORDS, song } from "./signals";

const folder = tempFolder();
const at = (name: string): string => join(folder, name);
const SECONDS = 40.123;

beforeAll(() => {
  for (const rateHz of [44100, 48000]) {
    const music = song({
      rateHz,
      bpm: 96,
      durationS: SECONDS,
      chords: [CHORDS.C, CHORDS.Am, CHORDS.Dm, CHORDS.G],
    });
    writeFloatWav(
      at("float.wav"),
      rateHz,
      music.map((c) => c.map((v) => v * 0.9)),
    );
    ffmpeg("-i", at("float.wav"), "-c:a", "pcm_s24le", at(`${rateHz}.wav`));
  }
});

const rawMd5 = (path: string): string =>
  execFileSync("ffmpeg", ["-nostdin", "-v", "error", "-i", path, "-f", "md5", "-c:a", "pcm_s24le", "-"])
    .toString()
    .trim();

describe("bext (EBU Tech 3285 v2)", () => {
  const fields = {
    description: "Salt on the Window Frame, full",
    originator: "Saltmarrow Music Library",
    originatorReference: "XXDM12300001",
    originationDate: "2026-05-18",
    originationTime: "09:00:00",
    timeReferenceSamples: 172_800_000n,
    loudnessLufs: -22.99,
    loudnessRangeLu: 7.2,
    maxTruePeakDbtp: -1.02,
    maxMomentaryLufs: -15.5,
    maxShortTermLufs: -18.25,
    codingHistory: "A=PCM,F=48000,W=24,M=stereo,T=original",
  };

  it("puts every field at its published offset", () => {
    const body = buildBext(fields);
    const view = new DataView(body.buffer);
    const text = (offset: number, length: number): string =>
      Buffer.from(body.subarray(offset, offset + length))
        .toString("latin1")
        .replace(/\0+$/, "");
    expect(text(0, 256)).toBe(fields.description);
    expect(text(256, 32)).toBe(fields.originator);
    expect(text(288, 32)).toBe(fields.originatorReference);
    expect(text(320, 10)).toBe("2026-05-18");
    expect(text(330, 8)).toBe("09:00:00");
    expect(view.getUint32(338, true)).toBe(172_800_000);
    expect(view.getUint16(346, true)).toBe(2);
    // Measured −22.99 LUFS is stored as −2299.
    expect([412, 414, 416, 418, 420].map((offset) => view.getInt16(offset, true))).toEqual([
      -2299, 720, -102, -1550, -1825,
    ]);
    expect(text(602, 100)).toMatch(/^A=PCM,F=48000.*\r\n$/);
    expect(body.length % 2).toBe(0);
    expect(body.slice(422, 602).every((byte) => byte === 0)).toBe(true);
  });

  it("comes back as it was written, loudness that was not measured as null", () => {
    const { loudnessRangeLu: _range, ...rest } = fields;
    expect(parseBext(buildBext(rest))).toMatchObject({ ...rest, loudnessRangeLu: null, version: 2 });
    expect(parseBext(new Uint8Array(601))).toBeNull();
  });

  it("is ASCII and of even size whatever the text", () => {
    for (const description of ["Ælva’s Łódź – “Été”", "日本", "x".repeat(400), ""]) {
      const body = buildBext({ description, codingHistory: `${description}!` });
      expect(body.length % 2).toBe(0);
      expect(body.slice(0, 256).every((byte) => byte < 127)).toBe(true);
    }
    expect(parseBext(buildBext({ description: "Ælva’s Łódź" }))!.description).toBe("AElva's Lodz");
  });

  it("is read by ffprobe in a rendered master", async () => {
    await renderMaster(at("48000.wav"), at("tagged.wav"), fields);
    const probed = JSON.parse(
      execFileSync("ffprobe", ["-v", "error", "-of", "json", "-show_format", at("tagged.wav")]).toString(),
    );
    expect(probed.format.tags).toMatchObject({
      comment: fields.description,
      encoded_by: fields.originator,
      originator_reference: fields.originatorReference,
      date: fields.originationDate,
      creation_time: fields.originationTime,
      time_reference: "172800000",
    });
    expect(await readBext(at("tagged.wav"))).toMatchObject(fields);
  });
});

describe("renderMaster", () => {
  it("AUDIO-7: copies 48 kHz 24 bit sample for sample, and gives the same bytes twice", async () => {
    const rendered = await renderMaster(at("48000.wav"), at("m1.wav"), { description: "one" });
    await renderMaster(at("48000.wav"), at("m2.wav"), { description: "one" });
    expect(rendered.converted).toBe(false);
    expect(rawMd5(at("m1.wav"))).toBe(rawMd5(at("48000.wav")));
    expect(readFileSync(at("m1.wav")).equals(readFileSync(at("m2.wav")))).toBe(true);
  });

  it("brings 44.1 kHz to 48 kHz in place: ffmpeg's own resampler differs by less than −60 dB", async () => {
    const soft = "lowpass=f=8000,lowpass=f=8000,lowpass=f=8000";
    ffmpeg("-i", at("44100.wav"), "-af", soft, "-c:a", "pcm_s24le", at("soft.wav"));
    const rendered = await renderMaster(at("soft.wav"), at("m3.wav"), {});
    expect(rendered).toMatchObject({
      converted: true,
      samples: Math.round((Math.round(SECONDS * 44100) * 48000) / 44100),
    });
    ffmpeg(
      "-i",
      at("soft.wav"),
      "-af",
      "aresample=48000:filter_size=128:cutoff=0.95",
      "-c:a",
      "pcm_f32le",
      at("swr.wav"),
    );
    const ours = (await decodeWhole(at("m3.wav"))).channels[0]!;
    const theirs = (await decodeWhole(at("swr.wav"))).channels[0]!;
    let apart = 0;
    let level = 0;
    for (let i = 2000; i < ours.length - 4000; i++) {
      apart += (ours[i]! - theirs[i]!) ** 2;
      level += ours[i]! ** 2;
    }
    expect(10 * Math.log10(apart / level)).toBeLessThan(-60);
  });

  it("becomes RF64 where the sizes do not fit in 32 bits", () => {
    const frames = 800_000_000;
    const head = wavHeader({ channels: 2, sampleRateHz: 48000, body: buildBext({}), frames });
    const view = new DataView(head.buffer);
    const id = (offset: number): string => Buffer.from(head.subarray(offset, offset + 4)).toString("latin1");
    // EBU Tech 3306: RF64, size −1, WAVE, then ds64 with RIFF size, data size and sample count.
    expect([id(0), id(8), id(12)]).toEqual(["RF64", "WAVE", "ds64"]);
    expect([view.getUint32(4, true), view.getUint32(head.length - 4, true)]).toEqual([
      0xffffffff, 0xffffffff,
    ]);
    expect(view.getBigUint64(20, true)).toBe(BigInt(head.length - 8 + frames * 6));
    expect(view.getBigUint64(28, true)).toBe(BigInt(frames * 6));
    expect(view.getBigUint64(36, true)).toBe(BigInt(frames));
    expect(wavHeader({ channels: 2, sampleRateHz: 48000, body: buildBext({}), frames: 10 })).toHaveLength(
      head.length,
    );
  });
});

describe("encodeFlac", () => {
  it("keeps every sample", async () => {
    await encodeFlac(at("48000.wav"), at("f.flac"));
    expect(rawMd5(at("f.flac"))).toBe(rawMd5(at("48000.wav")));
    expect(await probe(at("f.flac"))).toMatchObject({ container: "FLAC", bitDepth: 24 });
    expect(statSync(at("f.flac")).uid).toBe(process.getuid!());
  });
});

describe("preview", () => {
  it("has no mark in the first five seconds, then one every 15 to 25 s, the same each time", () => {
    const times = markTimes(600, "rec_1");
    expect(times).toEqual(markTimes(600, "rec_1"));
    expect(times).not.toEqual(markTimes(600, "rec_2"));
    expect(times[0]).toBeGreaterThanOrEqual(MARK_FREE_S);
    const gaps = times.slice(1).map((time, i) => time - times[i]!);
    for (const gap of gaps) expect(gap >= 15 && gap <= 25).toBe(true);
    expect(new Set(gaps.map((gap) => gap.toFixed(2))).size).toBeGreaterThan(gaps.length / 2);
    expect(times.at(-1)! + MARK_S).toBeLessThanOrEqual(600);
    for (const seed of ["a", "b", "c", "d"]) expect(markTimes(10, seed)).toHaveLength(1);
    expect(markTimes(5.5, "a")).toEqual([]);
  });

  it.each([44100, 48000])(
    "AUDIO-5: of a %d Hz master starts and ends with it to the sample",
    async (rateHz) => {
      const made = await encodePreview(at(`${rateHz}.wav`), at("preview.mp3"), { seed: "rec_7" });
      const preview = await decodeWhole(at("preview.mp3"));
      await renderMaster(at(`${rateHz}.wav`), at("preview-master.wav"), {});
      const master = await decodeWhole(at("preview-master.wav"));
      expect(preview.sampleRateHz).toBe(48000);
      expect(preview.channels[0]!.length).toBe(master.channels[0]!.length);
      expect(made.samples).toBe(master.channels[0]!.length);
      for (const fromS of [1, 20, SECONDS - 3])
        expect(lagSamples(master.channels[0]!, preview.channels[0]!, fromS)).toBe(0);
      // ffmpeg's decoder is a second witness of start and length.
      ffmpeg("-i", at("preview.mp3"), "-c:a", "pcm_f32le", at("witness.wav"));
      const witness = await decodeWhole(at("witness.wav"));
      expect(witness.channels[0]!.length).toBe(master.channels[0]!.length);
      expect(lagSamples(master.channels[0]!, witness.channels[0]!, 20)).toBe(0);
    },
  );

  it("is at least 192 kbit/s, peaks at or under −1 dBTP and carries its marks", async () => {
    const made = await encodePreview(at("48000.wav"), at("marked.mp3"), { seed: "rec_7" });
    await encodePreview(at("48000.wav"), at("plain.mp3"), { seed: "rec_7", unmarked: true });
    const bits = JSON.parse(
      execFileSync("ffprobe", ["-v", "error", "-of", "json", "-show_streams", at("marked.mp3")]).toString(),
    );
    expect(Number(bits.streams[0].bit_rate)).toBeGreaterThanOrEqual(192000);
    expect((await measureFile(at("marked.mp3"))).measures.truePeakDbtp!).toBeLessThanOrEqual(-1);
    const marked = (await decodeWhole(at("marked.mp3"))).channels[0]!;
    const plain = (await decodeWhole(at("plain.mp3"))).channels[0]!;
    const energy = (fromS: number): number => {
      let sum = 0;
      for (let i = Math.round(fromS * 48000); i < (fromS + MARK_S) * 48000; i++)
        sum += (marked[i]! - plain[i]!) ** 2;
      return sum;
    };
    expect(made.marksAtS.length).toBeGreaterThanOrEqual(1);
    for (const atS of made.marksAtS) expect(energy(atS)).toBeGreaterThan(20 * energy(2));
  });

  it("of a master that peaks at full scale is turned down", async () => {
    const hot = song({ rateHz: 48000, bpm: 120, durationS: 12, chords: [CHORDS.E] }).map((c) =>
      c.map((v) => Math.tanh(6 * v)),
    );
    writeFloatWav(at("hot.wav"), 48000, hot);
    const made = await encodePreview(at("hot.wav"), at("hot.mp3"), { seed: "hot" });
    expect(made.gainDb).toBeLessThan(-2);
    expect(made.truePeakDbtp).toBeLessThanOrEqual(-1);
  });
});

/** Lag at which a fifth of a second of `b` fits `a` best, by normalised correlation. */
function lagSamples(a: Float32Array, b: Float32Array, fromS: number): number {
  const from = Math.round(fromS * 48000);
  let best = { lag: 0, sum: -1 };
  for (let lag = -1500; lag <= 1500; lag++) {
    let product = 0;
    let energy = 1e-9;
    for (let i = from; i < from + 9600; i++) {
      const value = b[i + lag] ?? 0;
      product += a[i]! * value;
      energy += value * value;
    }
    const sum = product / Math.sqrt(energy);
    if (sum > best.sum) best = { lag, sum };
  }
  return best.lag;
}
