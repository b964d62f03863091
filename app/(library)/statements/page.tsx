import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { countryOptions } from "@/app/(account)/company/countries";
import { PayeeStanding } from "@/components/ledger/payee-standing";
import { TextLink } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { AsideTitle, Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { Table } from "@/components/ui/table";
import { isSignedIn } from "@/lib/kernel/actor";
import { formatMoney } from "@/lib/kernel/money";
import { getOwnPayee, listStatements, monthInWords, type StatementMonth } from "@/lib/ledger";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Statements" };

interface Row {
  month: string;
  isOpen: boolean;
  sum: StatementMonth["sums"][number];
}

function headOf(rows: readonly Row[]): string {
  const [latest] = rows;
  if (!latest) return "Nothing has been earned through this service yet.";
  const now = rows.filter(({ month }) => month === latest.month);
  const figures = now
    .map(({ sum }) => formatMoney({ minor: sum.closingMinor, currency: sum.currency }))
    .join(" and ");
  const isBelow = now.some(({ sum }) => sum.closingMinor < 0n);
  return isBelow
    ? `The balance is ${figures}: what was taken back comes off coming sales, never out of a bank.`
    : `The balance is ${figures}.`;
}

export default async function StatementsPage() {
  const { actor, roles, person } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in?to=/statements");
  const hasStatements =
    actor.kind === "composer" ||
    actor.kind === "owner" ||
    actor.kind === "accountant" ||
    actor.kind === "auditor";
  if (!hasStatements || actor.libraryId === null) notFound();
  const months = await listStatements(actor, {});
  const rows: Row[] = months.flatMap(({ month, isOpen, sums }) =>
    sums.map((sum) => ({ month, isOpen, sum })),
  );
  const money = (minor: bigint, { sum }: Row) => formatMoney({ minor, currency: sum.currency });
  const link = (row: Row) => (
    <TextLink href={`/statements/${row.month}`}>
      {monthInWords(row.month)}
      {row.isOpen && ", so far"}
    </TextLink>
  );
  const aside = actor.kind === "composer" && (
    <>
      <AsideTitle below="Your bank data stay with the payment service.">Where your payouts go</AsideTitle>
      <PayeeStanding
        countries={countryOptions()}
        payee={await getOwnPayee(actor, {})}
        suggestedName={person?.name ?? ""}
      />
    </>
  );
  return (
    <Page {...(aside ? { aside, asideLabel: "Where your payouts go" } : {})}>
      <HeadSentence place={`Statements, as ${roles.find((role) => role.current)?.label}`}>
        {headOf(rows)}
      </HeadSentence>
      <Section className="mt-8" head="Month by month">
        {rows.length === 0 ? (
          <Empty>A month stands here from the first sale on, months without a sale included.</Empty>
        ) : (
          <Table
            caption="Statements, the newest first"
            captionHidden
            columns={[
              { key: "month", head: "Month", cell: link },
              {
                key: "opening",
                head: "Opening",
                cell: (row) => money(row.sum.openingMinor, row),
                figures: true,
              },
              {
                key: "earned",
                head: "Sales, less what was taken back",
                cell: (row) => money(row.sum.earnedMinor, row),
                figures: true,
              },
              { key: "paid", head: "Paid", cell: (row) => money(row.sum.paidMinor, row), figures: true },
              {
                key: "closing",
                head: "Closing",
                cell: (row) => money(row.sum.closingMinor, row),
                figures: true,
              },
            ]}
            rowKey={(row) => `${row.month} ${row.sum.currency}`}
            rows={rows}
            sentence={(row) => (
              <>
                {link(row)}: from {money(row.sum.openingMinor, row)} by {money(row.sum.earnedMinor, row)} of
                sales and {money(row.sum.paidMinor, row)} paid to{" "}
                <b className="font-strong">{money(row.sum.closingMinor, row)}</b>.
              </>
            )}
          />
        )}
      </Section>
    </Page>
  );
}
