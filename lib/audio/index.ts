export { type Bext, type BextInput, buildBext, parseBext } from "./bext";
export { type ByteSource, blobSource } from "./byte-source";
export type { Check, CheckContext } from "./check-row";
export { CONTAINER_EXTENSIONS, type ContainerFacts, type ContainerName } from "./container-facts";
export {
  type Contour,
  type ContourChannel,
  type ContourMeter,
  createContour,
  packContour,
  reduceContour,
  unpackContour,
} from "./contour";
export {
  assertComplete,
  type DecodeOptions,
  type DecodeOutcome,
  decodeSource,
  LIMIT_BYTES,
  LIMIT_S,
  type OnBlock,
} from "./decode-source";
export { decodeStream, decodeWhole, type FileDecodeOptions } from "./decode-stream";
export { encodeFlac } from "./encode-flac";
export {
  AudioError,
  type AudioErrorCode,
  Damaged,
  EncodeFailed,
  NotAudio,
  TooLarge,
  TooLong,
  Truncated,
  UnsupportedAudio,
} from "./errors";
export {
  estimateKey,
  type KeyEstimate,
  keyOfChroma,
  type Mode,
  mirexKeyScore,
  PITCH_CLASSES,
  type PitchClass,
} from "./key";
export { LoudnessMeter } from "./loudness";
export { type Measured, type MeasureOptions, measureFile, type OnAnalysis } from "./measure-file";
export { createMeter, type Measures, type Meter } from "./meter";
export { encodePreview, type Preview, type PreviewOptions } from "./preview";
export { probe } from "./probe";
export { probeSource } from "./probe-source";
export { type AlignedRender, type AlignedRequest, renderAligned } from "./render-aligned";
export { type RenderedMaster, readBext, renderMaster } from "./render-master";
export {
  ANALYSIS_RATE_HZ,
  createMonoResampler,
  createResampler,
  type Resampler,
  type Take,
} from "./resample";
export { FEATURE_COUNT, FEATURE_LAYOUT, soundFeatures } from "./sound-features";
export {
  CHECK_CODES,
  CHECK_VERDICTS,
  type CheckCode,
  type CheckVerdict,
  ENDINGS,
  type Ending,
  EXACT_CUTDOWN_S,
  STING_S_MAX,
} from "./states";
export { checkStems, type StemsContext } from "./stems";
export { technicalChecks } from "./technical-checks";
export { estimateTempo, type TempoEstimate, tempoAccuracy1, tempoAccuracy2 } from "./tempo";
