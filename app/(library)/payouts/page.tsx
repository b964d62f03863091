import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { countryOptions } from "@/app/(account)/company/countries";
import { PayeeStanding } from "@/components/ledger/payee-standing";
import { RunPayouts, RunSteps } from "@/components/ledger/payout-run";
import { payoutsHead } from "@/components/ledger/payouts-head";
import { RunActions } from "@/components/ledger/run-actions";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { AsideTitle, Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { isSignedIn } from "@/lib/kernel/actor";
import { getOwnPayee, getPayouts } from "@/lib/ledger";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Payouts" };

export default async function PayoutsPage() {
  const { actor, roles } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in?to=/payouts");
  const isOfMoney =
    actor.kind === "owner" ||
    actor.kind === "accountant" ||
    (actor.kind === "auditor" && actor.libraryId !== null) ||
    (actor.kind === "staff" && actor.granted.includes("payouts"));
  if (!isOfMoney) notFound();
  const { runs, due } = await getPayouts(actor, {});
  const libraryId = actor.kind === "accountant" ? actor.libraryId : null;
  const isMarketplace = actor.kind === "accountant" && actor.libraryId === null;
  const isPayeesOwn = actor.kind === "owner" || libraryId !== null;
  const aside = (
    <>
      {actor.kind === "accountant" && <RunActions due={due} libraryId={libraryId} runs={runs} />}
      {isPayeesOwn && (
        <>
          <AsideTitle>Where the library's payouts go</AsideTitle>
          <PayeeStanding
            countries={countryOptions()}
            payee={await getOwnPayee(actor, {})}
            suggestedName={runs[0]?.libraryName ?? ""}
          />
        </>
      )}
    </>
  );
  return (
    <Page {...(actor.kind === "accountant" || isPayeesOwn ? { aside, asideLabel: "Release and payee" } : {})}>
      <HeadSentence place={`Payouts, as ${roles.find((role) => role.current)?.label}`}>
        {payoutsHead(runs, isMarketplace)}
      </HeadSentence>
      {runs.length === 0 && (
        <div className="mt-8">
          <Empty>
            Payout runs stand here: who was paid what, who was carried forward and why, and the two people who
            released it. A library's accountant prepares one.
          </Empty>
        </div>
      )}
      {runs.map((run) => (
        <Section
          className="mt-8"
          head={`${isMarketplace ? `${run.libraryName}, ` : ""}${fmt.date(run.preparedAt, { weekday: true })}`}
          key={run.runId}
          note={run.currency}
        >
          <div className="grid gap-5 @wide:grid-cols-2 @wide:gap-10">
            <div>{run.state !== "withdrawn" && <RunPayouts run={run} />}</div>
            <RunSteps run={run} />
          </div>
        </Section>
      ))}
    </Page>
  );
}
