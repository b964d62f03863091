import { createResampler, decodeStream, probe } from "@/lib/audio";
import {
  type Channel,
  comparability,
  createFingerprinter,
  ENGINE_VERSION,
  packFingerprint,
} from "@/lib/fingerprint";
import type { FingerprintRow } from "../fingerprints";

/** Left and right below this correlation are two images: then each side is searched as well as the middle. */
const CORRELATION_OF_ONE_IMAGE = 0.3;
/** A short loop is fingerprinted repeated, as it is used, so that a landmark across its seam counts too. */
const LOOP_REPEATED_TO_S = 20;

export interface FingerprintFileResult {
  engineVersion: number;
  rows: FingerprintRow[];
  complete: boolean;
  readableS: number;
  what: string;
}

/** Decodes one file once, streaming, and fingerprints its middle and its sides. Memory is bounded whatever its length. */
export async function fingerprintFile(
  args: { path: string; isLoop?: boolean },
  progress: (done: number, of: number, words: string) => void,
): Promise<FingerprintFileResult> {
  const facts = await probe(args.path);
  const takes: readonly Channel[] = facts.channels > 1 ? ["mid", "left", "right"] : ["mid"];
  const lanes = takes.map((channel) => ({
    channel,
    resampler: createResampler(facts.sampleRateHz, channel),
    print: createFingerprinter(),
  }));
  const loop: Float32Array[] = [];
  const image = { ll: 0, rr: 0, lr: 0 };
  const outcome = await decodeStream(
    args.path,
    (channels, offsetSamples) => {
      addImage(image, channels);
      for (const lane of lanes) {
        const low = lane.resampler.push(channels);
        if (args.isLoop && lane.channel === "mid") loop.push(low);
        else lane.print.push(low);
      }
      progress(offsetSamples / facts.sampleRateHz, facts.declaredS ?? 0, "reading");
    },
    { facts },
  );
  for (const lane of lanes) {
    const rest = lane.resampler.finish();
    if (args.isLoop && lane.channel === "mid") {
      loop.push(rest);
      const lengthS = loop.reduce((total, block) => total + block.length, 0) / 11_025;
      for (let repeat = 0; repeat < Math.max(1, Math.ceil(LOOP_REPEATED_TO_S / lengthS)); repeat++)
        for (const block of loop) lane.print.push(block);
    } else lane.print.push(rest);
  }
  const oneImage = correlation(image) >= CORRELATION_OF_ONE_IMAGE;
  const rows = lanes
    .filter((lane) => lane.channel === "mid" || lane.channel === "left" || !oneImage)
    .map((lane): FingerprintRow => {
      const fp = lane.print.finish();
      return {
        channel: lane.channel,
        packed: packFingerprint(fp),
        durationS: fp.durationS,
        contentS: fp.contentS,
        comparable: comparability(fp).comparable,
        notComparable: fp.notComparable,
      };
    });
  return {
    engineVersion: ENGINE_VERSION,
    rows,
    complete: outcome.complete,
    readableS: outcome.readableS,
    what: outcome.what,
  };
}

function addImage(image: { ll: number; rr: number; lr: number }, channels: readonly Float32Array[]): void {
  const [left, right] = channels;
  if (!left || !right) return;
  for (let i = 0; i < left.length; i++) {
    const l = left[i] ?? 0;
    const r = right[i] ?? 0;
    image.ll += l * l;
    image.rr += r * r;
    image.lr += l * r;
  }
}

function correlation(image: { ll: number; rr: number; lr: number }): number {
  const scale = Math.sqrt(image.ll * image.rr);
  return scale === 0 ? 0 : image.lr / scale;
}
