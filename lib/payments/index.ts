export { type Balance, listMovements, type Movement, readBalance } from "./balance";
export {
  type Checkout,
  type CheckoutLine,
  type CheckoutRequest,
  createCheckout,
  expireCheckout,
  type OpenedCheckout,
  type Payment,
  readCheckout,
  readPayment,
} from "./checkout";
export { answerDispute, type Dispute, readDispute } from "./disputes";
export { PaymentError, type PaymentErrorReason } from "./errors";
export {
  constructEvent,
  listEventsSince,
  type PaymentEvent,
  type PaymentEventSubject,
  readEvent,
} from "./events";
export { paymentKeys } from "./keys";
export {
  createPayee,
  onboardingLink,
  type Payee,
  type PayeeRequest,
  readPayee,
  type Transfer,
  type TransferRequest,
  transfer,
} from "./payees";
export { type Refund, type RefundRequest, refund } from "./refund";
export { openPayments, type PaymentsClient, type PaymentsConfig } from "./stripe";
