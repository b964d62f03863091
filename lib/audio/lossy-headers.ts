import { type ByteSource, headerText, latin1, viewOf } from "./byte-source";
import { NotAudio, UnsupportedAudio } from "./errors";

export interface StreamFacts {
  codec: string;
  sampleRateHz: number;
  channels: number;
  declaredSamples: number | null;
  tags: Record<string, string>;
  /** True if the stream shows that its end is missing. */
  cutShort: boolean;
}

const MPEG1_KBPS = [0, 32, 40, 48, 56, 64, 80, 96, 112, 128, 160, 192, 224, 256, 320];
const MPEG2_KBPS = [0, 8, 16, 24, 32, 40, 48, 56, 64, 80, 96, 112, 128, 144, 160];
const MPEG_RATES_HZ: Record<number, readonly number[]> = {
  3: [44100, 48000, 32000],
  2: [22050, 24000, 16000],
  0: [11025, 12000, 8000],
};
const ADTS_RATES_HZ = [
  96000, 88200, 64000, 48000, 44100, 32000, 24000, 22050, 16000, 12000, 11025, 8000, 7350,
];
const WALK_CHUNK_BYTES = 1 << 20;

export interface MpegFrame {
  bytes: number;
  samples: number;
  sampleRateHz: number;
  channels: number;
  mpeg1: boolean;
}

/** One MPEG layer 3 frame header (ISO/IEC 11172-3 and 13818-3), or null. Free format is not read. */
export function parseMpegFrame(b: Uint8Array, at: number): MpegFrame | null {
  if (at + 4 > b.length || b[at] !== 0xff || (b[at + 1]! & 0xe0) !== 0xe0) return null;
  const version = (b[at + 1]! >> 3) & 3;
  const layer = (b[at + 1]! >> 1) & 3;
  const rateHz = MPEG_RATES_HZ[version]?.[(b[at + 2]! >> 2) & 3];
  const kbps = (version === 3 ? MPEG1_KBPS : MPEG2_KBPS)[b[at + 2]! >> 4];
  if (layer !== 1 || !rateHz || !kbps) return null;
  const samples = version === 3 ? 1152 : 576;
  const bytes = Math.floor(((samples / 8) * kbps * 1000) / rateHz) + ((b[at + 2]! >> 1) & 1);
  return {
    bytes,
    samples,
    sampleRateHz: rateHz,
    channels: b[at + 3]! >> 6 === 3 ? 1 : 2,
    mpeg1: version === 3,
  };
}

/** One ADTS frame header (ISO/IEC 13818-7, 6.2), or null. */
export function parseAdtsFrame(
  b: Uint8Array,
  at: number,
): { bytes: number; samples: number; sampleRateHz: number; channels: number } | null {
  if (at + 7 > b.length || b[at] !== 0xff || (b[at + 1]! & 0xf6) !== 0xf0) return null;
  const sampleRateHz = ADTS_RATES_HZ[(b[at + 2]! >> 2) & 15];
  const channels = ((b[at + 2]! & 1) << 2) | (b[at + 3]! >> 6);
  const bytes = ((b[at + 3]! & 3) << 11) | (b[at + 4]! << 3) | (b[at + 5]! >> 5);
  if (!sampleRateHz || bytes < 7) return null;
  return {
    bytes,
    samples: ((b[at + 6]! & 3) + 1) * 1024,
    sampleRateHz,
    channels: channels === 7 ? 8 : channels,
  };
}

/**
 * Length of an MP3 stream.
 *
 * Source:  the Xing/Info header of the first frame counts frames; its LAME extension gives encoder delay and
 *          padding (12 bits each) that a gapless decoder removes. Without it every frame is counted by walking.
 * Output:  samples after the trim where the header allows it
 */
