import { enqueue } from "@/lib/jobs";
import { businessNow } from "@/lib/kernel/clock";
import { inTransaction } from "@/lib/kernel/transaction";

/**
 * Work that comes round by the business clock. A slot's key is made from its hour or day, so that several workers, or one
 * that was restarted, make it once.
 */
export async function enqueueSlots(): Promise<void> {
  const now = businessNow().toISOString();
  const hour = now.slice(0, 13);
  const day = now.slice(0, 10);
  await inTransaction(async (tx) => {
    await enqueue(tx, "ledger.settle", { slot: hour }, { key: hour, priority: 70 });
    await enqueue(tx, "ledger.releaseHolds", { slot: hour }, { key: hour, priority: 70 });
    await enqueue(tx, "delivery.remindWriters", { slot: day }, { key: day, priority: 80 });
    await enqueue(tx, "licensing.publishDay", { slot: day }, { key: day, priority: 80 });
  });
}
