export { announceReported } from "./announce-reported";
export { coveredS, type DeliveryFacts, type ExplainedHit, explainHits, outcomeOf } from "./explain";
export { readHead, readIndexChanges, storeFingerprints } from "./fingerprints";
export {
  certificateOf,
  currentRun,
  currentRuns,
  type HitRow,
  hitsByIds,
  hitsOf,
  indexSize,
  listLoops,
  notComparableSpans,
  type PassageRow,
  reportedFile,
} from "./for-rooms";
export { FoundHit, FoundPassage } from "./found";
export { changeReference } from "./hold-reference";
export { listRegisters, type Registers } from "./list-registers";
export { registerEntry } from "./register-entry";
export { registerLoop } from "./register-loop";
export { requestScreening, type ScreeningRequest } from "./request-screening";
export { type CutPiece, getScreeningOfCue, type ScreeningOfCue } from "./screening-of-cue";
export {
  EXPLANATIONS,
  type Explanation,
  OUTCOMES,
  type Outcome,
  RELATIONS,
  type Relation,
  STANDING_LIMITS,
} from "./states";
