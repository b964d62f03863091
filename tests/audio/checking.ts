import {
  type Check,
  type CheckContext,
  type ContainerFacts,
  createMeter,
  type Measures,
  technicalChecks,
} from "@/lib/audio";
import { CHORDS, song } from "./signals";

export const RATE = 48000;
const FACTS: ContainerFacts = {
  container: "WAV",
  codec: "PCM",
  lossless: true,
  sizeBytes: 1000,
  claimedExtension: "wav",
  extensionAgrees: true,
  sampleRateHz: RATE,
  bitDepth: 24,
  float: false,
  channels: 2,
  declaredS: null,
  declaredSamples: null,
  truncated: null,
  bext: null,
  tags: {},
  pcm: null,
  streamOffset: 0,
  indexAtEnd: false,
};
const FULL: CheckContext = { versionRole: "full", endingDeclared: "ring-out" };

const known = new Map<string, [Float32Array, Float32Array]>();

/** Music of a usual level, whose last note has died away at the end. Each call gives arrays of its own. */
export function music(durationS: number, soundS = durationS - 0.5): [Float32Array, Float32Array] {
  const key = `${durationS} ${soundS}`;
  const made = known.get(key) ?? compose(durationS, soundS);
  known.set(key, made);
  return [made[0].slice(), made[1].slice()];
}

function compose(durationS: number, soundS: number): [Float32Array, Float32Array] {
  const [left, right] = song({ rateHz: RATE, bpm: 100, durationS: soundS - 3, chords: [CHORDS.C, CHORDS.F] });
  return [left, right].map((side, c) => {
    const out = new Float32Array(Math.round(durationS * RATE));
    out.set(side);
    const fade = Math.round(0.15 * RATE);
    const end = side.length;
    for (let i = 0; i < fade; i++) out[end - fade + i] = out[end - fade + i]! * (1 - i / fade);
    // The last chord rings out for three seconds.
    const [ring] = song({ rateHz: RATE, bpm: 20, durationS: 3, chords: [CHORDS.C] });
    for (let i = 0; i < ring.length && end + i < out.length; i++) {
      out[end + i] = ring[i]! * (c === 0 ? 1 : 0.8) * Math.exp(-i / (0.5 * RATE));
    }
    return out;
  }) as [Float32Array, Float32Array];
}

const measured = new WeakMap<readonly Float32Array[], Measures>();

function measure(channels: readonly Float32Array[]): Measures {
  const meter = createMeter(RATE, channels.length);
  for (let i = 0; i < channels[0]!.length; i += 9973)
    meter.push(channels.map((c) => c.subarray(i, i + 9973)));
  return meter.finish();
}

export function check(
  channels: readonly Float32Array[],
  context: Partial<CheckContext> = {},
  facts: Partial<ContainerFacts> = {},
) {
  const measures = measured.get(channels) ?? measure(channels);
  measured.set(channels, measures);
  const rows = technicalChecks({ ...FACTS, channels: channels.length, ...facts }, measures, {
    ...FULL,
    ...context,
  });
  const row = (name: string): Check | undefined => rows.find((r) => r.check === name);
  return { measures, rows, row, verdict: (name: string) => row(name)?.verdict };
}
