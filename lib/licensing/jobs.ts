import { defineHandlers } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { readPaymentEvent, refreshPayee } from "@/lib/ledger";
import { issueRecords } from "./orders/issue-licences";
import { sendRefund, settleEvent } from "./orders/settle-event";
import { publishDays } from "./records/publish-day";

/** An event of the processor, kept when it came: an order's is ours, a payee's is the ledger's. */
async function handlePaymentEvent(eventId: string): Promise<void> {
  const event = await readPaymentEvent(system("licensing.paymentEvent"), { eventId });
  if (!event) throw new Error(`no payment event ${eventId} was kept`);
  if (await settleEvent(event.subject)) return;
  const { kind, accountId } = event.subject;
  if ((kind === "payee_changed" || kind === "bank_changed") && typeof accountId === "string")
    await refreshPayee(accountId);
}

export const licensingHandlers = defineHandlers({
  "licensing.paymentEvent": { timeoutS: 120, handle: ({ eventId }) => handlePaymentEvent(eventId) },
  "licensing.issueRecords": {
    timeoutS: 120,
    handle: async ({ orderId, round }) => {
      await issueRecords(
        system("licensing.issueRecords"),
        { orderId, round },
        { operationId: `issue:${orderId}:${round}` },
      );
    },
  },
  "licensing.sendRefund": { timeoutS: 120, handle: ({ refundId }) => sendRefund(refundId) },
  "licensing.publishDay": {
    timeoutS: 300,
    handle: async ({ slot }) => {
      await publishDays(system("licensing.publishDay"), { before: slot }, { operationId: `publish:${slot}` });
    },
  },
});
