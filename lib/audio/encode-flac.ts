import { assertComplete } from "./decode-source";
import { decodeStream } from "./decode-stream";
import { descriptorPath, runFfmpeg, withOutput } from "./native";
import { feedBlocks, interleaveInteger } from "./native-feed";
import { probe } from "./probe";

/** Encoders get this long for each second of audio, and at least the minimum. */
const ENCODE_MS_PER_S = 200;
export const ENCODE_MS_MIN = 60_000;

export function encodeTimeoutMs(durationS: number | null): number {
  return Math.max(ENCODE_MS_MIN, (durationS ?? 0) * ENCODE_MS_PER_S);
}

/**
 * Any readable file as FLAC at its own rate: 16 bit where the source is, else 24.
 *
 * Output:  samples identical to the source for integer sources of up to 24 bit
 * Throws:  as decodeStream; Truncated, Damaged, EncodeFailed
 */
export async function encodeFlac(inPath: string, outPath: string): Promise<{ samples: number }> {
  const facts = await probe(inPath);
  const bytesPerSample = (facts.bitDepth ?? 24) <= 16 && !facts.float ? 2 : 3;
  const format = bytesPerSample === 2 ? "s16" : "s32";
  let samples = 0;
  await withOutput(outPath, (output) =>
    runFfmpeg({
      args: [
        ...["-f", bytesPerSample === 2 ? "s16le" : "s24le", "-ar", String(facts.sampleRateHz)],
        ...["-ac", String(facts.channels), "-i", "pipe:0", "-c:a", "flac", "-sample_fmt", format],
        ...(bytesPerSample === 3 ? ["-bits_per_raw_sample", "24"] : []),
        ...["-f", "flac", "-y", descriptorPath(3)],
      ],
      output,
      timeoutMs: encodeTimeoutMs(facts.declaredS),
      feed: (stdin) =>
        feedBlocks(
          stdin,
          async (write) => {
            const outcome = await decodeStream(inPath, (channels) => write(channels), { facts });
            assertComplete(outcome);
            samples = outcome.samples;
          },
          (channels) => interleaveInteger(channels, bytesPerSample),
        ),
    }),
  );
  return { samples };
}
