import { inArray } from "drizzle-orm";
import { z } from "zod";
import { ledgerEntries } from "@/db/schema/ledger";
import { command, open, query } from "@/lib/kernel/verb";
import { type Leg, reverseLegs, settlementLegs } from "./legs";
import { postEntry } from "./post-entry";

const Movement = z.object({
  movementId: z.string().min(1).max(80),
  /** The charge, refund or dispute that moved it. */
  sourceId: z.string().min(1).max(80),
  netMinor: z.bigint(),
  currency: z.string().length(3),
});
export type SettledMovement = z.infer<typeof Movement>;

const settlementKey = (movementId: string) => `settlement:${movementId}`;

/** Which of these movements have no settlement in the journal. */
export const listUnsettled = query({
  name: "ledger.listUnsettled",
  who: ["system"],
  input: z.object({ movementIds: z.array(z.string().max(80)).min(1).max(100) }),
  authorise: open("the processor's own book, read by a job"),
  run: async ({ reader, input }): Promise<string[]> => {
    const rows = await reader
      .select({ key: ledgerEntries.idempotencyKey })
      .from(ledgerEntries)
      .where(inArray(ledgerEntries.idempotencyKey, input.movementIds.map(settlementKey)));
    const done = new Set(rows.map(({ key }) => key));
    return input.movementIds.filter((movementId) => !done.has(settlementKey(movementId)));
  },
});

function legsOf(netMinor: bigint): Leg[] {
  return netMinor < 0n ? reverseLegs(settlementLegs(-netMinor)) : settlementLegs(netMinor);
}

/**
 * Movements that the processor has made available pass from clearing to the bank, one entry each. A movement whose sale,
 * refund or dispute is not in the journal yet waits for it: the next call takes it.
 */
export const settlePayments = command({
  name: "ledger.settlePayments",
  who: ["system"],
  input: z.object({ movements: z.array(Movement).max(100) }),
  authorise: open("the processor's own book, read by a job"),
  run: async ({ tx, input, actor, now }) => {
    const moving = input.movements.filter(({ netMinor }) => netMinor !== 0n);
    if (moving.length === 0) return { settled: [], waiting: [] };
    const sources = await tx
      .select({
        source: ledgerEntries.processorSource,
        libraryId: ledgerEntries.libraryId,
        orderId: ledgerEntries.orderId,
      })
      .from(ledgerEntries)
      .where(
        inArray(
          ledgerEntries.processorSource,
          moving.map(({ sourceId }) => sourceId),
        ),
      );
    const settled: string[] = [];
    const waiting: string[] = [];
    for (const { movementId, sourceId, netMinor, currency } of moving) {
      const about = sources.find(({ source }) => source === sourceId);
      if (!about) {
        waiting.push(movementId);
        continue;
      }
      const { isNew } = await postEntry(tx, {
        idempotencyKey: settlementKey(movementId),
        code: "settlement",
        words:
          netMinor < 0n
            ? "The processor took this from the available balance."
            : "The processor made this payment available.",
        currency,
        legs: legsOf(netMinor),
        libraryId: about.libraryId,
        orderId: about.orderId,
        facts: { movementId, sourceId },
        eventAt: now,
        now,
        actor,
      });
      if (isNew) settled.push(movementId);
    }
    return { settled, waiting };
  },
  audit: ({ input, result }) => ({
    subject: input.movements[0]?.movementId ?? "-",
    detail: { settled: result.settled.length, waiting: result.waiting.length },
  }),
});
