"use server";

import {
  askComposer,
  confirmFinding,
  declareConflict,
  handOver,
  openPapers,
  recordFinding,
  takeCase,
} from "@/lib/review";
import { action } from "@/lib/web";

const casePage = ({ input }: { input: { caseId: string } }) => [`/cases/${input.caseId}`, "/cases"];

export const take = action(takeCase, { refresh: casePage });
export const passOn = action(handOver, { refresh: casePage });
export const declare = action(declareConflict, { refresh: casePage });
export const papers = action(openPapers, { refresh: casePage });
export const ask = action(askComposer, { refresh: casePage });
export const find = action(recordFinding, { refresh: casePage });
/** After a confirmation the case may not be theirs to see any more: back to the queue. */
export const confirm = action(confirmFinding, { refresh: () => ["/cases"], redirectTo: () => "/cases" });
