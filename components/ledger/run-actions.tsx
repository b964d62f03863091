"use client";

import { confirmRun, prepareRun, releaseRun } from "@/app/(library)/payouts/actions";
import { ActButton } from "@/components/account/act-button";
import { fmt } from "@/components/ui/format";
import { AsideTitle } from "@/components/ui/page";
import { Sentence } from "@/components/ui/sentence";
import { formatMoney } from "@/lib/kernel/money";
import type { DueNow, PayoutRunView } from "@/lib/ledger";
import { isToPay } from "./payout-run";

function sumOf(run: PayoutRunView): string {
  const minor = run.payouts.filter(isToPay).reduce((sum, one) => sum + one.amountMinor, 0n);
  return formatMoney({ minor, currency: run.currency });
}

/** The marketplace's accountant confirms what a library's has released. */
function Confirm({ runs }: { runs: readonly PayoutRunView[] }) {
  const [run, ...more] = runs.filter(({ state }) => state === "released");
  if (!run)
    return (
      <Sentence>
        Nothing waits for you. A run comes here when a library's accountant has released it.
      </Sentence>
    );
  return (
    <>
      <Sentence className="mb-3">
        {run.libraryName}, prepared on {fmt.date(run.preparedAt)} by {run.preparedBy}: {sumOf(run)} leaves the
        bank.
      </Sentence>
      <ActButton
        act={confirmRun}
        busyWords="Confirming"
        input={{ runId: run.runId }}
        kind="main"
        question={{
          title: `Send ${sumOf(run)}?`,
          consequence:
            "The payment service is asked to pay at once, one transfer a payee. It cannot be called back.",
        }}
        words="Confirm as the second person"
      />
      {more.length > 0 && (
        <Sentence className="mt-3">{fmt.count(more.length, "more run")} after this.</Sentence>
      )}
    </>
  );
}

/** The library's accountant prepares a run, and releases it as the first person. */
function PrepareAndRelease({
  runs,
  due,
  libraryId,
}: {
  runs: readonly PayoutRunView[];
  due: readonly DueNow[];
  libraryId: string;
}) {
  const run = runs.find(({ state }) => state === "prepared");
  const isPayable = run?.payouts.some(isToPay) ?? false;
  const some = due.filter(({ payees }) => payees.length > 0);
  return (
    <>
      {run && isPayable && (
        <div className="mb-5">
          <Sentence className="mb-3">
            The run of {fmt.date(run.preparedAt)} pays {sumOf(run)}. After you, a marketplace accountant
            confirms it.
          </Sentence>
          <ActButton
            act={releaseRun}
            busyWords="Releasing"
            input={{ runId: run.runId }}
            kind="main"
            words={`Release ${sumOf(run)}`}
          />
        </div>
      )}
      {some.length === 0 && (
        <Sentence>Nobody has an available balance, so there is nothing to prepare.</Sentence>
      )}
      {some.map(({ currency, payees }) => (
        <div className="mb-3" key={currency}>
          <Sentence className="mb-2">
            {fmt.count(payees.length, "balance")} in {currency}, of the library and its writers.
            {run && " Preparing again takes the place of the run above."}
          </Sentence>
          <ActButton
            act={prepareRun}
            busyWords="Preparing"
            input={{ libraryId, currency }}
            kind={run && isPayable ? "plain" : "main"}
            words={`Prepare a run in ${currency}`}
          />
        </div>
      ))}
    </>
  );
}

export function RunActions({
  runs,
  due,
  libraryId,
}: {
  runs: readonly PayoutRunView[];
  due: readonly DueNow[];
  libraryId: string | null;
}) {
  return (
    <div className="mb-8">
      <AsideTitle below="Two people release a payout, each with the code of a second factor.">
        {libraryId === null ? "Confirm" : "Prepare and release"}
      </AsideTitle>
      {libraryId === null ? (
        <Confirm runs={runs} />
      ) : (
        <PrepareAndRelease due={due} libraryId={libraryId} runs={runs} />
      )}
    </div>
  );
}
