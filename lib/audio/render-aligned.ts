import { fitDrift, onsetLag, toAnalysis, waveformLag } from "./align";
import { type AlignedPair, differenceOf, matchLevels } from "./aligned-levels";
import { encodeTimeoutMs } from "./encode-flac";
import { TooLong } from "./errors";
import { MASTER_RATE_HZ } from "./hearing-stream";
import { descriptorPath, runFfmpeg, withOutput } from "./native";
import { feedBlocks } from "./native-feed";
import { probe } from "./probe";
import { ANALYSIS_RATE_HZ } from "./resample";
import { readSegment, type Segment } from "./segment";
import { SIDE_QUICK, SincResampler } from "./sinc-resampler";
import { undoTempoAndPitch } from "./undo-alteration";

export interface AlignedRequest {
  aPath: string;
  aStartS: number;
  aEndS: number;
  bPath: string;
  bStartS: number;
  bEndS: number;
  /** How b runs against a: 1.031 is 3.1 % faster, so that a's time ≈ speed × b's time + offset. */
  speed: number;
  /** +2 if b sounds two semitones higher than a. */
  pitchSemitones: number;
  outPath: string;
  /** Longest stretch that is rendered; it is held in memory. */
  limitS?: number;
}

export interface AlignedRender {
  /** Time in a of the file's first sample. */
  startA: number;
  /** Time in b of the file's first sample, after the fine alignment. */
  startB: number;
  durationS: number;
  method: "unaltered" | "varispeed undone" | "tempo and pitch undone";
  /** What was applied to b so that both sound equally loud. */
  gainDb: number;
  /** Factor for b, as it stands in the file, that cancels best: difference = a − differenceGain · b. */
  differenceGain: number;
  /** Level of that difference against a. Never a null; near 0 dB says that waveforms cannot be compared. */
  residualDb: number;
  /** Speed of b after the fine alignment. */
  speed: number;
}

const LIMIT_S = 600;
const MARGIN_S = 1;
/** Pitch and speed agree as varispeed within this: estimates are exact to 0.009 semitones in nine of ten cases. */
const VARISPEED_SEMITONES = 0.06;
const UNALTERED_SPEED = 2e-4;
const FADE_IN_S = 0.25;
const BLOCK = 1 << 15;

/** Where b stands under a, as positions in b's segment for each output sample at 48 kHz. */
interface Mapping {
  startSamples: number;
  samplesPerOutput: number;
}

/**
 * One four-channel file for hearing two recordings in step: a left, a right, b left, b right.
 *
 * Source:  own. Varispeed is undone by band-limited resampling at the exact ratio; a changed tempo or pitch by
 *          undo-alteration.ts. The place of b is then refined by cross-correlation (waveforms, or onsets where the
 *          waveform was re-made), its level matched by BS.1770 loudness.
 * Output:  48 kHz 16 bit FLAC, layout quad; both fade in over 0.25 s from silence, peaks at or under −1 dBTP
 * Error:   waveforms within a sample, onsets within 10 ms; loudness within 0.5 LU (tested)
 * Throws:  RangeError for spans or ratios that make no sense, TooLong, EncodeFailed; as decodeStream for the files
 */
