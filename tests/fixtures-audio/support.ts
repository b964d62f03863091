import type { StereoAudio } from "@/fixtures/audio";

export function db(ratio: number): number {
  return 20 * Math.log10(Math.max(ratio, 1e-12));
}

/** Root mean square of both channels over a span of samples. */
export function rms({ channels }: StereoAudio, from = 0, to = channels[0].length): number {
  let sum = 0;
  for (const channel of channels)
    for (let index = from; index < to; index++) sum += channel[index]! * channel[index]!;
  return Math.sqrt(sum / (2 * Math.max(1, to - from)));
}

export function minus(a: StereoAudio, b: StereoAudio): StereoAudio {
  const side = (which: 0 | 1): Float32Array =>
    a.channels[which].map((value, index) => value - b.channels[which][index]!);
  return { sampleRateHz: a.sampleRateHz, channels: [side(0), side(1)] };
}

export function plus(...parts: readonly StereoAudio[]): StereoAudio {
  const first = parts[0]!;
  const side = (which: 0 | 1): Float32Array =>
    first.channels[which].map((_, index) =>
      parts.reduce((sum, part) => sum + part.channels[which][index]!, 0),
    );
  return { sampleRateHz: first.sampleRateHz, channels: [side(0), side(1)] };
}

export interface Agreement {
  readonly lagSamples: number;
  /** Normalised correlation at that lag, −1 to 1. */
  readonly correlation: number;
}

/** Best lag of a span of `query` inside `reference`, by brute force over a range of lags. */
export function correlate(
  query: Float32Array,
  reference: Float32Array,
  span: { from: number; length: number; lagFrom: number; lagTo: number; step?: number },
): Agreement {
  let best: Agreement = { lagSamples: 0, correlation: -1 };
  const step = span.step ?? 1;
  for (let lag = span.lagFrom; lag <= span.lagTo; lag += step) {
    let dot = 0;
    let a = 0;
    let b = 0;
    for (let index = span.from; index < span.from + span.length; index += step) {
      const x = query[index] ?? 0;
      const y = reference[index + lag] ?? 0;
      dot += x * y;
      a += x * x;
      b += y * y;
    }
    const correlation = dot / Math.sqrt(a * b + 1e-20);
    if (correlation > best.correlation) best = { lagSamples: lag, correlation };
  }
  return best;
}
