import { headerText, latin1, viewOf } from "./byte-source";

/** The `bext` chunk. Loudness fields are null where the chunk is older than version 2 or marks them unset. */
export interface Bext {
  description: string;
  originator: string;
  originatorReference: string;
  originationDate: string;
  originationTime: string;
  timeReferenceSamples: bigint;
  version: number;
  umidHex: string;
  loudnessLufs: number | null;
  loudnessRangeLu: number | null;
  maxTruePeakDbtp: number | null;
  maxMomentaryLufs: number | null;
  maxShortTermLufs: number | null;
  codingHistory: string;
}

export type BextInput = Partial<Omit<Bext, "version" | "umidHex">>;

export const BEXT_FIXED_BYTES = 602;
/** Common practice: the value that marks a loudness field as not set. */
const UNSET = 0x7fff;

/**
 * Reads the body of a `bext` chunk.
 *
 * Source:  EBU Tech 3285 v2, §2.3; loudness fields are hundredths, little-endian int16.
 * Input:   the chunk's body without id and size
 * Output:  fields as text and numbers; a body shorter than 602 bytes gives null
 * Edges:   text is cut at the first NUL; bytes that are not UTF-8 are read as Latin-1
 */
export function parseBext(body: Uint8Array): Bext | null {
  if (body.length < BEXT_FIXED_BYTES) return null;
  const view = viewOf(body);
  const version = view.getUint16(346, true);
  const loudness = (offset: number): number | null => {
    if (version < 2) return null;
    const raw = view.getInt16(offset, true);
    return raw === UNSET ? null : raw / 100;
  };
  let umidHex = "";
  for (let i = 348; i < 412; i++) umidHex += body[i]!.toString(16).padStart(2, "0");
  return {
    description: headerText(body, 0, 256),
    originator: headerText(body, 256, 32),
    originatorReference: headerText(body, 288, 32),
    originationDate: headerText(body, 320, 10),
    originationTime: headerText(body, 330, 8),
    timeReferenceSamples: (BigInt(view.getUint32(342, true)) << 32n) | BigInt(view.getUint32(338, true)),
    version,
    umidHex: version >= 1 ? umidHex : "",
    loudnessLufs: loudness(412),
    loudnessRangeLu: loudness(414),
    maxTruePeakDbtp: loudness(416),
    maxMomentaryLufs: loudness(418),
    maxShortTermLufs: loudness(420),
    codingHistory: headerText(body, BEXT_FIXED_BYTES, body.length - BEXT_FIXED_BYTES),
  };
}

/** Letters that do not decompose into a plain letter and an accent. */
const SPELT: Record<string, string> = {
  ß: "ss",
  æ: "ae",
  Æ: "AE",
  œ: "oe",
  Œ: "OE",
  ø: "o",
  Ø: "O",
  ł: "l",
  Ł: "L",
  đ: "d",
  Đ: "D",
  þ: "th",
  Þ: "Th",
};

/** ASCII only, as the chunk demands: accents are dropped to their letter, anything unknown becomes "?". */
export function toAscii(text: string): string {
  return text
    .normalize("NFKD")
    .replace(/[\u0300-\u036f]/g, "")
    .replace(/[ßæÆœŒøØłŁđĐþÞ]/g, (letter) => SPELT[letter] ?? "?")
    .replace(/[\u2018\u2019]/g, "'")
    .replace(/[\u2010-\u2015\u2212]/g, "-")
    .replace(/[^\x20-\x7e\r\n]/g, "?");
}

/**
 * Writes the body of a `bext` chunk, version 2, always of even size.
 *
 * Source:  EBU Tech 3285 v2, §2.3; offsets in parseBext.
 * Input:   any fields; text is made ASCII and cut to its field, loudness is rounded to hundredths
 * Output:  Uint8Array of at least 602 bytes, even
 * Throws:  RangeError if the time reference is negative or a loudness is not finite or out of int16
 */
export function buildBext(fields: BextInput): Uint8Array {
  const history = fields.codingHistory ? `${toAscii(fields.codingHistory).trim()}\r\n` : "";
  const size = BEXT_FIXED_BYTES + history.length;
  const body = new Uint8Array(size + (size & 1));
  const view = viewOf(body);
  const text = (value: string | undefined, offset: number, length: number): void => {
    const ascii = toAscii(value ?? "");
    for (let i = 0; i < Math.min(length, ascii.length); i++) body[offset + i] = ascii.charCodeAt(i);
  };
  text(fields.description, 0, 256);
  text(fields.originator, 256, 32);
  text(fields.originatorReference, 288, 32);
  text(fields.originationDate, 320, 10);
  text(fields.originationTime, 330, 8);
  const reference = fields.timeReferenceSamples ?? 0n;
  if (reference < 0n) throw new RangeError(`timeReferenceSamples must not be negative, got ${reference}`);
  view.setBigUint64(338, reference, true);
  view.setUint16(346, 2, true);
  const loudness = (value: number | null | undefined, offset: number): void => {
    const raw = Math.round((value ?? 0) * 100);
    if (!(raw >= -32768 && raw < UNSET))
      throw new RangeError(`loudness field must fit 16 bits, got ${value}`);
    view.setInt16(offset, value === null || value === undefined ? UNSET : raw, true);
  };
  loudness(fields.loudnessLufs, 412);
  loudness(fields.loudnessRangeLu, 414);
  loudness(fields.maxTruePeakDbtp, 416);
  loudness(fields.maxMomentaryLufs, 418);
  loudness(fields.maxShortTermLufs, 420);
  for (let i = 0; i < history.length; i++) body[BEXT_FIXED_BYTES + i] = history.charCodeAt(i);
  return body;
}

/** RIFF INFO list body ("INFO" and its sub-chunks) to key and text. */
export function parseInfoList(body: Uint8Array): Record<string, string> {
  const tags: Record<string, string> = {};
  if (latin1(body, 0, 4) !== "INFO") return tags;
  const view = viewOf(body);
  for (let at = 4; at + 8 <= body.length; ) {
    const size = view.getUint32(at + 4, true);
    const value = headerText(body, at + 8, size);
    if (value) tags[latin1(body, at, 4)] = value;
    at += 8 + size + (size & 1);
  }
  return tags;
}
