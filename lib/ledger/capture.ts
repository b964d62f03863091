import type { Tx } from "@/db/client";
import type { Actor } from "@/lib/kernel/actor";
import { assert } from "@/lib/kernel/errors";
import { captureLegs } from "./legs";
import { captureKey } from "./line-standing";
import { type LineRef, type PostedEntry, postEntry } from "./post-entry";
import type { CaptureFacts } from "./sale-facts";
import { ledgerSettings } from "./settings";
import { splitSale } from "./split";

export interface CapturedLine {
  orderLineId: string;
  licenceNumber: string | null;
  familyId: string;
  productionId: string | null;
  netMinor: bigint;
  taxMinor: bigint;
  /** The split version valid at capture. */
  writers: ReadonlyArray<{ personId: string; shareBps: number; position: number }>;
  /** For statements, in words: the cue's title and the use that was licensed. */
  cueTitle: string;
  scopeWords: string;
}

export interface Capture {
  orderId: string;
  libraryId: string;
  currency: string;
  /** When the payment was captured. */
  eventAt: Date;
  /** Whose tax it is: a country, or "-" where none was charged. */
  taxCountry: string;
  lines: readonly CapturedLine[];
  composerPoolBps: number;
  /** What the processor really took. */
  processorFeeMinor: bigint;
  /** Left out: the setting. */
  platformFeeBps?: number;
  chargeId: string | null;
  /** For statements, in words. */
  facts: { orderNumber: string; buyer: string; productionTitle: string; libraryName: string };
  now: Date;
  actor: Actor;
}

function factsOf(sale: Capture, platformFeeBps: number): CaptureFacts {
  return {
    ...sale.facts,
    chargeId: sale.chargeId,
    platformFeeBps,
    composerPoolBps: sale.composerPoolBps,
    processorFeeMinor: sale.processorFeeMinor.toString(),
    lines: sale.lines.map(({ orderLineId, cueTitle, scopeWords, netMinor, taxMinor }) => ({
      orderLineId,
      cueTitle,
      scopeWords,
      netMinor: netMinor.toString(),
      taxMinor: taxMinor.toString(),
    })),
  };
}

/** A buyer's payment arrived: one entry an order, its payables held until the refund window closes. */
export async function postCapture(tx: Tx, sale: Capture): Promise<PostedEntry> {
  const platformFeeBps = sale.platformFeeBps ?? (await ledgerSettings(tx)).platformFeeBps;
  const split = splitSale({
    libraryId: sale.libraryId,
    taxCountry: sale.taxCountry,
    platformFeeBps,
    processorFeeMinor: sale.processorFeeMinor,
    lines: sale.lines.map(({ orderLineId, netMinor, taxMinor, writers }) => ({
      orderLineId,
      netMinor,
      taxMinor,
      poolBps: sale.composerPoolBps,
      writers: [...writers]
        .sort((a, b) => a.position - b.position)
        .map(({ personId, shareBps }) => ({ payeeId: personId, shareBps })),
    })),
  });
  for (const { orderLineId, writers } of sale.lines)
    assert(
      new Set(writers.map(({ personId }) => personId)).size === writers.length,
      `a writer stands twice in the split of line ${orderLineId}`,
    );
  const lines = new Map<string, LineRef>(
    sale.lines.map(({ orderLineId, licenceNumber, familyId, productionId }) => [
      orderLineId,
      { licenceNumber, familyId, productionId },
    ]),
  );
  return postEntry(tx, {
    idempotencyKey: captureKey(sale.orderId),
    code: "capture",
    words: `Payment of order ${sale.facts.orderNumber} by ${sale.facts.buyer}.`.slice(0, 300),
    currency: sale.currency,
    legs: captureLegs(split),
    lines,
    libraryId: sale.libraryId,
    orderId: sale.orderId,
    processorSource: sale.chargeId,
    facts: factsOf(sale, platformFeeBps),
    eventAt: sale.eventAt,
    now: sale.now,
    actor: sale.actor,
  });
}
