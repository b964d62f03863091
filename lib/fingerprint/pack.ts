import { crc32 } from "./crc32";
import type { Fingerprint, NotComparableReason, NotComparableSpan } from "./fingerprint";
import {
  ENGINE_VERSION,
  FRAME_SAMPLES,
  HOP_SAMPLES,
  PITCH_UNITS_PER_SEMITONE,
  SAMPLE_RATE_HZ,
  TIME_UNITS_PER_FRAME,
} from "./settings";

/** "SGWF" */
const MAGIC = [0x53, 0x47, 0x57, 0x46];
export const PACK_FORMAT_VERSION = 1;
const HEADER_BYTES = 44;
const SPAN_BYTES = 17;
const CHECKSUM_BYTES = 4;
/** One time byte, two pitch bytes, one rank byte: no peak takes less. */
const PEAK_BYTES_MIN = 4;
const REASONS: NotComparableReason[] = ["silence", "tone", "low information"];

/**
 * Fingerprint as bytes: what is kept at rest.
 *
 * Output:  little-endian: magic SGWF, format u8, engine u16, time units u8, sample rate u32, frame u16, hop u16,
 *          pitch units u16, two zero bytes, duration f64, content f64, spans u32, peaks u32; spans (start f64, end f64,
 *          reason u8); peak times as LEB128 differences; pitches u16; ranks u8; CRC-32 of all before it
 *          about 14 kB a minute of music
 */
export function packFingerprint(fp: Fingerprint): Uint8Array {
  const count = fp.timeUnits.length;
  if (fp.pitchUnits.length !== count || fp.ranks.length !== count) {
    throw new RangeError(
      `columns differ in length: ${count} times, ${fp.pitchUnits.length} pitches, ${fp.ranks.length} ranks`,
    );
  }
  const spansBytes = fp.notComparable.length * SPAN_BYTES;
  const bytes = new Uint8Array(HEADER_BYTES + spansBytes + count * (5 + 3) + CHECKSUM_BYTES);
  const view = new DataView(bytes.buffer);
  bytes.set(MAGIC, 0);
  view.setUint8(4, PACK_FORMAT_VERSION);
  view.setUint16(5, fp.engineVersion, true);
  view.setUint8(7, TIME_UNITS_PER_FRAME);
  view.setUint32(8, SAMPLE_RATE_HZ, true);
  view.setUint16(12, FRAME_SAMPLES, true);
  view.setUint16(14, HOP_SAMPLES, true);
  view.setUint16(16, PITCH_UNITS_PER_SEMITONE, true);
  view.setFloat64(20, fp.durationS, true);
  view.setFloat64(28, fp.contentS, true);
  view.setUint32(36, fp.notComparable.length, true);
  view.setUint32(40, count, true);
  let at = HEADER_BYTES;
  for (const span of fp.notComparable) {
    view.setFloat64(at, span.startS, true);
    view.setFloat64(at + 8, span.endS, true);
    view.setUint8(at + 16, REASONS.indexOf(span.reason));
    at += SPAN_BYTES;
  }
  let before = 0;
  for (let i = 0; i < count; i++) {
    let step = fp.timeUnits[i]! - before;
    if (step < 0) throw new RangeError(`peak ${i} is earlier than the one before it`);
    before = fp.timeUnits[i]!;
    while (step > 127) {
      bytes[at++] = (step & 127) | 128;
      step = Math.floor(step / 128);
    }
    bytes[at++] = step;
  }
  for (let i = 0; i < count; i++, at += 2) view.setUint16(at, fp.pitchUnits[i]!, true);
  bytes.set(fp.ranks, at);
  at += count;
  view.setUint32(at, crc32(bytes.subarray(0, at)), true);
  return bytes.slice(0, at + CHECKSUM_BYTES);
}

/**
 * Reads what `packFingerprint` wrote, trusting nothing: no count is believed before the bytes for it are seen.
 *
 * Throws:  RangeError that names what was wrong, what was found and what was wanted
 */
