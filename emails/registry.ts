import { answerReceived } from "./answer-received";
import { bankChangeNotice } from "./bank-change-notice";
import { coWriterAccepted } from "./co-writer-accepted";
import { coWriterNotAccepted } from "./co-writer-not-accepted";
import { deliveryListed } from "./delivery-listed";
import { deliveryReceipt } from "./delivery-receipt";
import { findingStatement } from "./finding-statement";
import { invitation } from "./invitation";
import { orderConfirmation } from "./order-confirmation";
import { payoutSent } from "./payout-sent";
import { questionFromModerator } from "./question-from-moderator";
import { refundNotice } from "./refund-notice";
import { reportConfirmAddress } from "./report-confirm-address";
import { reportReceipt } from "./report-receipt";
import { reportStatus } from "./report-status";
import { roleChanged } from "./role-changed";
import { signInLink } from "./sign-in-link";
import { splitAcceptanceRequest } from "./split-acceptance-request";

/** Every mail by the name under which it waits in the outbox. */
export const mailTemplates = {
  "answer-received": answerReceived,
  "bank-change-notice": bankChangeNotice,
  "co-writer-accepted": coWriterAccepted,
  "co-writer-not-accepted": coWriterNotAccepted,
  "delivery-listed": deliveryListed,
  "delivery-receipt": deliveryReceipt,
  "finding-statement": findingStatement,
  invitation,
  "order-confirmation": orderConfirmation,
  "payout-sent": payoutSent,
  "question-from-moderator": questionFromModerator,
  "refund-notice": refundNotice,
  "report-confirm-address": reportConfirmAddress,
  "report-receipt": reportReceipt,
  "report-status": reportStatus,
  "role-changed": roleChanged,
  "sign-in-link": signInLink,
  "split-acceptance-request": splitAcceptanceRequest,
} as const;
