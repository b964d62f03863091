/** The door for code that runs in a browser worker: the same functions as index.ts, none of which needs Node. */
export { type ByteSource, blobSource } from "./byte-source";
export type { ContainerFacts, ContainerName } from "./container-facts";
export { type Contour, createContour, packContour, reduceContour, unpackContour } from "./contour";
export { assertComplete, type DecodeOutcome, decodeSource, type OnBlock } from "./decode-source";
export { AudioError, Damaged, NotAudio, TooLarge, TooLong, Truncated, UnsupportedAudio } from "./errors";
export { estimateKey, type KeyEstimate } from "./key";
export { createMeter, type Measures, type Meter } from "./meter";
export { probeSource } from "./probe-source";
export { ANALYSIS_RATE_HZ, createMonoResampler, createResampler } from "./resample";
export { soundFeatures } from "./sound-features";
export { technicalChecks } from "./technical-checks";
export { estimateTempo, type TempoEstimate } from "./tempo";
