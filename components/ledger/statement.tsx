import { Disclosure } from "@/components/ui/disclosure";
import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { Section, Sentence } from "@/components/ui/sentence";
import { formatMoney } from "@/lib/kernel/money";
import type { Statement, StatementLine } from "@/lib/ledger";
import { MoneyLine } from "./money-line";
import { LineWords } from "./other-lines";

function Amount({ minor, currency }: { minor: bigint; currency: string }) {
  return <span className="whitespace-nowrap">{formatMoney({ minor, currency })}</span>;
}

/** The month in one sentence a currency. */
export function StatementHead({ statements, month }: { statements: readonly Statement[]; month: string }) {
  if (statements.length === 0) return `Nothing moved in ${month}, and nothing was owed.`;
  return statements.map(({ currency, openingMinor, closingMinor, lines }) => {
    const closing = <Amount currency={currency} minor={closingMinor} />;
    const paid = lines.reduce((sum, line) => (line.code === "payout" ? sum - line.amountMinor : sum), 0n);
    return (
      <span key={currency}>
        {lines.length === 0 ? (
          <>
            Nothing moved in {month}; the balance stayed {closing}.{" "}
          </>
        ) : (
          <>
            In {month} the balance went from <Amount currency={currency} minor={openingMinor} /> to {closing}
            {paid > 0n && (
              <>
                ; <Amount currency={currency} minor={paid} /> was paid out
              </>
            )}
            .{" "}
          </>
        )}
      </span>
    );
  });
}

/** How a sale came to this amount: net, fees, pool, share. */
function Reckoning({ line, currency }: { line: StatementLine; currency: string }) {
  const { sale } = line;
  if (!sale) return null;
  const money = (minor: bigint) => formatMoney({ minor, currency });
  return (
    <Disclosure words="How it is reckoned">
      <FactList
        nameWidth="10rem"
        rows={[
          { name: "Net sale", value: money(sale.netMinor) },
          { name: "Platform fee", value: money(-sale.platformFeeMinor) },
          { name: "Card's fee", value: money(-sale.processorFeeMinor) },
          { name: "Library receipts", value: money(sale.receiptsMinor) },
          { name: "Composers' pool", value: `${fmt.shareBps(sale.poolBps)}\u00a0% of receipts` },
          ...(sale.shareBps === null
            ? []
            : [{ name: "Your share", value: `${fmt.shareBps(sale.shareBps)}\u00a0% of the pool` }]),
          { name: "This line", value: money(line.amountMinor) },
          { name: "Posted", value: fmt.dateTime(line.postedAt), below: `Journal entry ${line.entryId}` },
        ]}
      />
    </Disclosure>
  );
}

/** One month in one currency: opening balance, every line with its reason, closing balance. */
export function StatementOfOneCurrency({ statement }: { statement: Statement }) {
  const { currency, lines, advance } = statement;
  const money = (minor: bigint) => formatMoney({ minor, currency });
  return (
    <Section className="mt-8" head="Every line" note={currency}>
      <p className="grid grid-cols-[minmax(0,1fr)_auto] py-2">
        <span>Opening balance</span>
        <b className="figures text-lead font-strong">{money(statement.openingMinor)}</b>
      </p>
      <ul>
        {lines.map((line) => (
          <MoneyLine
            amount={money(line.amountMinor)}
            date={fmt.dayMonth(line.eventAt)}
            key={line.key}
            of={`balance ${money(line.balanceMinor)}`}
            parts={line.sale && <Reckoning currency={currency} line={line} />}
          >
            <p>
              <LineWords currency={currency} line={line} />
            </p>
          </MoneyLine>
        ))}
      </ul>
      <p className="grid grid-cols-[minmax(0,1fr)_auto] border-t border-ink pt-3">
        <span>Closing balance</span>
        <b className="figures text-lead font-strong">{money(statement.closingMinor)}</b>
      </p>
      <Sentence className="mt-1" size="small" soft>
        Of it {money(statement.heldMinor)} is held until refunds close and {money(statement.availableMinor)}{" "}
        is available.
        {statement.closingMinor < 0n && " It comes off coming sales, and is never taken from a bank."}
      </Sentence>
      {advance && (
        <Sentence className="mt-3">
          Advance of {money(advance.paidMinor)}: {money(advance.recoupedMinor)} repaid by the end of the
          month, {money(advance.outstandingMinor)} still to come back from your part.
        </Sentence>
      )}
    </Section>
  );
}
