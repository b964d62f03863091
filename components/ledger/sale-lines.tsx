import { TextLink } from "@/components/ui/button";
import { Disclosure } from "@/components/ui/disclosure";
import { fmt } from "@/components/ui/format";
import { Title } from "@/components/ui/title";
import { formatMoney } from "@/lib/kernel/money";
import type { SaleLine } from "@/lib/ledger";
import { MoneyLine } from "./money-line";
import { SaleDelta } from "./sale-delta";

function standing(line: SaleLine): string | null {
  switch (line.state) {
    case "held":
      return line.holdEndsAt ? `Held until ${fmt.date(line.holdEndsAt)}, when refunds close.` : "Held.";
    case "available":
      return null;
    case "refunded":
      return "Refunded: nothing of it is left.";
    case "disputed":
      return "Disputed by the buyer's bank, which took the payment back.";
  }
}

function SaleParts({ line, isOpen }: { line: SaleLine; isOpen: boolean }) {
  const money = (minor: bigint) => formatMoney({ minor, currency: line.currency });
  return (
    <Disclosure open={isOpen} words="Its parts">
      <SaleDelta line={line} />
      {line.since.length > 0 && (
        <ul className="mt-2 text-small text-ink-soft">
          {line.since.map((event) => (
            <li key={`${event.words} ${event.eventAt.toISOString()}`}>
              {fmt.date(event.eventAt)}: {event.words}
              {event.amountMinor !== 0n && ` ${money(event.amountMinor)}`}
            </li>
          ))}
        </ul>
      )}
    </Disclosure>
  );
}

/** Each sale with the library's part of it; the first lies open. */
export function SaleLines({ lines }: { lines: readonly SaleLine[] }) {
  return (
    <ul>
      {lines.map((line, index) => {
        const money = (minor: bigint) => formatMoney({ minor, currency: line.currency });
        const words = standing(line);
        return (
          <MoneyLine
            amount={money(line.keptMinor)}
            date={fmt.dayMonth(line.soldAt)}
            isFirst={index === 0}
            key={line.orderLineId}
            of={
              line.keptMinor === line.libraryMinor
                ? `of ${money(line.netMinor)} net`
                : `${money(line.libraryMinor)} when sold`
            }
            parts={<SaleParts isOpen={index === 0} line={line} />}
          >
            <p>
              <Title>{line.cueTitle}</Title> to {line.buyer} for {line.productionTitle}: {line.scopeWords}.
              Order <span className="whitespace-nowrap">{line.orderNumber}</span>
              {line.licenceNumber && (
                <>
                  , licence{" "}
                  <TextLink className="whitespace-nowrap" href={`/records/${line.licenceNumber}`}>
                    {line.licenceNumber}
                  </TextLink>
                </>
              )}
              .
            </p>
            {words && <p className="text-small text-ink-soft">{words}</p>}
          </MoneyLine>
        );
      })}
    </ul>
  );
}