export async function readMp3(source: ByteSource, offset: number): Promise<StreamFacts | null> {
  const head = await source.read(offset, 4096);
  const first = parseMpegFrame(head, 0);
  if (!first) return null;
  const second = parseMpegFrame(head, first.bytes);
  if (first.bytes + 4 <= head.length && (!second || second.sampleRateHz !== first.sampleRateHz)) return null;
  const facts = {
    codec: "MPEG layer 3",
    sampleRateHz: first.sampleRateHz,
    channels: first.channels,
    tags: {},
  };
  const at = 4 + (first.mpeg1 ? (first.channels === 1 ? 17 : 32) : first.channels === 1 ? 9 : 17);
  const mark = latin1(head, at, 4);
  const view = viewOf(head);
  if ((mark === "Xing" || mark === "Info") && (view.getUint32(at + 4, false) & 1) === 1) {
    const flags = view.getUint32(at + 4, false);
    const lame = at + 12 + (flags & 2 ? 4 : 0) + (flags & 4 ? 100 : 0) + (flags & 8 ? 4 : 0);
    const hasTrim = /^(LAME|Lavc|Lavf)/.test(latin1(head, lame, 4));
    const trim = hasTrim ? (head[lame + 21]! << 16) | (head[lame + 22]! << 8) | head[lame + 23]! : 0;
    const samples = view.getUint32(at + 8, false) * first.samples - (trim >> 12) - (trim & 0xfff);
    return { ...facts, declaredSamples: Math.max(0, samples), cutShort: false };
  }
  return { ...facts, ...(await walkFrames(source, offset, parseMpegFrame)) };
}

export async function readAdts(source: ByteSource, offset: number): Promise<StreamFacts | null> {
  const head = await source.read(offset, 1 << 14);
  const first = parseAdtsFrame(head, 0);
  const second = first && parseAdtsFrame(head, first.bytes);
  if (!first || (first.bytes + 7 <= head.length && second?.sampleRateHz !== first.sampleRateHz)) return null;
  const { sampleRateHz, channels } = first;
  return {
    codec: "AAC",
    sampleRateHz,
    channels,
    tags: {},
    ...(await walkFrames(source, offset, parseAdtsFrame)),
  };
}

async function walkFrames(
  source: ByteSource,
  offset: number,
  parse: (bytes: Uint8Array, at: number) => { bytes: number; samples: number } | null,
): Promise<{ declaredSamples: number; cutShort: boolean }> {
  let samples = 0;
  let base = offset;
  let chunk = await source.read(base, WALK_CHUNK_BYTES);
  for (let at = offset; at + 8 <= source.sizeBytes; ) {
    if (at + 8 > base + chunk.length) {
      base = at;
      chunk = await source.read(base, WALK_CHUNK_BYTES);
      if (chunk.length < 8) break;
    }
    const frame = parse(chunk, at - base);
    if (!frame) {
      at++;
      continue;
    }
    if (at + frame.bytes > source.sizeBytes) return { declaredSamples: samples, cutShort: true };
    samples += frame.samples;
    at += frame.bytes;
  }
  return { declaredSamples: samples, cutShort: false };
}

/**
 * First and last page of an Ogg stream.
 *
 * Source:  RFC 3533 (pages, granule position, end-of-stream flag 4), RFC 7845 (Opus: 48 kHz, pre-skip at byte 10),
 *          the Vorbis I identification header (channels at 11, rate at 12).
 * Edges:   a last page without the end-of-stream flag, or one that runs past the file, is a stream cut short
 */
export async function readOgg(source: ByteSource): Promise<StreamFacts> {
  const head = await source.read(0, 4096);
  const packet = 27 + head[26]!;
  const view = viewOf(head);
  const tail = await lastOggPage(source);
  if (latin1(head, packet, 8) === "OpusHead") {
    const skip = view.getUint16(packet + 10, true);
    return oggFacts("Opus", 48000, head[packet + 9]!, tail, skip);
  }
  if (latin1(head, packet, 7) === "\x01vorbis") {
    return oggFacts("Vorbis", view.getUint32(packet + 12, true), head[packet + 11]!, tail, 0);
  }
  if (latin1(head, packet + 1, 4) === "FLAC") {
    // Ogg FLAC mapping: the native STREAMINFO block follows a 9-byte prefix and "fLaC".
    const info = packet + 17;
    const sampleRateHz = (view.getUint32(info + 10, false) >>> 12) & 0xfffff;
    return oggFacts("FLAC", sampleRateHz, ((head[info + 12]! >> 1) & 7) + 1, tail, 0);
  }
  if (head[packet] === 0x80 || latin1(head, packet, 8) === "fishead\0")
    throw new NotAudio("an Ogg video file");
  throw new UnsupportedAudio("an Ogg stream that is neither Vorbis, Opus nor FLAC");
}

