import { readAiff } from "./aiff";
import { type ByteSource, latin1, viewOf } from "./byte-source";
import { CONTAINER_EXTENSIONS, type ContainerFacts, type ContainerName } from "./container-facts";
import { NotAudio, Truncated, UnsupportedAudio } from "./errors";
import { readAdts, readFlac, readMp3, readOgg, type StreamFacts } from "./lossy-headers";
import { readMp4 } from "./mp4-header";
import { type LinearFacts, readRiff } from "./riff";

const RATE_HZ_MIN = 4000;
const RATE_HZ_MAX = 384000;
const CHANNELS_MAX = 32;

/**
 * Says what the bytes of a file really are, from the bytes alone; the name is only compared with them.
 *
 * Input:   any source
 * Output:  ContainerFacts; nothing is decoded
 * Throws:  NotAudio (with what the file is instead), UnsupportedAudio, Truncated where even the header is missing
 */
export async function probeSource(source: ByteSource): Promise<ContainerFacts> {
  if (source.sizeBytes === 0) throw new NotAudio("empty");
  const head = await source.read(0, 512);
  let facts: ContainerFacts;
  try {
    facts = await readFacts(source, head);
  } catch (error) {
    // A header that points outside itself: the readers use bounds-checked views.
    if (error instanceof RangeError) throw new NotAudio(`${describeBytes(head)} with a broken header`);
    throw error;
  }
  const { sampleRateHz, channels } = facts;
  if (sampleRateHz < RATE_HZ_MIN || sampleRateHz > RATE_HZ_MAX || channels < 1 || channels > CHANNELS_MAX) {
    throw new UnsupportedAudio(`${channels} channels at ${sampleRateHz} Hz`);
  }
  return facts;
}

async function readFacts(source: ByteSource, head: Uint8Array): Promise<ContainerFacts> {
  const magic = latin1(head, 0, 4);
  const kind = latin1(head, 8, 4);
  if ((magic === "RIFF" || magic === "RF64" || magic === "BW64") && kind === "WAVE") {
    return fromLinear(source, await readRiff(source));
  }
  if (magic === "FORM" && (kind === "AIFF" || kind === "AIFC"))
    return fromLinear(source, await readAiff(source));
  if (magic === "OggS") {
    const ogg = await readOgg(source);
    const container = ogg.codec === "Opus" ? "Ogg Opus" : ogg.codec === "FLAC" ? "Ogg FLAC" : "Ogg Vorbis";
    return fromStream(source, container, ogg, 0);
  }
  if (latin1(head, 4, 4) === "ftyp") {
    const movie = await readMp4(source);
    if (movie.sampleRateHz === 0) throw new Truncated(0, null);
    return { ...fromStream(source, "M4A", movie, 0), indexAtEnd: movie.indexAtEnd };
  }
  const unread = UNREAD_AUDIO[magic];
  if (unread) throw new UnsupportedAudio(unread);
  const offset = await afterId3(source, head);
  const start = offset === 0 ? head : await source.read(offset, 512);
  if (latin1(start, 0, 4) === "fLaC") {
    const flac = await readFlac(source, offset);
    return { ...fromStream(source, "FLAC", flac, offset), bitDepth: flac.bitDepth };
  }
  const mp3 = await readMp3(source, offset);
  if (mp3) return fromStream(source, "MP3", mp3, offset);
  const adts = await readAdts(source, offset);
  if (adts) return fromStream(source, "AAC", adts, offset);
  throw new NotAudio(offset > 0 ? "a tag with no audio behind it" : describeBytes(head));
}

/** Size of the ID3v2 tags in front (ID3v2.4, 3.1: four bytes of seven bits). */
async function afterId3(source: ByteSource, head: Uint8Array): Promise<number> {
  let offset = 0;
  let bytes = head;
  for (let i = 0; i < 4 && latin1(bytes, 0, 3) === "ID3" && bytes.length >= 10; i++) {
    const size = (bytes[6]! << 21) | (bytes[7]! << 14) | (bytes[8]! << 7) | bytes[9]!;
    offset += 10 + size + (bytes[5]! & 0x10 ? 10 : 0);
    bytes = await source.read(offset, 512);
  }
  return offset;
}

