import type { ContainerFacts } from "./container-facts";
import { assertComplete } from "./decode-source";
import { decodeStream, type FileDecodeOptions } from "./decode-stream";
import { SincResampler } from "./sinc-resampler";

/** The rate of everything this room writes: post-production runs at 48 kHz. */
export const MASTER_RATE_HZ = 48000;

/**
 * Decodes a whole file to planar blocks at 48 kHz, at most `channelsMax` wide.
 *
 * Output:  round(samples · 48000 / rate) samples in all; files at 48 kHz pass through untouched
 * Throws:  as decodeStream; Truncated and Damaged rather than give a part
 */
export async function streamAt48k(
  path: string,
  channelsMax: number,
  onBlock: (channels: Float32Array[]) => Promise<void>,
  options: FileDecodeOptions & { facts: ContainerFacts },
): Promise<void> {
  const fromHz = options.facts.sampleRateHz;
  let resamplers: SincResampler[] | null = null;
  const outcome = await decodeStream(
    path,
    async (channels) => {
      const kept = channels.slice(0, channelsMax);
      if (fromHz === MASTER_RATE_HZ) return onBlock(kept);
      resamplers ??= kept.map(() => new SincResampler({ fromHz, toHz: MASTER_RATE_HZ }));
      const made = kept.map((channel, c) => resamplers![c]!.push(channel));
      if (made[0]!.length > 0) await onBlock(made);
    },
    options,
  );
  assertComplete(outcome);
  const rest = (resamplers as SincResampler[] | null)?.map((resampler) => resampler.finish()) ?? [];
  if (rest[0] && rest[0].length > 0) await onBlock(rest);
}
