import { execFileSync } from "node:child_process";
import { copyFileSync, readFileSync, truncateSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { beforeAll, describe, expect, it } from "vitest";
import {
  blobSource,
  Damaged,
  decodeSource,
  decodeStream,
  decodeWhole,
  measureFile,
  NotAudio,
  probe,
  probeSource,
  TooLarge,
  TooLong,
  Truncated,
  UnsupportedAudio,
} from "@/lib/audio";
import { ffmpeg, tempFolder, writeFloatWav } from "./files";
import { CHORDS, song } from "./signals";

const folder = tempFolder();
const at = (name: string): string => join(folder, name);
const RATE = 44100;
const SECONDS = 5;

/** name, ffmpeg arguments, container, codec, bits that are exact (null: lossy) */
const FORMATS = [
  ["a.wav", ["-c:a", "pcm_s16le"], "WAV", "PCM", 16],
  ["b.wav", ["-c:a", "pcm_s24le"], "WAV", "PCM", 24],
  ["c.wav", ["-c:a", "pcm_s32le"], "WAV", "PCM", 32],
  ["d.wav", ["-c:a", "pcm_f32le"], "WAV", "IEEE float", 32],
  ["e.wav", ["-c:a", "pcm_f64le"], "WAV", "IEEE float", 64],
  ["f.wav", ["-c:a", "pcm_u8"], "WAV", "PCM", 8],
  ["g.wav", ["-c:a", "pcm_s24le", "-rf64", "always"], "RF64", "PCM", 24],
  ["h.aiff", ["-c:a", "pcm_s16be"], "AIFF", "PCM", 16],
  ["i.aiff", ["-c:a", "pcm_s24be"], "AIFF", "PCM", 24],
  ["j.aifc", ["-c:a", "pcm_s16le", "-f", "aiff"], "AIFC", "PCM", 16],
  ["k.aifc", ["-c:a", "pcm_f32be", "-f", "aiff"], "AIFC", "IEEE float", 32],
  ["l.flac", ["-c:a", "flac", "-sample_fmt", "s16"], "FLAC", "FLAC", 16],
  ["m.flac", ["-c:a", "flac", "-sample_fmt", "s32"], "FLAC", "FLAC", 24],
  ["n.oga", ["-c:a", "flac", "-f", "ogg"], "Ogg FLAC", "FLAC", null],
  ["o.m4a", ["-c:a", "alac"], "M4A", "ALAC", null],
  ["p.mp3", ["-b:a", "192k"], "MP3", "MPEG layer 3", null],
  ["q.ogg", ["-c:a", "libvorbis", "-q:a", "6"], "Ogg Vorbis", "Vorbis", null],
  ["r.opus", ["-c:a", "libopus", "-b:a", "192k"], "Ogg Opus", "Opus", null],
  ["s.m4a", ["-c:a", "aac", "-aac_pns", "0", "-b:a", "192k", "-movflags", "+faststart"], "M4A", "AAC", null],
  ["t.m4a", ["-c:a", "aac", "-aac_pns", "0", "-b:a", "192k"], "M4A", "AAC", null],
  ["u.aac", ["-c:a", "aac", "-aac_pns", "0", "-b:a", "192k"], "AAC", "AAC", null],
] as const;

beforeAll(() => {
  const [left, right] = song({ rateHz: RATE, bpm: 120, durationS: SECONDS, chords: [CHORDS.Am, CHORDS.F] });
  writeFloatWav(at("source.wav"), RATE, [left, right]);
  for (const [name, args] of FORMATS) ffmpeg("-i", at("source.wav"), ...args, at(name));
});

/** The same file through ffmpeg, as planar floats. */
function oracle(path: string, channels = 2): Float32Array[] {
  const bytes = execFileSync(
    "ffmpeg",
    ["-nostdin", "-v", "error", "-i", path, "-f", "f32le", "-c:a", "pcm_f32le", "-"],
    {
      maxBuffer: 1 << 28,
    },
  );
  const all = new Float32Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length));
  return Array.from({ length: channels }, (_, c) =>
    Float32Array.from({ length: all.length / channels }, (_, i) => all[i * channels + c]!),
  );
}

