import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { StatementHead, StatementOfOneCurrency } from "@/components/ledger/statement";
import { ButtonLink, TextLink } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { HeadSentence, Sentence } from "@/components/ui/sentence";
import { isSignedIn } from "@/lib/kernel/actor";
import { Invalid, NotFound } from "@/lib/kernel/errors";
import { getStatement, monthInWords } from "@/lib/ledger";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Statement" };

export default async function StatementPage({ params }: { params: Promise<{ period: string }> }) {
  const { actor, roles } = await viewer();
  const { period } = await params;
  if (!isSignedIn(actor)) redirect(`/sign-in?to=/statements/${encodeURIComponent(period)}`);
  const hasStatements =
    actor.kind === "composer" ||
    actor.kind === "owner" ||
    actor.kind === "accountant" ||
    actor.kind === "auditor";
  if (!hasStatements || actor.libraryId === null) notFound();
  const statements = await getStatement(actor, { period }).catch((error: unknown) => {
    if (error instanceof NotFound || error instanceof Invalid) notFound();
    throw error;
  });
  const month = monthInWords(period);
  return (
    <Page>
      <HeadSentence
        links={
          <>
            <TextLink href="/statements">All statements</TextLink>
            <ButtonLink download href={`/api/statements/${period}`} kind="quiet">
              As a table (CSV)
            </ButtonLink>
          </>
        }
        place={`Statement of ${month}, as ${roles.find((role) => role.current)?.label}`}
      >
        <StatementHead month={month} statements={statements} />
      </HeadSentence>
      {statements.map((statement) => (
        <StatementOfOneCurrency key={statement.currency} statement={statement} />
      ))}
      <Sentence className="mt-6" size="small" soft>
        Months begin and end in UTC. A finished month is never changed: what is corrected later stands in a
        later month, with its reason.
      </Sentence>
    </Page>
  );
}
