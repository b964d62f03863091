import type { ContainerFacts } from "./container-facts";
import { decodeStream } from "./decode-stream";
import { encodeTimeoutMs } from "./encode-flac";
import { EncodeFailed } from "./errors";
import { MASTER_RATE_HZ, streamAt48k } from "./hearing-stream";
import { LoudnessMeter } from "./loudness";
import { descriptorPath, runFfmpeg, withOutput } from "./native";
import { feedBlocks } from "./native-feed";
import { MarkMixer, markTimes } from "./preview-mark";
import { probe } from "./probe";
import { TruePeakMeter } from "./true-peak";

export interface PreviewOptions {
  /** The recording's id: fixes where the marks stand. */
  seed: string;
  /** From the measured master, so that it is not measured again; both at once or neither. */
  loudness?: { integratedLufs: number | null; truePeakDbtp: number | null };
  bitRateKbps?: 192 | 224 | 256 | 320;
  /** Without the audible mark, for those who may have it so. */
  unmarked?: boolean;
}

export interface Preview {
  durationS: number;
  samples: number;
  sampleRateHz: number;
  channels: number;
  gainDb: number;
  truePeakDbtp: number;
  marksAtS: number[];
}

/** Previews are brought towards this loudness by one gain over the whole file; peaks decide where it is not reached. */
const TARGET_LUFS = -18;
const CEILING_DBTP = -1;
/** Room for what coding adds to the peaks; measured afterwards, and the file made again if it was too little. */
const CODING_ROOM_DB = 1;
const ATTEMPTS = 4;
/** The mark lies this far under the programme's loudness, within bounds that keep it audible and soft (dBFS peak). */
const MARK_UNDER_LU = 9;
const MARK_DBFS: readonly [number, number] = [-45, -24];

/**
 * The preview of a recording: MP3, 48 kHz, full length, marked, sample-aligned with its master.
 *
 * Source:  trade practice: at least 192 kbit/s, a mark irregular every 15–25 s and none in the first 5 s, peaks at or
 *          under −1 dBTP. The LAME tag carries encoder delay and padding, so that a decoder that honours it starts and
 *          ends with the master.
 * Output:  the file at outPath; its true peak is measured from the decoded MP3
 * Edges:   more than two channels: the first two. A recording of 5.62 s or less carries no mark.
 * Throws:  as decodeStream; Truncated, Damaged, EncodeFailed
 */
export async function encodePreview(
  inPath: string,
  outPath: string,
  options: PreviewOptions,
): Promise<Preview> {
  const facts = await probe(inPath);
  const channels = Math.min(2, facts.channels);
  const { integratedLufs, truePeakDbtp } = options.loudness ?? (await measureLoudness(inPath, facts));
  const level = integratedLufs ?? TARGET_LUFS;
  let gainDb = Math.min(TARGET_LUFS - level, CEILING_DBTP - CODING_ROOM_DB - (truePeakDbtp ?? -100));
  if (integratedLufs === null) gainDb = 0;
  for (let attempt = 1; ; attempt++) {
    const made = await encodeOnce(inPath, outPath, facts, channels, gainDb, level, options);
    const peak = await measureLoudness(outPath, await probe(outPath));
    const peakDbtp = peak.truePeakDbtp ?? -200;
    if (peakDbtp <= CEILING_DBTP) {
      return { ...made, sampleRateHz: MASTER_RATE_HZ, channels, gainDb, truePeakDbtp: peakDbtp };
    }
    if (attempt === ATTEMPTS)
      throw new EncodeFailed(`the preview still peaks at ${peakDbtp.toFixed(2)} dBTP`);
    gainDb -= peakDbtp - CEILING_DBTP + 0.1;
  }
}

async function encodeOnce(
  inPath: string,
  outPath: string,
  facts: ContainerFacts,
  channels: number,
  gainDb: number,
  level: number,
  options: PreviewOptions,
): Promise<{ durationS: number; samples: number; marksAtS: number[] }> {
  const gain = 10 ** (gainDb / 20);
  const lengthS = facts.declaredS ?? 0;
  const marksAtS = options.unmarked ? [] : markTimes(lengthS, options.seed);
  const markDb = Math.max(MARK_DBFS[0], Math.min(MARK_DBFS[1], level + gainDb - MARK_UNDER_LU));
  const mixer = new MarkMixer(marksAtS, MASTER_RATE_HZ, 10 ** (markDb / 20));
  let samples = 0;
  await withOutput(outPath, (output) =>
    runFfmpeg({
      args: [
        ...["-f", "f32le", "-ar", String(MASTER_RATE_HZ), "-ac", String(channels), "-i", "pipe:0"],
        ...["-c:a", "libmp3lame", "-b:a", `${options.bitRateKbps ?? 192}k`, "-write_xing", "1"],
        ...["-map_metadata", "-1", "-id3v2_version", "0", "-f", "mp3", "-y", descriptorPath(3)],
      ],
      output,
      timeoutMs: encodeTimeoutMs(facts.declaredS),
      feed: (stdin) =>
        feedBlocks(stdin, (write) =>
          streamAt48k(
            inPath,
            channels,
            async (block) => {
              const scaled = block.map((channel) => channel.map((value) => value * gain));
              mixer.mix(scaled);
              samples += scaled[0]!.length;
              await write(scaled);
            },
            { facts },
          ),
        ),
    }),
  );
  return { durationS: samples / MASTER_RATE_HZ, samples, marksAtS };
}

async function measureLoudness(
  path: string,
  facts: ContainerFacts,
): Promise<{ integratedLufs: number | null; truePeakDbtp: number | null }> {
  const loudness = new LoudnessMeter(facts.sampleRateHz, facts.channels);
  const truePeak = new TruePeakMeter(facts.sampleRateHz, facts.channels, Number.POSITIVE_INFINITY);
  await decodeStream(
    path,
    (channels) => {
      loudness.push(channels);
      truePeak.push(channels);
    },
    { facts },
  );
  const { peak } = truePeak.finish();
  return {
    integratedLufs: loudness.finish().integratedLufs,
    truePeakDbtp: peak > 0 ? 20 * Math.log10(peak) : null,
  };
}
