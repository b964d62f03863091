export { type Band, band, DEFAULT_THRESHOLDS, mergeChannelHits, type Thresholds } from "./decision";
export {
  type Comparability,
  comparability,
  createFingerprinter,
  type Fingerprint,
  type Fingerprinter,
  fingerprint,
  type NotComparableReason,
  type NotComparableSpan,
} from "./fingerprint";
export type { Channel, Fit, Hit, Passage, RelationHint } from "./hits";
export { mirrorFingerprint } from "./mirror";
export { PACK_FORMAT_VERSION, packFingerprint, unpackFingerprint } from "./pack";
export {
  createIndex,
  type IndexOptions,
  type IndexStats,
  matchFingerprints,
  type SearchIndex,
  type SearchOptions,
} from "./search-index";
export { ENGINE_VERSION, SAMPLE_RATE_HZ } from "./settings";
