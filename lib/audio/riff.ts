import { type Bext, parseBext, parseInfoList } from "./bext";
import { type ByteSource, latin1, viewOf } from "./byte-source";
import type { PcmLayout } from "./container-facts";
import { NotAudio, UnsupportedAudio } from "./errors";

export interface LinearFacts {
  container: "WAV" | "RF64" | "BW64" | "AIFF" | "AIFC";
  sampleRateHz: number;
  bitDepth: number;
  float: boolean;
  channels: number;
  declaredFrames: number;
  pcm: PcmLayout;
  bext: Bext | null;
  tags: Record<string, string>;
}

const WAVE_PCM = 1;
const WAVE_FLOAT = 3;
const WAVE_EXTENSIBLE = 0xfffe;
const SIZE_IN_DS64 = 0xffffffff;
/** More chunks than any real writer makes; stops a file built to make the walk endless. */
const CHUNKS_MAX = 4096;
const TEXT_CHUNK_BYTES_MAX = 1 << 20;

interface Format {
  tag: number;
  channels: number;
  sampleRateHz: number;
  blockAlign: number;
  bitDepth: number;
}

interface Chunk {
  id: string;
  offset: number;
  declaredBytes: number;
}

/**
 * Reads the headers of WAV, RF64 and BW64.
 *
 * Source:  RIFF as in EBU Tech 3285; RF64 and BW64 as in EBU Tech 3306 and ITU-R BS.2088 (64-bit sizes in `ds64`).
 * Edges:   a chunk of odd size is followed by a pad byte; writers that forget the pad are recognised. A data size
 *          of 0 or 0xFFFFFFFF without ds64 (an unfinished recording) means "to the end of the file".
 * Throws:  NotAudio without a format or data chunk, UnsupportedAudio for codings other than linear PCM and float.
 */
export async function readRiff(source: ByteSource): Promise<LinearFacts> {
  const head = await source.read(0, 12);
  const magic = latin1(head, 0, 4);
  const container = magic === "RF64" ? "RF64" : magic === "BW64" ? "BW64" : "WAV";
  let dataBytes64: number | null = null;
  let format: Format | null = null;
  let data: Chunk | null = null;
  let bext: Bext | null = null;
  let tags: Record<string, string> = {};
  for await (const chunk of riffChunks(source, () => dataBytes64)) {
    const body = (bytes: number): Promise<Uint8Array> =>
      source.read(chunk.offset, Math.min(chunk.declaredBytes, bytes));
    if (chunk.id === "ds64") {
      const ds64 = await body(28);
      if (ds64.length >= 16) dataBytes64 = Number(viewOf(ds64).getBigUint64(8, true));
    } else if (chunk.id === "fmt ") format = parseFormat(await body(64));
    else if (chunk.id === "bext") bext = parseBext(await body(TEXT_CHUNK_BYTES_MAX));
    else if (chunk.id === "LIST") tags = { ...tags, ...parseInfoList(await body(TEXT_CHUNK_BYTES_MAX)) };
    else if (chunk.id === "data" && !data) data = chunk;
  }
  if (!format) throw new NotAudio("a RIFF file without a format chunk");
  if (!data) throw new NotAudio("a RIFF file without audio data");
  return { ...linearFacts(source, format, data), container, bext, tags };
}

async function* riffChunks(source: ByteSource, dataBytes64: () => number | null): AsyncGenerator<Chunk> {
  let at = 12;
  for (let count = 0; count < CHUNKS_MAX && at + 8 <= source.sizeBytes; count++) {
    const head = await source.read(at, 8);
    if (head.length < 8) return;
    const id = latin1(head, 0, 4);
    const size32 = viewOf(head).getUint32(4, true);
    const openEnded = id === "data" && (size32 === SIZE_IN_DS64 || size32 === 0);
    const toEnd = source.sizeBytes - at - 8;
    const declaredBytes = openEnded ? (size32 === 0 ? toEnd : (dataBytes64() ?? toEnd)) : size32;
    yield { id, offset: at + 8, declaredBytes };
    const end = at + 8 + declaredBytes;
    at = end + (declaredBytes % 2 === 1 && !(await looksLikeChunk(source, end)) ? 1 : 0);
  }
}

/** True if an unpadded neighbour begins at `offset`; a pad byte is NUL and never starts a chunk id. */
async function looksLikeChunk(source: ByteSource, offset: number): Promise<boolean> {
  const id = latin1(await source.read(offset, 4), 0, 4);
  return /^[A-Za-z][A-Za-z0-9_ ]{3}$/.test(id);
}

function parseFormat(body: Uint8Array): Format {
  if (body.length < 16) throw new NotAudio("a RIFF file with a broken format chunk");
  const view = viewOf(body);
  let tag = view.getUint16(0, true);
  let bitDepth = view.getUint16(14, true);
  if (tag === WAVE_EXTENSIBLE && body.length >= 26) {
    tag = view.getUint16(24, true);
    const valid = view.getUint16(18, true);
    if (valid > 0 && valid < bitDepth) bitDepth = valid;
  }
  return {
    tag,
    channels: view.getUint16(2, true),
    sampleRateHz: view.getUint32(4, true),
    blockAlign: view.getUint16(12, true),
    bitDepth,
  };
}

function linearFacts(
  source: ByteSource,
  format: Format,
  data: Chunk,
): Omit<LinearFacts, "container" | "bext" | "tags"> {
  const { tag, channels, sampleRateHz, blockAlign, bitDepth } = format;
  if (tag !== WAVE_PCM && tag !== WAVE_FLOAT) {
    throw new UnsupportedAudio(`WAV coding number ${tag} (only linear PCM and IEEE float are read)`);
  }
  const bytesPerSample = channels > 0 ? blockAlign / channels : 0;
  const float = tag === WAVE_FLOAT;
  const readable = float ? [4, 8] : [1, 2, 3, 4];
  if (sampleRateHz === 0 || !readable.includes(bytesPerSample)) {
    throw new NotAudio(
      `a WAV file with an impossible header (${channels} channels, ${blockAlign} bytes a frame, ${sampleRateHz} Hz)`,
    );
  }
  const present = Math.max(0, Math.min(data.declaredBytes, source.sizeBytes - data.offset));
  return {
    sampleRateHz,
    bitDepth,
    float,
    channels,
    declaredFrames: Math.floor(data.declaredBytes / blockAlign),
    pcm: {
      kind: float ? "float" : bytesPerSample === 1 ? "unsigned" : "signed",
      bytesPerSample,
      littleEndian: true,
      channels,
      dataOffset: data.offset,
      frames: Math.floor(present / blockAlign),
    },
  };
}
