export {
  getCardForCue,
  listFromPrices,
  type PriceAnswer,
  priceShortlist,
  priceUse,
} from "./cards/price-use";
export { type CardInForce, getRateCard, type RateCardScreen, setRateCard } from "./cards/set-rate-card";
export { approveOrder, withdrawOrder } from "./orders/approve-order";
export { completePayment } from "./orders/complete-payment";
export { issueRecords } from "./orders/issue-licences";
export { openSeries } from "./orders/number-series";
export { type OpenedForPayment, openCheckout } from "./orders/open-checkout";
export { placeOrder } from "./orders/place-order";
export {
  getInvoices,
  getOrder,
  listOpenOrders,
  type OrderEntry,
  type OrderLinePage,
  type OrderPage,
} from "./orders/read-orders";
export { closeDispute, recordDispute } from "./orders/record-dispute";
export { completeRefund, readRefund, recordOutsideRefund, refundLines } from "./orders/refund-lines";
export { sendRefund, settleEvent } from "./orders/settle-event";
export type { InvoiceBody, InvoiceRow } from "./orders/write-invoice";
export {
  type CheckAnswer,
  type Checked,
  type CheckedFile,
  type CheckedLicence,
  getPublicFile,
  setWithheld,
  untilWords,
  verifyByProof,
  verifyFile,
} from "./records/check-licence";
export { importLicence } from "./records/import-licence";
export { licencesOfFamily } from "./records/licence-file";
export { linkToMaster, type MasterFile, readMaster } from "./records/masters";
export { listKeys, listRoots, type PublishedRoot, publishDays } from "./records/publish-day";
export {
  getLicence,
  getLicenceFile,
  type LicenceEntry,
  type LicencePage,
  listLicences,
} from "./records/read-licences";
export { addLicenceStatus } from "./records/record-log";
export { countryName } from "./records/scope-of-use";
export { startingCard } from "./starting-card";
export {
  AUTHORITY_STATEMENT,
  ORDER_STATES,
  type OrderState,
  WITHHOLDABLE,
  type Withholdable,
} from "./states";
export { TERMS_VERSION } from "./terms";
