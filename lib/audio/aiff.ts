import { type ByteSource, headerText, latin1, viewOf } from "./byte-source";
import { NotAudio, UnsupportedAudio } from "./errors";
import type { LinearFacts } from "./riff";

const CHUNKS_MAX = 4096;

interface Common {
  channels: number;
  frames: number;
  bitDepth: number;
  sampleRateHz: number;
  coding: string;
}

/**
 * Reads the headers of AIFF and AIFC.
 *
 * Source:  the AIFF 1.3 and AIFF-C chunk layouts: big-endian, `COMM` with an 80-bit extended rate, `SSND` with an
 *          offset and a block size before its samples, chunks padded to even size, any chunk after `SSND` allowed.
 * Throws:  NotAudio without COMM or SSND, UnsupportedAudio for compressed AIFC.
 */
export async function readAiff(source: ByteSource): Promise<LinearFacts> {
  const container = latin1(await source.read(8, 4), 0, 4) === "AIFC" ? "AIFC" : "AIFF";
  let common: Common | null = null;
  let sound: { offset: number; bytes: number } | null = null;
  const tags: Record<string, string> = {};
  let at = 12;
  for (let count = 0; count < CHUNKS_MAX && at + 8 <= source.sizeBytes; count++) {
    const head = await source.read(at, 8);
    if (head.length < 8) break;
    const id = latin1(head, 0, 4);
    const size = viewOf(head).getUint32(4, false);
    if (id === "COMM") common = parseCommon(await source.read(at + 8, Math.min(size, 64)), container);
    else if (id === "SSND" && !sound) {
      const lead = await source.read(at + 8, 4);
      const skip = lead.length === 4 ? viewOf(lead).getUint32(0, false) : 0;
      sound = { offset: at + 16 + skip, bytes: Math.max(0, size - 8 - skip) };
    } else if (id === "NAME" || id === "AUTH" || id === "ANNO" || id === "(c) ") {
      const text = headerText(await source.read(at + 8, Math.min(size, 4096)), 0, 4096);
      if (text) tags[id.trim()] = text;
    }
    at += 8 + size + (size & 1);
  }
  if (!common) throw new NotAudio("an AIFF file without a common chunk");
  if (!sound) throw new NotAudio("an AIFF file without sound data");
  return layOut(source, container, common, sound, tags);
}

function layOut(
  source: ByteSource,
  container: "AIFF" | "AIFC",
  common: Common,
  sound: { offset: number; bytes: number },
  tags: Record<string, string>,
): LinearFacts {
  const coding = AIFC_CODINGS[common.coding];
  if (!coding)
    throw new UnsupportedAudio(`AIFC coding "${common.coding}" (only linear PCM and float are read)`);
  const bytesPerSample = coding.bytes ?? Math.ceil(common.bitDepth / 8);
  const frameBytes = bytesPerSample * common.channels;
  if (common.channels < 1 || bytesPerSample < 1 || bytesPerSample > 8 || !(common.sampleRateHz > 0)) {
    throw new NotAudio(
      `an AIFF file with an impossible header (${common.channels} channels, ${common.bitDepth} bits)`,
    );
  }
  // The frame count of COMM is the length; bytes of SSND beyond it are padding, and SSND may be cut short.
  const present = Math.max(0, Math.min(sound.bytes, source.sizeBytes - sound.offset));
  return {
    container,
    sampleRateHz: common.sampleRateHz,
    bitDepth: coding.kind === "float" ? bytesPerSample * 8 : common.bitDepth,
    float: coding.kind === "float",
    channels: common.channels,
    declaredFrames: common.frames,
    pcm: {
      kind: coding.kind,
      bytesPerSample,
      littleEndian: coding.littleEndian,
      channels: common.channels,
      dataOffset: sound.offset,
      frames: Math.min(common.frames, Math.floor(present / frameBytes)),
    },
    bext: null,
    tags,
  };
}

const AIFC_CODINGS: Record<
  string,
  { kind: "unsigned" | "signed" | "float"; littleEndian: boolean; bytes?: number }
> = {
  NONE: { kind: "signed", littleEndian: false },
  twos: { kind: "signed", littleEndian: false },
  sowt: { kind: "signed", littleEndian: true },
  in24: { kind: "signed", littleEndian: false, bytes: 3 },
  in32: { kind: "signed", littleEndian: false, bytes: 4 },
  fl32: { kind: "float", littleEndian: false, bytes: 4 },
  FL32: { kind: "float", littleEndian: false, bytes: 4 },
  fl64: { kind: "float", littleEndian: false, bytes: 8 },
  FL64: { kind: "float", littleEndian: false, bytes: 8 },
  "raw ": { kind: "unsigned", littleEndian: false, bytes: 1 },
};

function parseCommon(body: Uint8Array, container: "AIFF" | "AIFC"): Common {
  if (body.length < 18) throw new NotAudio("an AIFF file with a broken common chunk");
  const view = viewOf(body);
  return {
    channels: view.getUint16(0, false),
    frames: view.getUint32(2, false),
    bitDepth: view.getUint16(6, false),
    sampleRateHz: extended80(view, 8),
    coding: container === "AIFC" && body.length >= 22 ? latin1(body, 18, 4) : "NONE",
  };
}

/** IEEE 754 extended precision: sign and 15-bit exponent (bias 16383), then a 64-bit mantissa with its leading 1. */
function extended80(view: DataView, offset: number): number {
  const exponent = view.getUint16(offset, false) & 0x7fff;
  const mantissa = view.getUint32(offset + 2, false) * 2 ** 32 + view.getUint32(offset + 6, false);
  return mantissa * 2 ** (exponent - 16383 - 63);
}
