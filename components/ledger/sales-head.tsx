import { fmt } from "@/components/ui/format";
import { HeadSentence } from "@/components/ui/sentence";
import { formatMoney } from "@/lib/kernel/money";
import type { Sales, SalesOfCurrency } from "@/lib/ledger";

/** Which of the lines are asked for: one cue's, one production's, one month's, or those in one state. */
export interface Chosen {
  by: "cue" | "production" | "month" | "state";
  value: string;
}

const BY = ["cue", "production", "month", "state"] as const;

export function chosenOf(given: Record<string, string | string[] | undefined>): Chosen | null {
  for (const by of BY) {
    const value = given[by];
    if (typeof value === "string" && value.length > 0 && value.length <= 80) return { by, value };
  }
  return null;
}

function shares(heldMinor: bigint, availableMinor: bigint, money: (minor: bigint) => string): string {
  if (heldMinor === 0n) return "all of it available";
  if (availableMinor === 0n) return "all of it held until refunds close";
  return `${money(availableMinor)} of it available and ${money(heldMinor)} held`;
}

function owedOf({ currency, heldMinor, availableMinor }: SalesOfCurrency) {
  const money = (minor: bigint) => formatMoney({ minor, currency });
  const total = heldMinor + availableMinor;
  if (total < 0n)
    return {
      figure: money(total),
      rest: "after refunds and disputes of what was already paid. It comes off coming sales and is never taken from a bank.",
    };
  if (total === 0n) return { figure: money(0n), rest: "so nothing waits to be paid." };
  return { figure: money(total), rest: `${shares(heldMinor, availableMinor, money)}.` };
}

/** The first sentence of the owner's money. */
export function SalesHead({ sales, place, isPast }: { sales: Sales; place: string; isPast: boolean }) {
  const library = sales.currencies[0]?.lines[0]?.libraryName ?? "The library";
  const owed = sales.currencies.map(owedOf);
  return (
    <HeadSentence place={place} size="huge">
      On {fmt.date(sales.at)} {library} {isPast ? "was" : "is"} owed{" "}
      {owed.map(({ figure, rest }, index) => (
        <span key={figure}>
          {index > 0 && " It is also owed "}
          <b>{figure}</b>, {rest}
        </span>
      ))}
    </HeadSentence>
  );
}
