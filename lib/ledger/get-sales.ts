import { z } from "zod";
import { peopleByIds } from "@/lib/accounts";
import { holdEndsAt } from "@/lib/kernel/deadlines";
import { NotFound } from "@/lib/kernel/errors";
import { query } from "@/lib/kernel/verb";
import { type AccountLine, accountLines, type Holder, holderBalances } from "./account-lines";
import { type CapturedParts, capturedLines } from "./captured-lines";
import { type StatementLine, statementLines } from "./get-statement";
import { monthInWords, monthOf } from "./months";
import { ledgerSettings } from "./settings";
import { JOURNAL_ZONE } from "./states";

export interface SaleLine extends Omit<CapturedParts, "writers"> {
  writers: { name: string; shareBps: number; amountMinor: bigint }[];
  state: "held" | "available" | "refunded" | "disputed";
  /** When its hold ends, while it is held. */
  holdEndsAt: Date | null;
  /** What of the library's part is left after refunds and disputes. */
  keptMinor: bigint;
  /** What has happened to it since it was sold. */
  since: { words: string; eventAt: Date; amountMinor: bigint }[];
}

export interface SalesGroup {
  key: string;
  name: string;
  count: number;
  netMinor: bigint;
  keptMinor: bigint;
}

export interface SalesOfCurrency {
  currency: string;
  heldMinor: bigint;
  availableMinor: bigint;
  paidMinor: bigint;
  disputedMinor: bigint;
  totals: {
    grossMinor: bigint;
    taxMinor: bigint;
    platformFeeMinor: bigint;
    processorFeeMinor: bigint;
    receiptsMinor: bigint;
  };
  lines: SaleLine[];
  /** What moved the library's balance and is not a sale: advances repaid, refunds, disputes, payouts. */
  others: StatementLine[];
  months: SalesGroup[];
  cues: SalesGroup[];
  productions: SalesGroup[];
}

export interface Sales {
  at: Date;
  currencies: SalesOfCurrency[];
}

function stateOf(moved: readonly AccountLine[]): SaleLine["state"] {
  let state: SaleLine["state"] = "held";
  let before: SaleLine["state"] = "held";
  for (const { code } of moved) {
    if (code === "hold ends") state = "available";
    else if (code === "refund") state = "refunded";
    else if (code === "dispute") [before, state] = [state, "disputed"];
    else if (code === "reversal") state = before;
  }
  return state;
}

function saleLine(
  parts: CapturedParts,
  moved: readonly AccountLine[],
  names: ReadonlyMap<string, { name: string }>,
  holdDays: number,
): SaleLine {
  const own = moved.filter(({ orderLineId }) => orderLineId === parts.orderLineId);
  const state = stateOf(own);
  const sum = (line: AccountLine) => line.heldMinor + line.availableMinor;
  return {
    ...parts,
    writers: parts.writers.map(({ personId, shareBps, amountMinor }) => ({
      name: names.get(personId)?.name ?? "a writer",
      shareBps,
      amountMinor,
    })),
    state,
    holdEndsAt: state === "held" ? holdEndsAt(parts.soldAt, holdDays, JOURNAL_ZONE) : null,
    keptMinor: own.reduce((total, line) => total + sum(line), 0n),
    since: own
      .filter(({ code }) => code !== "capture")
      .map((line) => ({ words: line.words, eventAt: line.eventAt, amountMinor: sum(line) })),
  };
}

function groupBy(
  lines: readonly SaleLine[],
  of: (line: SaleLine) => { key: string; name: string },
): SalesGroup[] {
  const groups = new Map<string, SalesGroup>();
  for (const line of lines) {
    const { key, name } = of(line);
    const group = groups.get(key) ?? { key, name, count: 0, netMinor: 0n, keptMinor: 0n };
    group.count += 1;
    group.netMinor += line.netMinor;
    group.keptMinor += line.keptMinor;
    groups.set(key, group);
  }
  return [...groups.values()];
}

const largestFirst = (a: SalesGroup, b: SalesGroup) => (a.netMinor > b.netMinor ? -1 : 1);

function ofCurrency(
  { currency, heldMinor, availableMinor }: { currency: string; heldMinor: bigint; availableMinor: bigint },
  lines: readonly SaleLine[],
  others: readonly StatementLine[],
): SalesOfCurrency {
  const own = lines.filter((line) => line.currency === currency);
  const total = (of: (line: SaleLine) => bigint) => own.reduce((sum, line) => sum + of(line), 0n);
  return {
    currency,
    heldMinor,
    availableMinor,
    paidMinor: others.reduce((sum, line) => (line.code === "payout" ? sum - line.amountMinor : sum), 0n),
    disputedMinor: own.reduce((sum, line) => (line.state === "disputed" ? sum + line.libraryMinor : sum), 0n),
    totals: {
      grossMinor: total((line) => line.grossMinor),
      taxMinor: total((line) => line.taxMinor),
      platformFeeMinor: total((line) => line.platformFeeMinor),
      processorFeeMinor: total((line) => line.processorFeeMinor),
      receiptsMinor: total((line) => line.receiptsMinor),
    },
    lines: own,
    others: [...others],
    months: groupBy(own, ({ soldAt }) => {
      const month = monthOf(soldAt);
      return { key: month, name: monthInWords(month) };
    }).sort((a, b) => a.key.localeCompare(b.key)),
    cues: groupBy(own, (line) => ({ key: line.familyId ?? line.cueTitle, name: line.cueTitle })).sort(
      largestFirst,
    ),
    productions: groupBy(own, (line) => ({
      key: line.productionId ?? line.productionTitle,
      name: line.productionTitle,
    })).sort(largestFirst),
  };
}

/** What a library has sold through this service, as it stood at a moment; every figure is the sum of its lines. */
export const getSales = query({
  name: "ledger.getSales",
  who: ["owner", "accountant", "auditor"],
  input: z.object({ at: z.date().optional() }),
  authorise: async ({ actor }): Promise<Holder> => {
    const { libraryId } = actor;
    if (libraryId === null) throw new NotFound();
    return { kind: "library", holderId: libraryId, libraryId };
  },
  run: async ({ reader, input, subject: holder, now }): Promise<Sales> => {
    const at = input.at && input.at < now ? input.at : now;
    const { holdDays } = await ledgerSettings(reader);
    const captured = await capturedLines(reader, { libraryId: holder.libraryId }, at);
    const moved = await accountLines(reader, holder, { until: at });
    const names = await peopleByIds(
      reader,
      captured.flatMap(({ writers }) => writers.map(({ personId }) => personId)),
    );
    const lines = captured.map((parts) => saleLine(parts, moved, names, holdDays));
    const balances = await holderBalances(reader, holder, { until: at });
    const currencies: SalesOfCurrency[] = [];
    for (const balance of balances) {
      const own = moved.filter(({ currency }) => currency === balance.currency);
      const others = (await statementLines(reader, holder, own, 0n, at)).filter(
        ({ code }) => code !== "capture",
      );
      currencies.push(ofCurrency(balance, lines, others));
    }
    return { at, currencies };
  },
});