export async function renderAligned(request: AlignedRequest): Promise<AlignedRender> {
  checkRequest(request);
  const { aPath, bPath, aStartS, speed, pitchSemitones } = request;
  const durationS = Math.min(request.aEndS - aStartS, (request.bEndS - request.bStartS) * speed);
  if (durationS > (request.limitS ?? LIMIT_S)) throw new TooLong(durationS, request.limitS ?? LIMIT_S);
  const length = Math.round(durationS * MASTER_RATE_HZ);
  const factsA = await probe(aPath);
  const factsB = await probe(bPath);
  const segmentA = await readSegment(aPath, factsA, aStartS - MARGIN_S, aStartS + durationS + MARGIN_S);
  const endB = request.bStartS + durationS / speed;
  const segmentB = await readSegment(bPath, factsB, request.bStartS - MARGIN_S, endB + MARGIN_S);
  const a = renderSegment(segmentA, mappingFor(segmentA, aStartS, 1), length);
  const method = methodFor(speed, pitchSemitones);
  const waveform = method !== "tempo and pitch undone";
  const source = waveform ? segmentB : await undoTempoAndPitch(segmentB, speed, pitchSemitones);
  const rough = waveform
    ? mappingFor(segmentB, request.bStartS, speed)
    : mappingFor({ ...source, startS: 0 }, (request.bStartS - segmentB.startS) * speed, 1);
  const mapping = waveform ? refineByWaveform(a, source, rough) : refineByOnsets(a, source, rough);
  const pair: AlignedPair = { a, b: renderSegment(source, mapping, length) };
  const { gainDb, commonGain } = matchLevels(pair, MASTER_RATE_HZ);
  fadeIn(pair);
  const difference = differenceOf(pair);
  await writeQuad(request.outPath, pair, commonGain, durationS);
  const offsetB = mapping.startSamples / source.sampleRateHz;
  return {
    startA: aStartS,
    startB: segmentB.startS + (waveform ? offsetB : offsetB / speed),
    durationS: length / MASTER_RATE_HZ,
    method,
    gainDb,
    ...difference,
    speed: waveform ? segmentB.sampleRateHz / (MASTER_RATE_HZ * mapping.samplesPerOutput) : speed,
  };
}

function checkRequest(request: AlignedRequest): void {
  const { aStartS, aEndS, bStartS, bEndS, speed, pitchSemitones } = request;
  if (!(aStartS >= 0 && aEndS > aStartS && bStartS >= 0 && bEndS > bStartS)) {
    throw new RangeError(`spans must be forward in time, got ${aStartS}–${aEndS} and ${bStartS}–${bEndS}`);
  }
  if (!(speed >= 0.25 && speed <= 4)) throw new RangeError(`speed must be in [0.25, 4], got ${speed}`);
  if (!(Math.abs(pitchSemitones) <= 24)) {
    throw new RangeError(`pitchSemitones must be in [-24, 24], got ${pitchSemitones}`);
  }
}

function methodFor(speed: number, pitchSemitones: number): AlignedRender["method"] {
  if (Math.abs(speed - 1) <= UNALTERED_SPEED && Math.abs(pitchSemitones) <= VARISPEED_SEMITONES)
    return "unaltered";
  const together = Math.abs(12 * Math.log2(speed) - pitchSemitones) <= VARISPEED_SEMITONES;
  return together ? "varispeed undone" : "tempo and pitch undone";
}

function mappingFor(segment: Segment, startS: number, speed: number): Mapping {
  return {
    startSamples: (startS - segment.startS) * segment.sampleRateHz,
    samplesPerOutput: segment.sampleRateHz / (MASTER_RATE_HZ * speed),
  };
}

function renderSegment(segment: Segment, mapping: Mapping, length: number): [Float32Array, Float32Array] {
  const left = renderChannel(segment.left, mapping, length);
  return [
    left,
    segment.right === segment.left ? left.slice() : renderChannel(segment.right, mapping, length),
  ];
}

/** Only the part of the segment that the outputs need is read. */
function renderChannel(samples: Float32Array, mapping: Mapping, length: number): Float32Array {
  const { startSamples, samplesPerOutput } = mapping;
  const reach = Math.ceil(SIDE_QUICK * Math.max(1, samplesPerOutput)) + 2;
  const first = Math.max(0, Math.floor(startSamples) - reach);
  const last = Math.min(samples.length, Math.ceil(startSamples + length * samplesPerOutput) + reach);
  const resampler = new SincResampler({ samplesPerOutput, startSamples: startSamples - first }, SIDE_QUICK);
  const out = new Float32Array(length);
  let at = 0;
  const take = (part: Float32Array): void => {
    out.set(part.subarray(0, length - at), at);
    at += Math.min(part.length, length - at);
  };
  for (let i = first; i < last && at < length; i += BLOCK) {
    take(resampler.push(samples.subarray(i, Math.min(last, i + BLOCK))));
  }
  if (at < length) take(resampler.finish(length));
  return out;
}

function mid(pair: readonly [Float32Array, Float32Array]): Float32Array {
  return pair[0].map((value, i) => 0.5 * (value + pair[1][i]!));
}

