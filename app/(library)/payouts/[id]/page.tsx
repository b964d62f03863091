import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { OtherLines } from "@/components/ledger/other-lines";
import { RunSteps } from "@/components/ledger/payout-run";
import { TextLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { isSignedIn } from "@/lib/kernel/actor";
import { NotFound } from "@/lib/kernel/errors";
import { formatMoney } from "@/lib/kernel/money";
import { getPayout, type PayoutView } from "@/lib/ledger";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Payout" };

function headOf(payout: PayoutView): string {
  const amount = formatMoney({ minor: payout.amountMinor, currency: payout.currency });
  const from = payout.kind === "person" ? `, for work in ${payout.libraryName}` : "";
  switch (payout.state) {
    case "paid":
      return `${amount} was paid to ${payout.name}${from} on ${fmt.date(payout.paidAt ?? payout.run.preparedAt)}.`;
    case "sending":
      return `${amount} is on its way to ${payout.name}${from}.`;
    case "prepared":
      return `${amount} for ${payout.name}${from} waits to be released.`;
    case "carried":
    case "failed":
    case "withdrawn":
      return `${amount} of ${payout.name}${from} was not paid by this run.`;
  }
}

export default async function PayoutPage({ params }: { params: Promise<{ id: string }> }) {
  const { actor, roles } = await viewer();
  const { id } = await params;
  if (!isSignedIn(actor)) redirect(`/sign-in?to=/payouts/${encodeURIComponent(id)}`);
  const mayAsk = ["owner", "staff", "accountant", "auditor", "composer"].includes(actor.kind);
  if (!mayAsk) notFound();
  const payout = await getPayout(actor, { payoutId: id }).catch((error: unknown) => {
    if (error instanceof NotFound) notFound();
    throw error;
  });
  const money = (minor: bigint) => formatMoney({ minor, currency: payout.currency });
  const isPaid = payout.state === "paid";
  const back = actor.kind === "composer" ? "/statements" : "/payouts";
  return (
    <Page>
      <HeadSentence
        links={
          <TextLink href={back}>{actor.kind === "composer" ? "All statements" : "All payouts"}</TextLink>
        }
        place={`Payout, as ${roles.find((role) => role.current)?.label}`}
      >
        {headOf(payout)}
      </HeadSentence>
      {!isPaid && <Sentence className="mt-3">{payout.reason}</Sentence>}
      <Section
        className="mt-8"
        head={isPaid ? "What it is the sum of" : "What was available"}
        note={payout.currency}
      >
        {payout.openingMinor !== 0n && (
          <Sentence className="mb-2">
            {money(payout.openingMinor)} stood there before the first of these lines, from after the payout
            before.
          </Sentence>
        )}
        <OtherLines currency={payout.currency} lines={payout.lines} />
        <p className="grid grid-cols-[minmax(0,1fr)_auto] border-t border-ink pt-3">
          <span>{isPaid ? "Paid" : "In this run"}</span>
          <b className="figures text-lead font-strong">{money(payout.amountMinor)}</b>
        </p>
        {payout.leftMinor !== 0n && (
          <Sentence className="mt-2" size="small" soft>
            {money(payout.leftMinor)} became available after the run was prepared, and waits for the next.
          </Sentence>
        )}
      </Section>
      <Section className="mt-8" head="How it was released">
        <RunSteps run={payout.run} />
        {payout.transferId && (
          <Sentence className="mt-3" size="small" soft>
            Transfer {payout.transferId} at the payment service; journal entry {payout.entryId}.
          </Sentence>
        )}
      </Section>
    </Page>
  );
}
