import { allocate, applyBps } from "@/lib/kernel/money";

/**
 * How one sale is divided. Each step is rounded once, in whole minor units:
 *
 * gross − tax = net; net − platform fee − processor fee = library receipts; the composers' pool is the contract's
 * share of the receipts and takes the odd half unit; the library keeps the rest; the pool goes to the writers by
 * their shares, by largest remainder.
 */
export interface SaleLine {
  readonly orderLineId: string;
  readonly netMinor: bigint;
  readonly taxMinor: bigint;
  /** The composers' part of the library's receipts, from the contract. */
  readonly poolBps: number;
  /** The split version valid at capture, first writer first: equal remainders go by this order. */
  readonly writers: ReadonlyArray<{ readonly payeeId: string; readonly shareBps: number }>;
}

export interface Sale {
  readonly libraryId: string;
  readonly taxCountry: string;
  readonly platformFeeBps: number;
  /** What the processor really took for the whole payment. */
  readonly processorFeeMinor: bigint;
  readonly lines: readonly SaleLine[];
}

export interface WriterPart {
  readonly payeeId: string;
  readonly shareBps: number;
  readonly amountMinor: bigint;
}

/** The parts of one line as they are stored; refunds and disputes go by these and never split again. */
export interface LineSplit {
  readonly orderLineId: string;
  readonly taxMinor: bigint;
  readonly platformFeeMinor: bigint;
  readonly processorFeeMinor: bigint;
  readonly libraryMinor: bigint;
  readonly writers: readonly WriterPart[];
}

export interface SaleSplit {
  readonly libraryId: string;
  readonly taxCountry: string;
  readonly processorFeeMinor: bigint;
  readonly lines: readonly LineSplit[];
}

const WHOLE_BPS = 10_000;

function checkLine(line: SaleLine): void {
  if (line.netMinor < 0n || line.taxMinor < 0n)
    throw new RangeError(`line ${line.orderLineId} has a negative amount`);
  const shares = line.writers.reduce((sum, { shareBps }) => sum + shareBps, 0);
  if (shares !== WHOLE_BPS || line.writers.some(({ shareBps }) => shareBps < 0))
    throw new RangeError(
      `writers' shares of line ${line.orderLineId} must total ${WHOLE_BPS}, got ${shares}`,
    );
  if (!Number.isInteger(line.poolBps) || line.poolBps < 0 || line.poolBps > WHOLE_BPS)
    throw new RangeError(
      `the pool of line ${line.orderLineId} must be 0 to ${WHOLE_BPS}, got ${line.poolBps}`,
    );
}

function splitLine(line: SaleLine, platformFeeBps: number, processorFeeMinor: bigint): LineSplit {
  const platformFeeMinor = applyBps(line.netMinor, platformFeeBps);
  const receipts = line.netMinor - platformFeeMinor - processorFeeMinor;
  // Where the fees exceed a tiny price, the library bears the loss and no writer is charged for it.
  const pool = receipts > 0n ? applyBps(receipts, line.poolBps) : 0n;
  const amounts = allocate(
    pool,
    line.writers.map(({ shareBps }) => BigInt(shareBps)),
  );
  return {
    orderLineId: line.orderLineId,
    taxMinor: line.taxMinor,
    platformFeeMinor,
    processorFeeMinor,
    libraryMinor: receipts - pool,
    writers: line.writers.map((writer, index) => ({ ...writer, amountMinor: amounts[index] ?? 0n })),
  };
}

/** Throws RangeError if a line's shares do not total 10,000 basis points, or an amount is negative. */
export function splitSale(sale: Sale): SaleSplit {
  sale.lines.forEach(checkLine);
  if (sale.processorFeeMinor < 0n) throw new RangeError("the processor's fee is negative");
  const fees = allocate(
    sale.processorFeeMinor,
    sale.lines.map(({ netMinor }) => netMinor),
  );
  return {
    libraryId: sale.libraryId,
    taxCountry: sale.taxCountry,
    processorFeeMinor: sale.processorFeeMinor,
    lines: sale.lines.map((line, index) => splitLine(line, sale.platformFeeBps, fees[index] ?? 0n)),
  };
}

export function poolOf(line: LineSplit): bigint {
  return line.writers.reduce((sum, { amountMinor }) => sum + amountMinor, 0n);
}

export function receiptsOf(line: LineSplit): bigint {
  return line.libraryMinor + poolOf(line);
}

export function grossOf(line: LineSplit): bigint {
  return line.taxMinor + line.platformFeeMinor + line.processorFeeMinor + receiptsOf(line);
}

/**
 * The part of each stored amount that a refund of `refundMinor` takes back, and what is left of the line. The last
 * refund takes exactly what is left, so the refunds of a line always add up to the line.
 *
 * Throws RangeError for more than is left, and for a partial refund of a line whose library part is negative.
 */
export function takeBack(line: LineSplit, refundMinor: bigint): { taken: LineSplit; left: LineSplit } {
  const gross = grossOf(line);
  if (refundMinor < 0n || refundMinor > gross)
    throw new RangeError(
      `a refund of ${refundMinor} does not fit the ${gross} left of line ${line.orderLineId}`,
    );
  const amounts = [
    line.taxMinor,
    line.platformFeeMinor,
    line.processorFeeMinor,
    line.libraryMinor,
    ...line.writers.map(({ amountMinor }) => amountMinor),
  ];
  const parts = refundMinor === gross ? amounts : allocate(refundMinor, amounts);
  const lineOf = (values: readonly bigint[]): LineSplit => ({
    orderLineId: line.orderLineId,
    taxMinor: values[0] ?? 0n,
    platformFeeMinor: values[1] ?? 0n,
    processorFeeMinor: values[2] ?? 0n,
    libraryMinor: values[3] ?? 0n,
    writers: line.writers.map((writer, index) => ({ ...writer, amountMinor: values[4 + index] ?? 0n })),
  });
  return {
    taken: lineOf(parts),
    left: lineOf(amounts.map((amount, index) => amount - (parts[index] ?? 0n))),
  };
}

/** How much of an advance a payee's available earnings recover now. */
export function recoupable(outstandingMinor: bigint, availableMinor: bigint): bigint {
  const least = outstandingMinor < availableMinor ? outstandingMinor : availableMinor;
  return least > 0n ? least : 0n;
}

/** On an open or lost dispute only: how much of a recouped advance is put back, min(recouped, −balance). */
export function recoupmentToReverse(recoupedMinor: bigint, balanceMinor: bigint): bigint {
  return recoupable(recoupedMinor, -balanceMinor);
}

/** What a payout pays: the whole balance once it reaches the threshold; otherwise nothing, and it is carried forward. */
export function payoutOf(balanceMinor: bigint, thresholdMinor: bigint): bigint {
  return balanceMinor > 0n && balanceMinor >= thresholdMinor ? balanceMinor : 0n;
}
