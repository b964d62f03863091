import { TextLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { StatusSentence } from "@/components/ui/status-sentence";
import { formatMoney } from "@/lib/kernel/money";
import type { PayoutOfRun, PayoutRunView } from "@/lib/ledger";

export const isToPay = ({ state }: PayoutOfRun) =>
  state === "prepared" || state === "sending" || state === "paid";

const sum = (payouts: readonly PayoutOfRun[]) => payouts.reduce((total, one) => total + one.amountMinor, 0n);

function PayoutRow({ payout, currency }: { payout: PayoutOfRun; currency: string }) {
  const amount = formatMoney({ minor: payout.amountMinor, currency });
  const last4 = payout.bankLast4 ? ` to the account ending ${payout.bankLast4}` : "";
  const below = {
    paid: payout.paidAt ? `Paid on ${fmt.date(payout.paidAt)}${last4}` : "Paid",
    sending: `Being sent${last4}`,
    prepared: `Goes${last4 || " to the account given to the payment service"}`,
    carried: payout.reason,
    failed: payout.reason,
    withdrawn: payout.reason,
  }[payout.state];
  return (
    <li className="grid grid-cols-[minmax(0,1fr)_auto] gap-x-4 border-b border-line py-2 in-[.buff]:border-b-[1.5px] in-[.buff]:border-buff-2">
      <TextLink className="justify-self-start" href={`/payouts/${payout.payoutId}`}>
        {payout.name}
      </TextLink>
      <span className={isToPay(payout) ? "figures font-strong" : "figures"}>{amount}</span>
      <span className="col-span-2 text-small text-ink-soft">{below}</span>
    </li>
  );
}

/** Who is paid by a run, what leaves the bank, and who is carried forward with the reason. */
export function RunPayouts({ run }: { run: PayoutRunView }) {
  const toPay = run.payouts.filter(isToPay);
  const others = run.payouts.filter((payout) => !isToPay(payout));
  return (
    <>
      {toPay.length > 0 && (
        <ul className="border-t border-line in-[.buff]:border-t-[1.5px] in-[.buff]:border-buff-2">
          {toPay.map((payout) => (
            <PayoutRow currency={run.currency} key={payout.payoutId} payout={payout} />
          ))}
          <li className="grid grid-cols-[minmax(0,1fr)_auto] gap-x-4 py-2">
            <span>{toPay.every(({ state }) => state === "paid") ? "Left the bank" : "Leaves the bank"}</span>
            <span className="figures font-strong">
              {formatMoney({ minor: sum(toPay), currency: run.currency })}
            </span>
          </li>
        </ul>
      )}
      {others.length > 0 && (
        <>
          <h3 className="mt-4 mb-1 font-strong">Not paid by this run</h3>
          <ul className="border-t border-line in-[.buff]:border-t-[1.5px] in-[.buff]:border-buff-2">
            {others.map((payout) => (
              <PayoutRow currency={run.currency} key={payout.payoutId} payout={payout} />
            ))}
          </ul>
        </>
      )}
    </>
  );
}

/** How far a run has come on its way through two persons' hands. */
export function RunSteps({ run }: { run: Omit<PayoutRunView, "payouts"> }) {
  if (run.state === "withdrawn")
    return (
      <StatusSentence mark="open">
        Prepared by {run.preparedBy} on {fmt.dateTime(run.preparedAt)}. A newer run took its place.
      </StatusSentence>
    );
  return (
    <ol className="grid content-start gap-2">
      <StatusSentence as="li" mark="done">
        Prepared by {run.preparedBy} on {fmt.dateTime(run.preparedAt)}
      </StatusSentence>
      <StatusSentence as="li" mark={run.released ? "done" : "half"}>
        {run.released
          ? `Released by ${run.released.by}, the library's accountant, on ${fmt.dateTime(run.released.at)}`
          : "Waiting for the library's accountant to release it"}
      </StatusSentence>
      <StatusSentence as="li" mark={run.confirmed ? "done" : run.released ? "half" : "open"}>
        {run.confirmed
          ? `Confirmed by ${run.confirmed.by}, the marketplace's accountant, on ${fmt.dateTime(run.confirmed.at)}`
          : run.released
            ? "Waiting for a second person, the marketplace's accountant. Without one nothing leaves."
            : "Then a second person confirms, the marketplace's accountant"}
      </StatusSentence>
    </ol>
  );
}
