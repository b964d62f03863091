import { z } from "zod";
import { ID_PATTERN } from "./ids";

const id = z.string().regex(ID_PATTERN, "an id");

/**
 * Every job by name with its payload. A lower room tells an upper one by enqueueing a name declared here;
 * the room that handles it defines the handler in its jobs.ts.
 */
export const messages = {
  "delivery.measure": z.object({ versionId: id }),
  "delivery.afterScreening": z.object({ recordingId: id, runId: id }),
  "delivery.afterReview": z.object({ caseId: id, deliveryId: id }),
  "delivery.tryListing": z.object({ deliveryId: id }),
  "delivery.remindWriters": z.object({ slot: z.string() }),
  "screening.screen": z.object({ recordingId: id }),
  "screening.fingerprintReported": z.object({
    reportedWorkId: id,
    fileKey: z.string(),
    turn: z.int().min(0),
  }),
  "screening.dropReported": z.object({ reportedWorkId: id, turn: z.int().min(0) }),
  "screening.fingerprintLoop": z.object({ loopId: id, fileKey: z.string() }),
  "catalogue.renderPreview": z.object({ recordingId: id }),
  "catalogue.renderMaster": z.object({ recordingId: id }),
  "review.openCase": z.object({ deliveryId: id, familyId: id }),
  "review.renderListening": z.object({ hitId: id }),
  "reports.afterFingerprint": z.object({ reportedWorkId: id, comparable: z.boolean() }),
  "licensing.paymentEvent": z.object({ eventId: z.string() }),
  "licensing.issueRecords": z.object({ orderId: id, round: z.number().int() }),
  "licensing.sendRefund": z.object({ refundId: id }),
  "licensing.publishDay": z.object({ slot: z.string() }),
  "ledger.settle": z.object({ slot: z.string() }),
  "ledger.releaseHolds": z.object({ slot: z.string() }),
  "ledger.openPayee": z.object({ payeeId: id }),
  "ledger.sendPayout": z.object({ payoutId: id }),
  "mail.send": z.object({ mailId: id }),
  /** The demonstration's own steps: deliver one item of its plan, then see it through. Never enqueued in live mode. */
  "demo.bring": z.object({ item: z.string().max(40) }),
  "demo.seeThrough": z.object({ item: z.string().max(40), deliveryId: id, turn: z.int().min(0) }),
} as const satisfies Record<string, z.ZodObject>;

export type MessageName = keyof typeof messages;
export type MessagePayload<N extends MessageName> = z.infer<(typeof messages)[N]>;
