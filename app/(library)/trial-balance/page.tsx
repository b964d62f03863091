import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { InstantForm } from "@/components/ledger/instant-form";
import { TrialTable } from "@/components/ledger/trial-table";
import { TextLink } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { AsideTitle, Page } from "@/components/ui/page";
import { Problem } from "@/components/ui/problem";
import { HeadSentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { isSignedIn } from "@/lib/kernel/actor";
import { checkLedger, getTrialBalance, monthInWords, monthOf } from "@/lib/ledger";
import { viewer } from "@/lib/web";
import { instantOf, type SearchParams } from "../read-params";

export const metadata: Metadata = { title: "Trial balance" };

/** "31 March 2026, 23:59:59 UTC" */
const exactly = (at: Date) => `${fmt.date(at)}, ${at.toISOString().slice(11, 19)}\u00a0UTC`;

export default async function TrialBalancePage({ searchParams }: { searchParams: SearchParams }) {
  const { actor, roles } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in?to=/trial-balance");
  if (actor.kind !== "accountant" && actor.kind !== "auditor") notFound();
  const given = (await searchParams).at;
  const asked = instantOf(given);
  const isUnreadable = given !== undefined && given !== "" && asked === null;
  const { at, isWhole, balances } = await getTrialBalance(actor, asked ? { at: asked } : {});
  const breaches = isWhole && actor.kind === "accountant" ? await checkLedger(actor, {}) : null;
  const month = monthOf(at);
  const isEven = balances.every(({ debitMinor, creditMinor }) => debitMinor === creditMinor);
  const head = isWhole
    ? `${isEven ? "Debits and credits are equal" : "Debits and credits are not equal"} at ${exactly(at)}.`
    : `What was owed to the library and its writers at ${exactly(at)}.`;
  const aside = (
    <>
      <AsideTitle below="An entry counts from the second it was posted, whatever day it is about.">
        At another instant
      </AsideTitle>
      {isUnreadable && (
        <Problem className="mb-3" remedy="Write it as 2026-03-31T23:59:59. This is the balance now.">
          The instant asked for could not be read.
        </Problem>
      )}
      <InstantForm at={at} />
      {breaches && (
        <div className="mt-8">
          <AsideTitle>Checked just now</AsideTitle>
          {breaches.length === 0 ? (
            <StatusSentence mark="tick">
              Every rule that stored entries can show holds for the whole journal.
            </StatusSentence>
          ) : (
            breaches.map(({ invariant, rows }) => (
              <Problem key={invariant} place={rows.join(", ")}>
                {invariant}
              </Problem>
            ))
          )}
        </div>
      )}
    </>
  );
  return (
    <Page aside={aside} asideLabel="Instant and checks">
      <HeadSentence
        links={<TextLink href={`/journal/${month}`}>Entries of {monthInWords(month)}</TextLink>}
        place={`Trial balance, as ${roles.find((role) => role.current)?.label}`}
      >
        {head}
      </HeadSentence>
      {balances.length === 0 && (
        <div className="mt-8">
          <Empty>Accounts stand here from the first entry on; there was none by then.</Empty>
        </div>
      )}
      {balances.map((balance) => (
        <div className="mt-8" key={balance.currency}>
          <TrialTable balance={balance} isWhole={isWhole} />
        </div>
      ))}
    </Page>
  );
}
