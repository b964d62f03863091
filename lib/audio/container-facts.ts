import type { Bext } from "./bext";

export type ContainerName =
  | "WAV"
  | "RF64"
  | "BW64"
  | "AIFF"
  | "AIFC"
  | "FLAC"
  | "MP3"
  | "AAC"
  | "M4A"
  | "Ogg Vorbis"
  | "Ogg Opus"
  | "Ogg FLAC";

/** Where interleaved linear samples lie in a file, and how they are written. */
export interface PcmLayout {
  kind: "unsigned" | "signed" | "float";
  bytesPerSample: number;
  littleEndian: boolean;
  channels: number;
  dataOffset: number;
  /** Whole frames that are really in the file. */
  frames: number;
}

export interface ContainerFacts {
  container: ContainerName;
  /** "PCM", "IEEE float", "FLAC", "MPEG layer 3", "AAC", "ALAC", "Vorbis" or "Opus". */
  codec: string;
  lossless: boolean;
  sizeBytes: number;
  /** Lower-case, without the dot; empty if the name has none. */
  claimedExtension: string;
  extensionAgrees: boolean;
  sampleRateHz: number;
  /** Null where the coding has no such thing. */
  bitDepth: number | null;
  float: boolean;
  channels: number;
  /** From the header (or a count of frames); null where the file declares none. */
  declaredS: number | null;
  declaredSamples: number | null;
  /** Set when the header already shows that bytes are missing. */
  truncated: { readableS: number; declaredS: number | null } | null;
  bext: Bext | null;
  /** RIFF INFO, AIFF text chunks, Vorbis comments: what was found in the file, by its own key. */
  tags: Record<string, string>;
  pcm: PcmLayout | null;
  /** First byte that a stream decoder should see (past an ID3 tag in front). */
  streamOffset: number;
  /** An MP4 whose index follows its samples cannot be streamed. */
  indexAtEnd: boolean;
}

export const CONTAINER_EXTENSIONS: Record<ContainerName, readonly string[]> = {
  WAV: ["wav", "wave", "bwf"],
  RF64: ["wav", "wave", "rf64", "bwf"],
  BW64: ["wav", "wave", "bw64", "bwf"],
  AIFF: ["aif", "aiff"],
  AIFC: ["aif", "aiff", "aifc"],
  FLAC: ["flac"],
  MP3: ["mp3"],
  AAC: ["aac"],
  M4A: ["m4a", "mp4"],
  "Ogg Vorbis": ["ogg", "oga"],
  "Ogg Opus": ["opus", "ogg", "oga"],
  "Ogg FLAC": ["oga", "ogg"],
};
