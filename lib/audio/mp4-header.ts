import { type ByteSource, latin1, viewOf } from "./byte-source";
import { NotAudio, UnsupportedAudio } from "./errors";
import type { StreamFacts } from "./lossy-headers";

const MOOV_BYTES_MAX = 64 << 20;
const BOXES_MAX = 4096;

interface Box {
  type: string;
  start: number;
  end: number;
}

/**
 * The sound track of an MP4.
 *
 * Source:  ISO/IEC 14496-12: boxes of 32- or 64-bit size; `moov/trak/mdia/{hdlr,mdhd}`, `stsd`, `edts/elst`.
 * Output:  declaredSamples in the track's own rate, after the edit list
 * Edges:   `indexAtEnd` if the samples come before their index; media bytes missing at the end give cutShort
 * Throws:  NotAudio for a file with a picture track, UnsupportedAudio where no sound track is described
 */
export async function readMp4(source: ByteSource): Promise<StreamFacts & { indexAtEnd: boolean }> {
  let moov: Uint8Array | null = null;
  let indexAtEnd = false;
  let mediaSeen = false;
  let cutShort = false;
  let at = 0;
  for (let count = 0; count < BOXES_MAX && at + 8 <= source.sizeBytes; count++) {
    const head = await source.read(at, 16);
    const view = viewOf(head);
    let size = view.getUint32(0, false);
    const type = latin1(head, 4, 4);
    if (size === 1 && head.length === 16) size = Number(view.getBigUint64(8, false));
    else if (size === 0) size = source.sizeBytes - at;
    if (size < 8) break;
    if (at + size > source.sizeBytes) cutShort = true;
    if (type === "mdat") mediaSeen = true;
    if (type === "moov") {
      if (size > MOOV_BYTES_MAX) throw new UnsupportedAudio(`an MP4 with an index of ${size} bytes`);
      moov = await source.read(at + 8, size - 8);
      indexAtEnd = mediaSeen;
    }
    at += size;
  }
  if (!moov) {
    if (cutShort && mediaSeen) {
      return {
        codec: "AAC",
        sampleRateHz: 0,
        channels: 0,
        declaredSamples: null,
        tags: {},
        cutShort: true,
        indexAtEnd,
      };
    }
    throw new NotAudio("an MP4 without an index of its contents");
  }
  return { ...readMovie(moov), tags: {}, cutShort, indexAtEnd };
}

function readMovie(moov: Uint8Array): Omit<StreamFacts, "tags" | "cutShort"> {
  const view = viewOf(moov);
  let movieScale = 0;
  let sound: Box | null = null;
  for (const box of boxesIn(moov, 0, moov.length)) {
    if (box.type === "mvhd")
      movieScale = view.getUint32(box.start + (moov[box.start] === 1 ? 20 : 12), false);
    if (box.type !== "trak") continue;
    const handler = descend(moov, box, ["mdia", "hdlr"]);
    const kind = handler ? latin1(moov, handler.start + 8, 4) : "";
    if (kind === "vide") throw new NotAudio("a video file");
    if (kind === "soun" && !sound) sound = box;
  }
  if (!sound) throw new UnsupportedAudio("an MP4 without a sound track");
  const header = descend(moov, sound, ["mdia", "mdhd"]);
  const descriptions = descend(moov, sound, ["mdia", "minf", "stbl", "stsd"]);
  if (!header || !descriptions) throw new UnsupportedAudio("an MP4 whose sound track is not described");
  const long = moov[header.start] === 1;
  const scale = view.getUint32(header.start + (long ? 20 : 12), false);
  const media = long
    ? Number(view.getBigUint64(header.start + 24, false))
    : view.getUint32(header.start + 16, false);
  const entry = descriptions.start + 8;
  const coding = latin1(moov, entry + 4, 4);
  const codec = coding === "mp4a" ? "AAC" : coding === "alac" ? "ALAC" : "";
  if (!codec) throw new UnsupportedAudio(`an MP4 with sound coded as "${coding.trim()}"`);
  const edit = descend(moov, sound, ["edts", "elst"]);
  const presented = edit && movieScale > 0 ? (editedS(view, edit) * scale) / movieScale : 0;
  return {
    codec,
    sampleRateHz: scale,
    channels: view.getUint16(entry + 24, false),
    declaredSamples: presented > 0 ? Math.round(presented) : media,
  };
}

/** Sum of the edit list's segments that show media, in the movie's time scale. */
function editedS(view: DataView, box: Box): number {
  const long = view.getUint8(box.start) === 1;
  const count = view.getUint32(box.start + 4, false);
  let total = 0;
  for (let i = 0, at = box.start + 8; i < count && at + (long ? 20 : 12) <= box.end; i++) {
    const duration = long ? Number(view.getBigUint64(at, false)) : view.getUint32(at, false);
    const mediaTime = long ? Number(view.getBigInt64(at + 8, false)) : view.getInt32(at + 4, false);
    if (mediaTime >= 0) total += duration;
    at += long ? 20 : 12;
  }
  return total;
}

function* boxesIn(bytes: Uint8Array, start: number, end: number): Generator<Box> {
  const view = viewOf(bytes);
  for (let at = start; at + 8 <= end; ) {
    let size = view.getUint32(at, false);
    let header = 8;
    if (size === 1 && at + 16 <= end) {
      size = Number(view.getBigUint64(at + 8, false));
      header = 16;
    } else if (size === 0) size = end - at;
    if (size < header || at + size > end) return;
    yield { type: latin1(bytes, at + 4, 4), start: at + header, end: at + size };
    at += size;
  }
}

function descend(bytes: Uint8Array, from: Box, path: readonly string[]): Box | null {
  let box = from;
  for (const type of path) {
    let next: Box | null = null;
    for (const child of boxesIn(bytes, box.start, box.end)) {
      if (child.type === type) {
        next = child;
        break;
      }
    }
    if (!next) return null;
    box = next;
  }
  return box;
}
