import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { JournalEntries } from "@/components/ledger/journal-entries";
import { TextLink } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence } from "@/components/ui/sentence";
import { isSignedIn } from "@/lib/kernel/actor";
import { Invalid } from "@/lib/kernel/errors";
import { getJournal, monthInWords } from "@/lib/ledger";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Journal" };

export default async function JournalPage({ params }: { params: Promise<{ period: string }> }) {
  const { actor, roles } = await viewer();
  const { period } = await params;
  if (!isSignedIn(actor)) redirect(`/sign-in?to=/journal/${encodeURIComponent(period)}`);
  if (actor.kind !== "accountant" && actor.kind !== "auditor") notFound();
  const entries = await getJournal(actor, { period }).catch((error: unknown) => {
    if (error instanceof Invalid) notFound();
    throw error;
  });
  const month = monthInWords(period);
  return (
    <Page>
      <HeadSentence
        links={<TextLink href="/trial-balance">Trial balance</TextLink>}
        place={`Journal of ${month}, as ${roles.find((role) => role.current)?.label}`}
      >
        {entries.length === 0
          ? `Nothing was posted in ${month}.`
          : `${fmt.count(entries.length, "entry", "entries")} ${entries.length === 1 ? "was" : "were"} posted in ${month}; each balances by itself.`}
      </HeadSentence>
      {entries.length === 0 ? (
        <div className="mt-8">
          <Empty>Entries stand here in the order in which they were posted, by UTC months.</Empty>
        </div>
      ) : (
        <JournalEntries entries={entries} />
      )}
    </Page>
  );
}
