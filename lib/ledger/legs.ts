import type { LineSplit, SaleSplit } from "./split";
import type { AccountKind } from "./states";

/** Whose account: a library, a payee, a country; "-" where there is one for all. */
export interface AccountRef {
  readonly kind: AccountKind;
  readonly holderId: string;
}

/** One amount moved from one account to another: an entry made of these cannot be out of balance. */
export interface Leg {
  readonly debit: AccountRef;
  readonly credit: AccountRef;
  /** Always above 0. */
  readonly amountMinor: bigint;
  readonly orderLineId: string | null;
  /** The writer's share behind the leg, where it is one. */
  readonly shareBps: number | null;
}

/** Payables wait as "held" until the refund window closes, then become "available". */
export type Stage = "held" | "available";

type LineOfSale = Pick<SaleSplit, "libraryId" | "taxCountry">;

const one = (kind: AccountKind): AccountRef => ({ kind, holderId: "-" });
export const CLEARING = one("processor clearing");
const BANK = one("bank");

export function libraryAccount(libraryId: string, stage: Stage): AccountRef {
  return { kind: `library ${stage}`, holderId: libraryId };
}

export function composerAccount(payeeId: string, stage: Stage): AccountRef {
  return { kind: `composer ${stage}`, holderId: payeeId };
}

/** A leg of any sign: nothing for 0, turned round below it. */
function move(
  debit: AccountRef,
  credit: AccountRef,
  amountMinor: bigint,
  about: { orderLineId?: string; shareBps?: number } = {},
): Leg[] {
  if (amountMinor === 0n) return [];
  if (amountMinor < 0n) return move(credit, debit, -amountMinor, about);
  const { orderLineId = null, shareBps = null } = about;
  return [{ debit, credit, amountMinor, orderLineId, shareBps }];
}

export function reverseLegs(legs: readonly Leg[]): Leg[] {
  return legs.map((leg) => ({ ...leg, debit: leg.credit, credit: leg.debit }));
}

function lineLegs(sale: LineOfSale, line: LineSplit, stage: Stage): Leg[] {
  const about = { orderLineId: line.orderLineId };
  return [
    ...move(CLEARING, { kind: "vat payable", holderId: sale.taxCountry }, line.taxMinor, about),
    ...move(CLEARING, one("platform fee income"), line.platformFeeMinor, about),
    ...move(CLEARING, one("processor fee recharged"), line.processorFeeMinor, about),
    ...move(CLEARING, libraryAccount(sale.libraryId, stage), line.libraryMinor, about),
    ...line.writers.flatMap(({ payeeId, shareBps, amountMinor }) =>
      move(CLEARING, composerAccount(payeeId, stage), amountMinor, { ...about, shareBps }),
    ),
  ];
}

/** A captured payment. Clearing receives the gross and gives up the processor's fee. */
export function captureLegs(sale: SaleSplit): Leg[] {
  return [
    ...sale.lines.flatMap((line) => lineLegs(sale, line, "held")),
    ...move(one("processor fee cost"), CLEARING, sale.processorFeeMinor),
  ];
}

/** The processor's pending balance becomes available. */
export function settlementLegs(amountMinor: bigint): Leg[] {
  return move(BANK, CLEARING, amountMinor);
}

/** The hold of a line ends: each payable moves to its own "available" account. */
export function releaseLegs(sale: LineOfSale, line: LineSplit): Leg[] {
  const about = { orderLineId: line.orderLineId };
  const { libraryId } = sale;
  return [
    ...move(
      libraryAccount(libraryId, "held"),
      libraryAccount(libraryId, "available"),
      line.libraryMinor,
      about,
    ),
    ...line.writers.flatMap(({ payeeId, shareBps, amountMinor }) =>
      move(composerAccount(payeeId, "held"), composerAccount(payeeId, "available"), amountMinor, {
        ...about,
        shareBps,
      }),
    ),
  ];
}

/**
 * A refund or a chargeback of what `takeBack` took: the exact negation of the stored parts. The processor's fee
 * stays spent; its recharge is given back, so the platform bears it.
 */
export function takeBackLegs(sale: LineOfSale, taken: LineSplit, stage: Stage): Leg[] {
  return reverseLegs(lineLegs(sale, taken, stage));
}

export function recoupmentLegs(libraryId: string, payeeId: string, amountMinor: bigint): Leg[] {
  return move(composerAccount(payeeId, "available"), libraryAccount(libraryId, "available"), amountMinor);
}

export function recoupmentReversalLegs(libraryId: string, payeeId: string, amountMinor: bigint): Leg[] {
  return reverseLegs(recoupmentLegs(libraryId, payeeId, amountMinor));
}

export function payoutLegs(payee: AccountRef, amountMinor: bigint): Leg[] {
  return move(payee, BANK, amountMinor);
}

export function disputeChargeLegs(amountMinor: bigint): Leg[] {
  return move(one("dispute cost"), CLEARING, amountMinor);
}

/** The accountant's view of an entry: one net debit or credit an account, as a journal prints it. */
export function netByAccount(legs: readonly Leg[]): Array<AccountRef & { debitMinor: bigint }> {
  const nets = new Map<string, AccountRef & { debitMinor: bigint }>();
  const add = (account: AccountRef, debitMinor: bigint) => {
    const key = `${account.kind}\n${account.holderId}`;
    nets.set(key, { ...account, debitMinor: (nets.get(key)?.debitMinor ?? 0n) + debitMinor });
  };
  for (const { debit, credit, amountMinor } of legs) {
    add(debit, amountMinor);
    add(credit, -amountMinor);
  }
  return [...nets.values()].filter(({ debitMinor }) => debitMinor !== 0n);
}
