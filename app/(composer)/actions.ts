"use server";

import {
  acceptEditorial,
  answerSplit,
  askWriterAgain,
  handInAgain,
  removeVersion,
  returnEditorial,
  saveDraft,
  setVersion,
  signDelivery,
  startDelivery,
} from "@/lib/deliveries";
import { answerQuestion } from "@/lib/review";
import { action } from "@/lib/web";

export const startADelivery = action(startDelivery, {
  redirectTo: ({ data }) => `/deliveries/${data.deliveryId}`,
});
export const keepDraft = action(saveDraft);
export const changeVersion = action(setVersion);
export const takeVersionOut = action(removeVersion);
export const sign = action(signDelivery);
export const answerShares = action(answerSplit, { refresh: () => ["/deliveries"] });
export const askAgain = action(askWriterAgain);
export const handIn = action(handInAgain);
export const acceptIntoCatalogue = action(acceptEditorial);
export const sendBack = action(returnEditorial);
export const replyToQuestion = action(answerQuestion);
