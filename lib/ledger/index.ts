export { type AdvanceStanding, advanceStanding } from "./advances-standing";
export { type Capture, type CapturedLine, postCapture } from "./capture";
export {
  type DisputeOfPayment,
  type PostedDispute,
  postDispute,
  postDisputeWon,
  type WonDispute,
} from "./dispute";
export { refreshPayee } from "./jobs";
export {
  getOwnPayee,
  getOwnProcessorAccount,
  type OwnPayee,
  readPayeeToOpen,
  recordPayeeAccount,
  recordPayeeReady,
  startPayee,
} from "./payees";
export { readPaymentEvent, recordPaymentEvent, type StoredPaymentEvent } from "./payment-events";
export { confirmPayoutRun, preparePayoutRun, releasePayoutRun } from "./payout-run";
export { type EntryToPost, type LineRef, type PostedEntry, postEntry } from "./post-entry";
export { recordAdvance } from "./record-advance";
export { postRefund, type RefundOfLines } from "./refund";
export { listDueHolds, releaseHolds } from "./release-holds";
export { beginPayout, type PayoutToSend, recordPayoutFailed, recordPayoutSent } from "./send-payout";
export { listUnsettled, type SettledMovement, settlePayments } from "./settle";
export { type Breach, checkLedger, verifyLedger } from "./verify-ledger";
