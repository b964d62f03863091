import { type Check, spaced, withUnit } from "./check-row";
import type { ContainerFacts } from "./container-facts";
import { decodedBlocks } from "./decode-source";
import { Damaged, Truncated } from "./errors";
import { openFileSource } from "./file-source";
import { probeSource } from "./probe-source";

export interface StemsContext {
  /** The deliverer says that the mix went through processing that the stems did not. */
  busProcessingDeclared?: boolean;
}

const NULL_DB = -30;
/** Above this the sum is no version of the mix at all. */
const UNRELATED_DB = -10;
const FRAMES = 1 << 14;

/**
 * Whether stems have the mix's start and length and add up to it.
 *
 * Source:  common practice: the sum nulls against the mix to −30 dB or better.
 * Output:  one row of code T06
 * Edges:   compares the first two channels; mono stems count on both sides. Nothing is compared at unequal lengths.
 * Throws:  as decodeStream; Truncated or Damaged for a broken file
 */
export async function checkStems(
  mixPath: string,
  stemPaths: readonly string[],
  context: StemsContext = {},
): Promise<Check> {
  const opened: FrameReader[] = [];
  try {
    for (const path of [mixPath, ...stemPaths]) opened.push(await FrameReader.open(path));
    const [mix, ...stems] = opened as [FrameReader, ...FrameReader[]];
    const odd = stems.find(
      ({ facts }) =>
        facts.sampleRateHz !== mix.facts.sampleRateHz || facts.declaredSamples !== mix.facts.declaredSamples,
    );
    if (odd) return unequal(mix, odd);
    return judge(await nullDb(mix, stems), context);
  } finally {
    for (const reader of opened) await reader.close();
  }
}

async function nullDb(mix: FrameReader, stems: readonly FrameReader[]): Promise<number> {
  let level = 0;
  let left = 0;
  for (;;) {
    const whole = await mix.next(FRAMES);
    const parts = await Promise.all(stems.map((stem) => stem.next(FRAMES)));
    const frames = whole[0]?.length ?? 0;
    if (frames === 0) break;
    for (const side of [0, 1] as const) {
      const x = whole[side]!;
      for (let i = 0; i < frames; i++) {
        let sum = 0;
        for (const part of parts) sum += part[side]![i] ?? 0;
        level += x[i]! * x[i]!;
        left += (x[i]! - sum) ** 2;
      }
    }
  }
  return level > 0 ? Math.max(-120, 10 * Math.log10(left / level + 1e-30)) : 0;
}

const LIMIT = `same start and length; the sum nulls against the mix to ${withUnit(NULL_DB, 0, "dB")} or better`;

function unequal(mix: FrameReader, stem: FrameReader): Check {
  const text = ({ facts }: FrameReader): string =>
    `${withUnit(facts.declaredS ?? 0, 3, "s")} at ${withUnit(facts.sampleRateHz / 1000, 1, "kHz")}`;
  return {
    code: "T06",
    check: "stems",
    verdict: "return",
    what: spaced(`The stem ${stem.name} has another length or rate than the mix.`),
    measured: spaced(`stem ${text(stem)}, mix ${text(mix)}`),
    limit: spaced(LIMIT),
    remedy: "Export every stem and the mix over the same range, at the same rate.",
  };
}

function judge(residualDb: number, context: StemsContext): Check {
  const row = {
    code: "T06" as const,
    check: "stems",
    measured: spaced(`the mix less the sum lies at ${withUnit(residualDb, 1, "dB")} of the mix`),
    limit: spaced(LIMIT),
  };
  if (residualDb <= NULL_DB) return { ...row, verdict: "pass", what: "The stems add up to the mix." };
  if (context.busProcessingDeclared) {
    return {
      ...row,
      verdict: "pass",
      what: "The stems differ from the mix by its bus processing, as declared.",
    };
  }
  return {
    ...row,
    verdict: residualDb > UNRELATED_DB ? "return" : "warn",
    what:
      residualDb > UNRELATED_DB
        ? "The stems do not add up to the mix."
        : "The stems add up to the mix with a small difference.",
    remedy: "Check that no stem is missing, late or at another level; or declare processing on the mix bus.",
  };
}

/** Pulls any number of frames from a file, two channels wide; shorter only at the end. */
class FrameReader {
  private readonly held: [Float32Array, Float32Array][] = [];
  private ended = false;

  private constructor(
    readonly name: string,
    readonly facts: ContainerFacts,
    private readonly blocks: AsyncGenerator<[Float32Array, Float32Array]>,
    private readonly closeSource: () => Promise<void>,
  ) {}

  static async open(path: string): Promise<FrameReader> {
    const source = await openFileSource(path);
    try {
      const facts = await probeSource(source);
      return new FrameReader(source.name, facts, pulled(decodedBlocks(source, facts), facts), () =>
        source.close(),
      );
    } catch (error) {
      await source.close();
      throw error;
    }
  }

  async next(frames: number): Promise<[Float32Array, Float32Array]> {
    let have = this.held.reduce((sum, [left]) => sum + left.length, 0);
    while (have < frames && !this.ended) {
      const { value, done } = await this.blocks.next();
      if (done) this.ended = true;
      else {
        this.held.push(value);
        have += value[0].length;
      }
    }
    const take = Math.min(frames, have);
    const out: [Float32Array, Float32Array] = [new Float32Array(take), new Float32Array(take)];
    for (let at = 0; at < take; ) {
      const [left, right] = this.held[0]!;
      const part = Math.min(left.length, take - at);
      out[0].set(left.subarray(0, part), at);
      out[1].set(right.subarray(0, part), at);
      if (part === left.length) this.held.shift();
      else this.held[0] = [left.subarray(part), right.subarray(part)];
      at += part;
    }
    return out;
  }

  async close(): Promise<void> {
    await this.blocks.return(undefined);
    await this.closeSource();
  }
}

/** The decoder's blocks; a file that ends early or does not decode is refused, never padded. */
async function* pulled(
  blocks: ReturnType<typeof decodedBlocks>,
  facts: ContainerFacts,
): AsyncGenerator<[Float32Array, Float32Array]> {
  let samples = 0;
  for await (const block of blocks) {
    if (block.error) throw new Damaged(samples / facts.sampleRateHz, facts.declaredS, block.error);
    const left = block.channels[0];
    if (!left) continue;
    samples += left.length;
    yield [left, block.channels[1] ?? left];
  }
  if (facts.truncated) throw new Truncated(samples / facts.sampleRateHz, facts.declaredS);
  if (facts.lossless && facts.declaredSamples !== null && samples !== facts.declaredSamples) {
    throw new Damaged(samples / facts.sampleRateHz, facts.declaredS, "samples are missing");
  }
}
