import type { Bext, BextInput } from "./bext";
import { MASTER_RATE_HZ, streamAt48k } from "./hearing-stream";
import { probe } from "./probe";
import { seededRandom } from "./random";
import { createWavWriter } from "./wav-writer";

export interface RenderedMaster {
  durationS: number;
  samples: number;
  channels: number;
  bytes: number;
  /** False if the samples are those of the delivered file, to the bit. */
  converted: boolean;
}

const LSB_24 = 1 / 8388608;
const DITHER_SEED = 0x5ed6;

/**
 * The licensed master: 48 kHz, 24 bit Broadcast Wave.
 *
 * Source:  bext as in EBU Tech 3285 v2; triangular dither of ±1 least significant bit wherever samples are rounded
 *          anew (S. P. Lipshitz et al., J. AES 40(5), 1992), from a fixed seed: the same input gives the same bytes.
 * Edges:   48 kHz files of up to 24 bit are copied sample for sample. Float values over full scale are clipped:
 *          technicalChecks returns such files before this is called.
 * Throws:  as decodeStream, and Truncated or Damaged rather than render a part
 */
export async function renderMaster(
  inPath: string,
  outPath: string,
  bext: BextInput,
): Promise<RenderedMaster> {
  const facts = await probe(inPath);
  const exact =
    facts.sampleRateHz === MASTER_RATE_HZ && facts.lossless && !facts.float && (facts.bitDepth ?? 24) <= 24;
  const random = seededRandom(DITHER_SEED);
  const writer = await createWavWriter(outPath, facts.channels, MASTER_RATE_HZ, bext);
  try {
    await streamAt48k(
      inPath,
      facts.channels,
      async (channels) => {
        if (exact) return writer.write(channels);
        const dithered = channels.map((channel) =>
          channel.map((value) => value + (random() - random()) * LSB_24),
        );
        await writer.write(dithered);
      },
      { facts },
    );
  } catch (error) {
    await writer.abandon();
    throw error;
  }
  const { frames, bytes } = await writer.finish();
  return {
    durationS: frames / MASTER_RATE_HZ,
    samples: frames,
    channels: facts.channels,
    bytes,
    converted: !exact,
  };
}

/** The bext chunk of a file, or null. */
export async function readBext(path: string): Promise<Bext | null> {
  return (await probe(path)).bext;
}