function oggFacts(
  codec: string,
  sampleRateHz: number,
  channels: number,
  tail: { granule: number; cutShort: boolean },
  skip: number,
): StreamFacts {
  if (!(sampleRateHz > 0) || channels < 1) throw new NotAudio("an Ogg file with an impossible header");
  return {
    codec,
    sampleRateHz,
    channels,
    declaredSamples: Math.max(0, tail.granule - skip),
    tags: {},
    cutShort: tail.cutShort,
  };
}

async function lastOggPage(source: ByteSource): Promise<{ granule: number; cutShort: boolean }> {
  // A page has at most 65,307 bytes, so the last header lies within two pages of the end.
  const from = Math.max(0, source.sizeBytes - 131072);
  const tail = await source.read(from, 131072);
  const view = viewOf(tail);
  let granule = 0;
  let ended = false;
  let complete = false;
  for (let at = 0; at + 27 <= tail.length; at++) {
    if (tail[at] !== 0x4f || latin1(tail, at, 4) !== "OggS") continue;
    const segments = tail[at + 26]!;
    let bytes = 27 + segments;
    for (let s = 0; s < segments; s++) bytes += tail[at + 27 + s] ?? 0;
    const position = view.getBigInt64(at + 6, true);
    if (position >= 0n) granule = Number(position);
    ended = (tail[at + 5]! & 4) !== 0;
    complete = at + bytes <= tail.length;
  }
  return { granule, cutShort: !ended || !complete };
}

/** STREAMINFO and Vorbis comments of a native FLAC stream (RFC 9639, 8.2 and 8.6). */
export async function readFlac(
  source: ByteSource,
  offset: number,
): Promise<StreamFacts & { bitDepth: number }> {
  const tags: Record<string, string> = {};
  let facts: { sampleRateHz: number; channels: number; bitDepth: number; samples: number } | null = null;
  for (let at = offset + 4, last = false; !last && at + 4 <= source.sizeBytes; ) {
    const head = await source.read(at, 4);
    last = (head[0]! & 0x80) !== 0;
    const type = head[0]! & 0x7f;
    const size = (head[1]! << 16) | (head[2]! << 8) | head[3]!;
    if (type === 0) facts = parseStreamInfo(await source.read(at + 4, 34));
    else if (type === 4)
      Object.assign(tags, parseComments(await source.read(at + 4, Math.min(size, 1 << 20))));
    at += 4 + size;
  }
  if (!facts || facts.sampleRateHz === 0) throw new NotAudio("a FLAC file without stream information");
  return {
    codec: "FLAC",
    sampleRateHz: facts.sampleRateHz,
    channels: facts.channels,
    bitDepth: facts.bitDepth,
    declaredSamples: facts.samples > 0 ? facts.samples : null,
    tags,
    cutShort: false,
  };
}

function parseStreamInfo(
  b: Uint8Array,
): { sampleRateHz: number; channels: number; bitDepth: number; samples: number } | null {
  if (b.length < 34) return null;
  const view = viewOf(b);
  return {
    sampleRateHz: view.getUint32(10, false) >>> 12,
    channels: ((b[12]! >> 1) & 7) + 1,
    bitDepth: (((b[12]! & 1) << 4) | (b[13]! >> 4)) + 1,
    samples: (b[13]! & 15) * 2 ** 32 + view.getUint32(14, false),
  };
}

function parseComments(body: Uint8Array): Record<string, string> {
  const tags: Record<string, string> = {};
  const view = viewOf(body);
  if (body.length < 8) return tags;
  let at = 4 + view.getUint32(0, true);
  if (at + 4 > body.length) return tags;
  const count = view.getUint32(at, true);
  at += 4;
  for (let i = 0; i < Math.min(count, 1000) && at + 4 <= body.length; i++) {
    const size = view.getUint32(at, true);
    const text = headerText(body, at + 4, size);
    const equals = text.indexOf("=");
    if (equals > 0) tags[text.slice(0, equals).toUpperCase()] = text.slice(equals + 1);
    at += 4 + size;
  }
  return tags;
}
