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

function standingOf({ currency, heldMinor, availableMinor }: SalesOfCurrency, isPast: boolean) {
  const money = (minor: bigint) => formatMoney({ minor, currency });
  const total = heldMinor + availableMinor;
  const figure = money(total);
  if (total < 0n)
    return {
      verb: isPast ? "stood at" : "stands at",
      figure,
      rest: " after refunds and disputes of what was already paid. It comes off coming sales and is never taken from a bank.",
    };
  const verb = isPast ? "was owed" : "is owed";
  if (total === 0n) return { verb, figure, rest: ": nothing waits to be paid." };
  return { verb, figure, rest: `, ${shares(heldMinor, availableMinor, money)}.` };
}

/** The first sentence of the owner's money. */
export function SalesHead({ sales, place, isPast }: { sales: Sales; place: string; isPast: boolean }) {
  const library = sales.currencies[0]?.lines[0]?.libraryName ?? "The library";
  return (
    <HeadSentence place={place} size="huge">
      On {fmt.date(sales.at)} {library}{" "}
      {sales.currencies.map((one, index) => {
        const { verb, figure, rest } = standingOf(one, isPast);
        return (
          <span key={one.currency}>
            {index > 0 && ` In ${one.currency} it `}
            {verb} <b className="whitespace-nowrap">{figure}</b>
            {rest}
          </span>
        );
      })}
    </HeadSentence>
  );
}