export function unpackFingerprint(bytes: Uint8Array): Fingerprint {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  checkHeader(bytes, view);
  const spanCount = view.getUint32(36, true);
  const peakCount = view.getUint32(40, true);
  const body = bytes.length - HEADER_BYTES - CHECKSUM_BYTES;
  if (spanCount * SPAN_BYTES + peakCount * PEAK_BYTES_MIN > body) {
    throw new RangeError(
      `fingerprint claims ${spanCount} spans and ${peakCount} peaks, too many for ${body} bytes of body`,
    );
  }
  const stored = view.getUint32(bytes.length - CHECKSUM_BYTES, true);
  const computed = crc32(bytes.subarray(0, bytes.length - CHECKSUM_BYTES));
  if (stored !== computed) {
    throw new RangeError(`fingerprint checksum is ${hex(stored)}, its bytes give ${hex(computed)}`);
  }
  const durationS = readSeconds(view, 20, "duration");
  const contentS = readSeconds(view, 28, "content");
  if (contentS > durationS)
    throw new RangeError(`fingerprint content ${contentS} s exceeds its duration ${durationS} s`);
  const notComparable: NotComparableSpan[] = [];
  let at = HEADER_BYTES;
  for (let i = 0; i < spanCount; i++, at += SPAN_BYTES) notComparable.push(readSpan(view, at, i));
  return {
    engineVersion: ENGINE_VERSION,
    durationS,
    contentS,
    notComparable,
    ...readPeaks(bytes, view, at, peakCount),
  };
}

function checkHeader(bytes: Uint8Array, view: DataView): void {
  if (bytes.length < HEADER_BYTES + CHECKSUM_BYTES) {
    throw new RangeError(
      `fingerprint is ${bytes.length} bytes; the shortest possible is ${HEADER_BYTES + CHECKSUM_BYTES}`,
    );
  }
  for (let i = 0; i < MAGIC.length; i++) {
    if (bytes[i] !== MAGIC[i]) throw new RangeError("not a fingerprint: it does not begin with SGWF");
  }
  const wanted: [string, number, number][] = [
    ["format version", view.getUint8(4), PACK_FORMAT_VERSION],
    ["engine version", view.getUint16(5, true), ENGINE_VERSION],
    ["time units", view.getUint8(7), TIME_UNITS_PER_FRAME],
    ["sample rate", view.getUint32(8, true), SAMPLE_RATE_HZ],
    ["frame samples", view.getUint16(12, true), FRAME_SAMPLES],
    ["hop samples", view.getUint16(14, true), HOP_SAMPLES],
    ["pitch units", view.getUint16(16, true), PITCH_UNITS_PER_SEMITONE],
    ["reserved bytes", view.getUint16(18, true), 0],
  ];
  for (const [name, found, want] of wanted) {
    if (found !== want) throw new RangeError(`fingerprint ${name} is ${found}, this engine reads ${want}`);
  }
}

function readSeconds(view: DataView, at: number, name: string): number {
  const value = view.getFloat64(at, true);
  if (!(value >= 0 && Number.isFinite(value))) throw new RangeError(`fingerprint ${name} is ${value} s`);
  return value;
}

function readSpan(view: DataView, at: number, index: number): NotComparableSpan {
  const startS = readSeconds(view, at, `span ${index} start`);
  const endS = readSeconds(view, at + 8, `span ${index} end`);
  const reason = REASONS[view.getUint8(at + 16)];
  if (reason === undefined)
    throw new RangeError(`span ${index} has reason ${view.getUint8(at + 16)}, known are 0 to 2`);
  if (endS < startS) throw new RangeError(`span ${index} ends at ${endS} s, before its start at ${startS} s`);
  return { startS, endS, reason };
}

function readPeaks(bytes: Uint8Array, view: DataView, from: number, count: number) {
  const end = bytes.length - CHECKSUM_BYTES;
  const timeUnits = new Uint32Array(count);
  let at = from;
  let time = 0;
  for (let i = 0; i < count; i++) {
    let step = 0;
    let scale = 1;
    for (let more = true; more; scale *= 128) {
      if (at >= end) throw new RangeError(`fingerprint ends within the time of peak ${i} of ${count}`);
      if (scale > 128 ** 4) throw new RangeError(`the time of peak ${i} takes more than five bytes`);
      const byte = bytes[at++]!;
      step += (byte & 127) * scale;
      more = byte > 127;
    }
    time += step;
    if (time > 0xffffffff) throw new RangeError(`the time of peak ${i} is ${time}, beyond 32 bits`);
    timeUnits[i] = time;
  }
  if (end - at !== 3 * count) {
    throw new RangeError(
      `fingerprint has ${end - at} bytes of pitch and rank for ${count} peaks, wanted ${3 * count}`,
    );
  }
  const pitchUnits = new Uint16Array(count);
  for (let i = 0; i < count; i++, at += 2) pitchUnits[i] = view.getUint16(at, true);
  return { timeUnits, pitchUnits, ranks: bytes.slice(at, at + count) };
}

function hex(value: number): string {
  return value.toString(16).padStart(8, "0");
}