interface Pass {
  /** At 11,025 Hz, for a wide reach. */
  coarse: boolean;
  windowS: number;
  reachS: number;
  windows: number;
}

/** First within 0.1 s, then twice within a millisecond. */
const PASSES: readonly Pass[] = [
  { coarse: true, windowS: 2, reachS: 0.1, windows: 7 },
  { coarse: false, windowS: 0.4, reachS: 0.001, windows: 25 },
  { coarse: false, windowS: 0.4, reachS: 0.0005, windows: 25 },
];

function refineByWaveform(a: readonly [Float32Array, Float32Array], b: Segment, rough: Mapping): Mapping {
  const midA = mid(a);
  const midB = mid([b.left, b.right]);
  let mapping = rough;
  for (const pass of PASSES) {
    const drift = fitDrift(windowLags(midA, midB, mapping, pass));
    if (drift) mapping = shifted(mapping, drift.offsetS, drift.slope);
  }
  return mapping;
}

function windowLags(midA: Float32Array, midB: Float32Array, mapping: Mapping, pass: Pass) {
  const span = Math.min(midA.length, Math.round((pass.windowS + 2 * pass.reachS) * MASTER_RATE_HZ));
  const lags: { atS: number; lagS: number; correlation: number }[] = [];
  for (let w = 0; w < pass.windows; w++) {
    const from = Math.round(((midA.length - span) * w) / (pass.windows - 1));
    const start = mapping.startSamples + from * mapping.samplesPerOutput;
    const windowA = midA.subarray(from, from + span);
    const windowB = renderChannel(midB, { ...mapping, startSamples: start }, span);
    const lag = pass.coarse
      ? waveformLag(
          toAnalysis(windowA, MASTER_RATE_HZ),
          toAnalysis(windowB, MASTER_RATE_HZ),
          ANALYSIS_RATE_HZ,
          pass.reachS,
        )
      : waveformLag(windowA, windowB, MASTER_RATE_HZ, pass.reachS);
    if (lag) lags.push({ ...lag, atS: (from + span / 2) / MASTER_RATE_HZ });
  }
  return lags;
}

function refineByOnsets(a: readonly [Float32Array, Float32Array], b: Segment, rough: Mapping): Mapping {
  const midA = mid(a);
  const rendered = renderChannel(mid([b.left, b.right]), rough, midA.length);
  const drift = onsetLag(midA, rendered, MASTER_RATE_HZ, 0.3);
  return drift.correlation > 0.1 ? shifted(rough, drift.offsetS, 0) : rough;
}

function shifted(mapping: Mapping, offsetS: number, slope: number): Mapping {
  return {
    startSamples: mapping.startSamples + offsetS * MASTER_RATE_HZ * mapping.samplesPerOutput,
    samplesPerOutput: mapping.samplesPerOutput * (1 + slope),
  };
}

function fadeIn({ a, b }: AlignedPair): void {
  const length = Math.round(FADE_IN_S * MASTER_RATE_HZ);
  for (const channel of [...a, ...b]) {
    for (let i = 0; i < Math.min(length, channel.length); i++) {
      channel[i] = channel[i]! * (0.5 - 0.5 * Math.cos((Math.PI * i) / length));
    }
  }
}

async function writeQuad(
  outPath: string,
  { a, b }: AlignedPair,
  gain: number,
  durationS: number,
): Promise<void> {
  await withOutput(outPath, (output) =>
    runFfmpeg({
      args: [
        ...["-f", "f32le", "-ar", String(MASTER_RATE_HZ), "-ac", "4", "-i", "pipe:0"],
        ...["-af", "channelmap=0|1|2|3:quad", "-c:a", "flac", "-sample_fmt", "s16"],
        ...["-f", "flac", "-y", descriptorPath(3)],
      ],
      output,
      timeoutMs: encodeTimeoutMs(durationS),
      feed: (stdin) =>
        feedBlocks(stdin, async (write) => {
          for (let i = 0; i < a[0].length; i += BLOCK) {
            await write(
              [...a, ...b].map((channel) => channel.subarray(i, i + BLOCK).map((value) => value * gain)),
            );
          }
        }),
    }),
  );
}