function greatestDifference(a: Float32Array, b: Float32Array): number {
  let most = 0;
  for (let i = 0; i < Math.min(a.length, b.length); i++) most = Math.max(most, Math.abs(a[i]! - b[i]!));
  return most;
}

describe("one function for every container", () => {
  it.each(FORMATS)("%s: what the bytes are", async (name, _args, container, codec, bits) => {
    const facts = await probe(at(name));
    expect(facts).toMatchObject({ container, codec, channels: 2, extensionAgrees: true, truncated: null });
    expect(facts.sampleRateHz).toBe(name === "r.opus" ? 48000 : RATE);
    if (bits !== null && facts.codec !== "FLAC") expect(facts.bitDepth).toBe(bits);
    expect(Math.abs(facts.declaredS! - SECONDS)).toBeLessThan(0.05);
  });

  it.each(FORMATS)("AUDIO-4: %s gives the samples that ffmpeg decodes, full scale at 1.0", async (name) => {
    const { channels } = await decodeWhole(at(name));
    const expected = oracle(at(name));
    // ffmpeg's raw output keeps a coder's last frame, and the first one of a stream without a container.
    const lead = name === "u.aac" ? 1024 : 0;
    expect(Math.abs(expected[0]!.length - lead - channels[0]!.length)).toBeLessThanOrEqual(1024);
    const { lossless } = await probe(at(name));
    for (const c of [0, 1]) {
      // Lossy decoders differ in their rounding, and Opus in its dither: −60 dB of full scale.
      const most = greatestDifference(channels[c]!, expected[c]!.subarray(lead));
      expect(most).toBeLessThanOrEqual(lossless ? 1e-7 : 1e-3);
    }
  });

  it("decodes a Blob as it decodes the file", async () => {
    for (const name of ["b.wav", "m.flac", "p.mp3", "q.ogg"]) {
      const source = blobSource(new Blob([new Uint8Array(readFileSync(at(name)))]), name);
      const facts = await probeSource(source);
      const blocks: Float32Array[] = [];
      const outcome = await decodeSource(source, facts, (channels) => {
        blocks.push(channels[0]!.slice());
      });
      const whole = await decodeWhole(at(name));
      expect(outcome).toMatchObject({ complete: true, samples: whole.channels[0]!.length });
      const joined = Float32Array.from(blocks.flatMap((block) => [...block]));
      expect(greatestDifference(joined, whole.channels[0]!)).toBe(0);
    }
  });

  it("keeps two channels where a stereo MP3 begins in silence", async () => {
    const [left, right] = song({ rateHz: RATE, bpm: 120, durationS: 2, chords: [CHORDS.C] });
    const late = (x: Float32Array): Float32Array => {
      const out = new Float32Array(RATE * 4);
      out.set(x, RATE * 2);
      return out;
    };
    writeFloatWav(at("late.wav"), RATE, [late(left), late(right.map((value) => -0.5 * value))]);
    ffmpeg("-i", at("late.wav"), "-b:a", "192k", at("late.mp3"));
    const widths = new Set<number>();
    const outcome = await decodeStream(at("late.mp3"), (channels) => {
      widths.add(channels.length);
    });
    expect([...widths]).toEqual([2]);
    expect(outcome).toMatchObject({ complete: true, samples: RATE * 4 });
  });
});

