import { ButtonLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { AsideTitle } from "@/components/ui/page";
import { Sentence } from "@/components/ui/sentence";
import { formatMoney } from "@/lib/kernel/money";
import type { DueNow, PayoutRunView } from "@/lib/ledger";
import { RunPayouts, RunSteps } from "./payout-run";

function Due({ due }: { due: readonly DueNow[] }) {
  const some = due.filter(({ payees }) => payees.length > 0);
  if (some.length === 0) return <Sentence>No run was prepared.</Sentence>;
  return (
    <>
      <Sentence className="mb-2">No run is prepared. Available now:</Sentence>
      {some.map(({ currency, payees }) => (
        <ul className="border-t-[1.5px] border-buff-2" key={currency}>
          {payees.map(({ name, balanceMinor }) => (
            <li
              className="grid grid-cols-[minmax(0,1fr)_auto] gap-x-4 border-b-[1.5px] border-buff-2 py-2"
              key={name}
            >
              <span>{name}</span>
              <span className="figures">{formatMoney({ minor: balanceMinor, currency })}</span>
            </li>
          ))}
        </ul>
      ))}
    </>
  );
}

/** The owner reads a payout and does not release it: the latest run, or what one would be made of. */
export function PayoutAside({ runs, due }: { runs: readonly PayoutRunView[]; due: readonly DueNow[] }) {
  const run = runs.find(({ state }) => state !== "withdrawn");
  const month = run?.preparedAt.toISOString().slice(0, 7);
  return (
    <>
      <AsideTitle below="Two people release it. You read it; you do not release your own.">
        {run ? `Payout of ${fmt.date(run.preparedAt, { weekday: true })}` : "The next payout"}
      </AsideTitle>
      {run ? (
        <>
          <RunPayouts run={run} />
          <h3 className="mt-5 mb-2 font-strong">Release</h3>
          <RunSteps run={run} />
        </>
      ) : (
        <Due due={due} />
      )}
      <Sentence className="mt-6 mb-3" size="small" soft>
        A refund or a payment dispute can still change this. After the payout it comes off coming sales, never
        out of your bank.
      </Sentence>
      {month ? (
        <>
          <ButtonLink href={`/statements/${month}`} kind="main" wide>
            Read the {fmt.date(`${month}-01T00:00:00Z`).replace(/^\d+\s/, "")} statement
          </ButtonLink>
          <p className="mt-3 text-center">
            <ButtonLink download href={`/api/statements/${month}`} kind="quiet">
              As a table (CSV)
            </ButtonLink>
          </p>
        </>
      ) : (
        <ButtonLink href="/statements" kind="main" wide>
          Read the statements
        </ButtonLink>
      )}
    </>
  );
}
