export { afterScreening, declarationsOf, deliveryOfFamily } from "./after-screening";
export { answerSplit } from "./answer-split";
export { applyFinding, type FindingEffect } from "./apply-finding";
export { askWriterAgain, handInAgain } from "./ask-again";
export { admitUpload, fileArrived, removeVersion, saveDraft, setVersion, startDelivery } from "./draft";
export { acceptEditorial, returnEditorial } from "./editorial";
export { guessRole } from "./guess-role";
export { lockOwnDelivery } from "./own-delivery";
export { paperArrived, paperOfDelivery, readPaper } from "./papers";
export {
  type DeliverySummary,
  type DeliveryView,
  getDelivery,
  listDeliveries,
  listSplitRequests,
  type VersionView,
} from "./reads";
export { readVersionToMeasure, recordMeasurement, recordUnreadable } from "./record-measurement";
export { findUnanswered, remindWriters } from "./remind-writers";
export { Declaration, DeliveryDraft, DeliveryForm, type DeliveryFormInput, SampleDeclared } from "./schemas";
export { signDelivery } from "./sign-delivery";
export { standingOf } from "./standing";
export {
  CUTDOWN_ROLES,
  DECLARATION_TEXT_VERSION,
  EDITORIAL_CODES,
  type EditorialCode,
  STANDINGS,
  type Standing,
} from "./states";
export { tryListing } from "./try-listing";
