export { type DelivererCase, getCaseOfDelivery, hearOwnPassage } from "./for-deliverer";
export { type CaseGroupView, type CaseView, getCase } from "./get-case";
export { hearPassage } from "./hear-passage";
export { declareConflict, handOver, openPapers, takeCase } from "./hold-case";
export { openCase } from "./open-case";
export { listOpenQuestions } from "./open-questions";
export { answerQuestion, askComposer } from "./question";
export { listCases, type QueueRow } from "./queue";
export { readCasePaper } from "./read-paper";
export { confirmFinding, RecordFinding, recordFinding } from "./record-finding";
export {
  type CaseState,
  EXPLAINED_BY,
  FINDING_OUTCOMES,
  type FindingOutcome,
  INNOCENT_EXPLANATIONS,
  RIGHTS_CODES,
  type RightsCode,
} from "./states";
