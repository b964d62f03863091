export { type AdvanceStanding, advanceStanding } from "./advances-standing";
export { type Capture, type CapturedLine, postCapture } from "./capture";
export {
  type DisputeOfPayment,
  type PostedDispute,
  postDispute,
  postDisputeWon,
  type WonDispute,
} from "./dispute";
export { getJournal, type JournalEntry } from "./get-journal";
export {
  type DueNow,
  getPayout,
  getPayouts,
  type PayoutOfRun,
  type PayoutRunView,
  type Payouts,
  type PayoutView,
} from "./get-payouts";
export { getSales, type SaleLine, type Sales, type SalesGroup, type SalesOfCurrency } from "./get-sales";
export {
  getStatement,
  listStatements,
  type Statement,
  type StatementLine,
  type StatementMonth,
  type StatementSale,
} from "./get-statement";
export { getTrialBalance, type TrialBalance, type TrialBalances, type TrialRow } from "./get-trial-balance";
export { refreshPayee } from "./jobs";
export { type Month, monthInWords, monthOf } from "./months";
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
export { postRefusedPayment, postReturnedPayment, type RefusedPayment } from "./refused-payment";
export { listDueHolds, releaseHolds } from "./release-holds";
export { beginPayout, type PayoutToSend, recordPayoutFailed, recordPayoutSent } from "./send-payout";
export { listUnsettled, type SettledMovement, settlePayments } from "./settle";
export { csvCell, statementCsv } from "./statement-csv";
export { type Breach, checkLedger, verifyLedger } from "./verify-ledger";