describe("real-world linear files", () => {
  it("reads a WAV with a chunk of odd size before its data, padded or not", async () => {
    const plain = readFileSync(at("a.wav"));
    const data = plain.indexOf("data", 12, "latin1");
    const expected = await decodeWhole(at("a.wav"));
    for (const padded of [true, false]) {
      const extra = Buffer.alloc(8 + 635 + (padded ? 1 : 0));
      extra.write("bext", 0, "latin1");
      extra.writeUInt32LE(635, 4);
      extra.write("A song", 8, "latin1");
      const file = Buffer.concat([plain.subarray(0, data), extra, plain.subarray(data)]);
      file.writeUInt32LE(file.length - 8, 4);
      writeFileSync(at("odd.wav"), file);
      const { channels } = await decodeWhole(at("odd.wav"));
      expect(channels[0]!.length).toBe(expected.channels[0]!.length);
      expect(greatestDifference(channels[1]!, expected.channels[1]!)).toBe(0);
      expect((await probe(at("odd.wav"))).bext?.description).toBe("A song");
    }
  });

  it("ends an AIFF at its frame count when another chunk follows the sound", async () => {
    const plain = readFileSync(at("h.aiff"));
    const extra = Buffer.alloc(8 + 20000, 0x55);
    extra.write("APPL", 0, "latin1");
    extra.writeUInt32BE(20000, 4);
    writeFileSync(at("trailing.aiff"), Buffer.concat([plain, extra]));
    const { channels } = await decodeWhole(at("trailing.aiff"));
    expect(channels[0]!.length).toBe(RATE * SECONDS);
  });

  it("reads an unfinished recording, whose sizes were never written, to its end", async () => {
    const file = Buffer.from(readFileSync(at("b.wav")));
    const data = file.indexOf("data", 12, "latin1");
    for (const size of [0, 0xffffffff]) {
      file.writeUInt32LE(size, data + 4);
      writeFileSync(at("open.wav"), file);
      expect((await decodeWhole(at("open.wav"))).channels[0]!.length).toBe(RATE * SECONDS);
    }
  });

  it("reads what is no number in a float file as silence and counts it", async () => {
    const file = Buffer.from(readFileSync(at("d.wav")));
    const data = file.indexOf("data", 12, "latin1") + 8;
    file.writeFloatLE(Number.NaN, data + 800);
    file.writeFloatLE(Number.POSITIVE_INFINITY, data + 1600);
    writeFileSync(at("nan.wav"), file);
    const { outcome, measures } = await measureFile(at("nan.wav"));
    expect(outcome.brokenSamples).toBe(2);
    expect(Number.isFinite(measures.integratedLufs)).toBe(true);
  });

  it("finds RIFF INFO and Vorbis comments", async () => {
    ffmpeg(
      "-i",
      at("a.wav"),
      "-metadata",
      "title=Lantern Steps",
      "-metadata",
      "artist=Ailsa",
      at("info.wav"),
    );
    ffmpeg("-i", at("a.wav"), "-metadata", "title=Lantern Steps", at("info.flac"));
    expect((await probe(at("info.wav"))).tags).toMatchObject({ INAM: "Lantern Steps", IART: "Ailsa" });
    expect((await probe(at("info.flac"))).tags).toMatchObject({ TITLE: "Lantern Steps" });
  });
});

describe("AUDIO-2: damage is never taken for a whole file", () => {
  it.each(FORMATS)("%s cut in half is reported as incomplete with how far it reads", async (name) => {
    const half = at(`half-${name}`);
    copyFileSync(at(name), half);
    const bytes = readFileSync(half).length;
    truncateSync(half, Math.floor(bytes / 2));
    let readableS = 0;
    try {
      const { outcome } = await measureFile(half, { allowIncomplete: true });
      expect(outcome.complete).toBe(false);
      readableS = outcome.readableS;
      await expect(measureFile(half)).rejects.toSatisfy(
        (e) => e instanceof Truncated || e instanceof Damaged,
      );
    } catch (error) {
      // An MP4 whose index was in the missing half says nothing but that it is cut.
      expect(error).toBeInstanceOf(Truncated);
    }
    expect(readableS).toBeLessThan(SECONDS * 0.75);
  });

  it.each(["l.flac", "p.mp3", "q.ogg", "s.m4a"])(
    "%s with 4 kB of noise in the middle is reported as damaged",
    async (name) => {
      const file = Buffer.from(readFileSync(at(name)));
      const middle = Math.floor(file.length / 2);
      for (let i = 0; i < 4096; i++) file[middle + i] = (i * 197 + 91) & 255;
      writeFileSync(at(`noise-${name}`), file);
      const outcome = await decodeStream(at(`noise-${name}`), () => {});
      expect(outcome.complete).toBe(false);
    },
  );

  it("AUDIO-8: a failed read is thrown as it is, not as damage", async () => {
    for (const name of ["a.wav", "l.flac", "p.mp3"]) {
      const source = blobSource(new Blob([new Uint8Array(readFileSync(at(name)))]), name);
      const facts = await probeSource(source);
      const fault = Object.assign(new Error("EIO: i/o error, read"), { code: "EIO", syscall: "read" });
      const failing = { ...source, read: () => Promise.reject(fault) };
      await expect(decodeSource(failing, facts, () => {})).rejects.toBe(fault);
    }
  });

  it("a fault of the receiver is thrown as it is, not as damage", async () => {
    const fault = new Error("disk full");
    await expect(
      decodeStream(at("a.wav"), () => {
        throw fault;
      }),
    ).rejects.toBe(fault);
  });
});

