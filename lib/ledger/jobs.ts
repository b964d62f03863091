import { defineHandlers } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { systemNow } from "@/lib/kernel/clock";
import { money } from "@/lib/kernel/money";
import { createPayee, listMovements, PaymentError, paymentKeys, readPayee, transfer } from "@/lib/payments";
import { readPayeeToOpen, recordPayeeAccount, recordPayeeReady } from "./payees";
import { listDueHolds, releaseHolds } from "./release-holds";
import { beginPayout, recordPayoutFailed, recordPayoutSent } from "./send-payout";
import { listUnsettled, settlePayments } from "./settle";

const DAY_MS = 86_400_000;
/** How far back the processor's book is read for what has become available since. */
const BOOK_DAYS = 60;
const MOVEMENTS_AT_ONCE = 50;
const FROM_SALES = new Set(["payment", "refund", "dispute", "dispute_reversal"]);

async function settle(): Promise<void> {
  const now = systemNow().getTime();
  const book = await listMovements({
    since: new Date(now - BOOK_DAYS * DAY_MS),
    // The processor's clock may be ahead of ours.
    until: new Date(now + 365 * DAY_MS),
  });
  const available = book
    .filter((one) => one.isAvailable && FROM_SALES.has(one.kind) && one.sourceId !== null)
    .reverse();
  const actor = system("ledger.settle");
  for (let start = 0; start < available.length; start += MOVEMENTS_AT_ONCE) {
    const some = available.slice(start, start + MOVEMENTS_AT_ONCE);
    const unsettled = new Set(
      await listUnsettled(actor, { movementIds: some.map(({ movementId }) => movementId) }),
    );
    const movements = some
      .filter(({ movementId }) => unsettled.has(movementId))
      .map(({ movementId, sourceId, net }) => ({
        movementId,
        sourceId: sourceId ?? "",
        netMinor: net.minor,
        currency: net.currency,
      }));
    if (movements.length > 0) await settlePayments(actor, { movements });
  }
}

async function releaseDueHolds(): Promise<void> {
  const actor = system("ledger.releaseHolds");
  const seen: string[] = [];
  for (;;) {
    const due = await listDueHolds(actor, { except: seen });
    if (due.length === 0) return;
    for (const orderId of due) await releaseHolds(actor, { orderId });
    seen.push(...due);
  }
}

async function openPayee(payeeId: string): Promise<void> {
  const actor = system("ledger.openPayee");
  const payee = await readPayeeToOpen(actor, { payeeId });
  if (payee.processorAccount) return;
  if (!payee.email) throw new Error(`payee ${payeeId} has nobody to write to`);
  const { accountId } = await createPayee({
    payeeId,
    country: payee.countryCode,
    email: payee.email,
    idempotencyKey: paymentKeys.payee(payeeId),
  });
  await recordPayeeAccount(actor, { payeeId, accountId });
}

/** Reads a payee at the processor as it is now, and records it. For the job that handles the processor's events. */
export async function refreshPayee(accountId: string): Promise<void> {
  const { isReady, bankAccount } = await readPayee(accountId);
  const bank = bankAccount ? { ref: bankAccount.id, last4: bankAccount.last4 } : null;
  await recordPayeeReady(system("payment event"), { accountId, isReady, bank });
}

/** Refusals after which nothing has moved; whatever else goes wrong, the reservation stays and the job is seen to fail. */
const REFUSALS: Partial<Record<PaymentError["reason"], string>> = {
  insufficient_balance:
    "Not sent: the money of these sales is not available at the payment service yet. The balance waits for the next run.",
  payee_not_ready:
    "Not sent: the payment service cannot pay this account yet. The balance waits for the next run.",
  refused: "Not sent: the payment service refused it. The balance waits for the next run.",
  not_found: "Not sent: the payment service does not know this account. The balance waits for the next run.",
};

async function sendPayout(payoutId: string): Promise<void> {
  const actor = system("ledger.sendPayout");
  const payout = await beginPayout(actor, { payoutId });
  if (!payout) return;
  const { accountId, amountMinor, currency } = payout;
  const sent = await transfer({
    payoutId,
    accountId,
    amount: money(amountMinor, currency),
    idempotencyKey: paymentKeys.payout(payoutId),
  }).catch(async (error: unknown) => {
    const reason = error instanceof PaymentError ? REFUSALS[error.reason] : undefined;
    if (reason === undefined) throw error;
    await recordPayoutFailed(actor, { payoutId, reason });
    return null;
  });
  if (sent) await recordPayoutSent(actor, { payoutId, transferId: sent.transferId });
}

export const ledgerHandlers = defineHandlers({
  "ledger.settle": { handle: settle, timeoutS: 120 },
  "ledger.releaseHolds": { handle: releaseDueHolds, timeoutS: 300 },
  "ledger.openPayee": { handle: ({ payeeId }) => openPayee(payeeId), timeoutS: 60 },
  "ledger.sendPayout": { handle: ({ payoutId }) => sendPayout(payoutId), timeoutS: 60 },
});
