import { TextLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Title } from "@/components/ui/title";
import { formatMoney } from "@/lib/kernel/money";
import type { StatementLine } from "@/lib/ledger";
import { MoneyLine } from "./money-line";

/** What a line is about, as a sentence. */
export function LineWords({ line, currency }: { line: StatementLine; currency: string }) {
  const { sale, advancesOf, payoutId } = line;
  if (advancesOf.length > 0)
    return (
      <>
        {fmt.list(
          advancesOf.map(
            ({ name, amountMinor }) => `${name}: ${formatMoney({ minor: amountMinor, currency })}`,
          ),
        )}
        .{" "}
        {line.code === "recoupment"
          ? "An advance, repaid from the composer's own part and nobody else's."
          : "The repayment of an advance is put back, because the earnings it came from are gone."}
      </>
    );
  if (sale)
    return (
      <>
        {line.code === "capture" || line.code === "hold ends" ? "" : `${line.name}: `}
        <Title>{sale.cueTitle}</Title>
        {sale.buyer && ` to ${sale.buyer}`}
        {sale.productionTitle && ` for ${sale.productionTitle}`}: {sale.scopeWords}. Order{" "}
        <span className="whitespace-nowrap">{sale.orderNumber}</span>
        {sale.licenceNumber && (
          <>
            , licence <span className="whitespace-nowrap">{sale.licenceNumber}</span>
          </>
        )}
        .{line.code !== "capture" && line.code !== "hold ends" && ` ${line.reason}`}
      </>
    );
  return (
    <>
      {line.reason}
      {payoutId && (
        <>
          {" "}
          <TextLink href={`/payouts/${payoutId}`}>Its lines</TextLink>
        </>
      )}
    </>
  );
}

/** Dated lines that are no sale, or of which only one party's part is known. */
export function OtherLines({ lines, currency }: { lines: readonly StatementLine[]; currency: string }) {
  return (
    <ul>
      {lines.map((line, index) => (
        <MoneyLine
          amount={formatMoney({ minor: line.amountMinor, currency })}
          date={fmt.dayMonth(line.eventAt)}
          isFirst={index === 0}
          key={line.key}
          of={line.sale ? `of ${formatMoney({ minor: line.sale.netMinor, currency })} net` : undefined}
        >
          <p>
            <LineWords currency={currency} line={line} />
          </p>
        </MoneyLine>
      ))}
    </ul>
  );
}