describe("refusals", () => {
  it.each([
    ["empty.wav", Buffer.alloc(0), "empty"],
    ["text.wav", Buffer.from("Dear library, here is my song. ".repeat(40)), "a text file"],
    ["page.mp3", Buffer.from("<!DOCTYPE html><html><body>404</body></html>".repeat(20)), "a web page"],
    ["paper.wav", Buffer.from(`%PDF-1.7\n${"x".repeat(900)}`), "a PDF document"],
    [
      "archive.wav",
      Buffer.concat([Buffer.from("PK\x03\x04", "latin1"), Buffer.alloc(900, 7)]),
      "a ZIP archive or an office document",
    ],
    ["zeros.wav", Buffer.alloc(5000), "a file that begins with empty bytes"],
    [
      "tag.mp3",
      Buffer.concat([Buffer.from("ID3\x04\0\0\0\0\x02\0", "latin1"), Buffer.alloc(900, 0x41)]),
      "a tag with no audio behind it",
    ],
  ])("%s is no audio, and the refusal says what it is", async (name, bytes, found) => {
    writeFileSync(at(name), bytes);
    const refusal = await probe(at(name)).catch((error: unknown) => error);
    expect(refusal).toBeInstanceOf(NotAudio);
    expect((refusal as NotAudio).found).toBe(found);
  });

  it("refuses a video and a compressed WAV", async () => {
    ffmpeg(
      "-f",
      "lavfi",
      "-i",
      "testsrc=s=64x64:d=1",
      "-i",
      at("a.wav"),
      "-shortest",
      "-c:v",
      "mpeg4",
      "-c:a",
      "aac",
      at("film.mp4"),
    );
    await expect(probe(at("film.mp4"))).rejects.toMatchObject({ found: "a video file" });
    ffmpeg("-i", at("a.wav"), "-c:a", "adpcm_ima_wav", at("adpcm.wav"));
    await expect(probe(at("adpcm.wav"))).rejects.toBeInstanceOf(UnsupportedAudio);
  });

  it("AUDIO-1: the bytes decide, and the name is only compared with them", async () => {
    copyFileSync(at("p.mp3"), at("p.wav"));
    expect(await probe(at("p.wav"))).toMatchObject({
      container: "MP3",
      claimedExtension: "wav",
      extensionAgrees: false,
    });
  });

  it("refuses at the limits of length and size before decoding", async () => {
    await expect(decodeStream(at("a.wav"), () => {}, { limitS: 3 })).rejects.toBeInstanceOf(TooLong);
    await expect(decodeStream(at("a.wav"), () => {}, { limitBytes: 1000 })).rejects.toBeInstanceOf(TooLarge);
  });

  it("stops a stream that runs longer than it declares", async () => {
    const facts = { ...(await probe(at("p.mp3"))), declaredS: 1, declaredSamples: RATE };
    let heard = 0;
    const count = (channels: Float32Array[]): void => {
      heard += channels[0]!.length;
    };
    const decoding = decodeStream(at("p.mp3"), count, { facts, limitS: 2 });
    await expect(decoding).rejects.toBeInstanceOf(TooLong);
    expect(heard).toBeLessThanOrEqual(2 * RATE);
  });
});