function named(
  source: ByteSource,
  container: ContainerName,
): Pick<ContainerFacts, "container" | "claimedExtension" | "extensionAgrees" | "sizeBytes"> {
  const dot = source.name.lastIndexOf(".");
  const claimedExtension = dot < 0 ? "" : source.name.slice(dot + 1).toLowerCase();
  return {
    container,
    claimedExtension,
    extensionAgrees: CONTAINER_EXTENSIONS[container].includes(claimedExtension),
    sizeBytes: source.sizeBytes,
  };
}

function fromLinear(source: ByteSource, linear: LinearFacts): ContainerFacts {
  const { sampleRateHz, declaredFrames, pcm } = linear;
  const declaredS = declaredFrames / sampleRateHz;
  return {
    ...named(source, linear.container),
    codec: linear.float ? "IEEE float" : "PCM",
    lossless: true,
    sampleRateHz,
    bitDepth: linear.bitDepth,
    float: linear.float,
    channels: linear.channels,
    declaredS,
    declaredSamples: declaredFrames,
    truncated: pcm.frames < declaredFrames ? { readableS: pcm.frames / sampleRateHz, declaredS } : null,
    bext: linear.bext,
    tags: linear.tags,
    pcm,
    streamOffset: 0,
    indexAtEnd: false,
  };
}

function fromStream(
  source: ByteSource,
  container: ContainerName,
  stream: StreamFacts,
  streamOffset: number,
): ContainerFacts {
  const { sampleRateHz, declaredSamples } = stream;
  const declaredS = declaredSamples === null ? null : declaredSamples / sampleRateHz;
  // A stream whose end is missing declares nothing about the whole; an MP4's index does.
  const wholeS = container === "M4A" ? declaredS : null;
  return {
    ...named(source, container),
    codec: stream.codec,
    lossless: stream.codec === "FLAC" || stream.codec === "ALAC",
    sampleRateHz,
    bitDepth: null,
    float: false,
    channels: stream.channels,
    declaredS,
    declaredSamples,
    truncated: stream.cutShort ? { readableS: 0, declaredS: wholeS } : null,
    bext: null,
    tags: stream.tags,
    pcm: null,
    streamOffset,
    indexAtEnd: false,
  };
}

const SIGNATURES: readonly (readonly [offset: number, bytes: string, what: string])[] = [
  [0, "PK\x03\x04", "a ZIP archive or an office document"],
  [0, "%PDF", "a PDF document"],
  [0, "\x89PNG", "a PNG picture"],
  [0, "\xff\xd8\xff", "a JPEG picture"],
  [0, "GIF8", "a GIF picture"],
  [0, "\x1f\x8b", "a gzip archive"],
  [0, "7z\xbc\xaf", "a 7z archive"],
  [0, "Rar!", "a RAR archive"],
  [0, "\x1aE\xdf\xa3", "a Matroska or WebM file"],
  [0, "MThd", "a MIDI file (notes, no sound)"],
  [0, "\x7fELF", "a program"],
  [0, "MZ", "a program"],
  [8, "AVI ", "a video file"],
  [0, "SQLite", "a database"],
];

/** Sound in containers that are neither masters nor common enough to read; the key is the file's first bytes. */
const UNREAD_AUDIO: Record<string, string> = {
  wvpk: "a WV stream",
  "MAC ": "an APE stream",
  "0&\xb2u": "an ASF stream",
  caff: "a CAF file",
};

/** What bytes that are no readable audio are, in words for the person who picked the file. */
export function describeBytes(head: Uint8Array): string {
  for (const [offset, bytes, what] of SIGNATURES) {
    if (latin1(head, offset, bytes.length) === bytes) return what;
  }
  const view = viewOf(head);
  if (head.length >= 4 && view.getUint32(0, false) === 0) return "a file that begins with empty bytes";
  const printable = head.every((byte) => byte >= 32 || byte === 9 || byte === 10 || byte === 13);
  if (!printable) return "a file of unknown kind";
  const text = latin1(head, 0, head.length).trimStart().toLowerCase();
  return text.startsWith("<!doctype html") || text.startsWith("<html") ? "a web page" : "a text file";
}
