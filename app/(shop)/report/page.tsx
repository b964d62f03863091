import type { Metadata } from "next";
import { countryOptions } from "@/app/(account)/company/countries";
import { type SearchParams, wordOf } from "@/app/(account)/where-to";
import { ReceiptLookup } from "@/components/reports/receipt-lookup";
import { ReportForm } from "@/components/reports/report-form";
import { Caution } from "@/components/ui/caution";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";

export const metadata: Metadata = { title: "Report a work" };

const CATALOGUE_NUMBER = /^[A-Z]{2,4}\d{4}$/;

export default async function ReportPage({ searchParams }: { searchParams: SearchParams }) {
  const asked = wordOf((await searchParams).cue)?.toUpperCase() ?? "";
  const cue = CATALOGUE_NUMBER.test(asked) ? asked : null;
  return (
    <ReportForm
      after={
        <Section className="mt-9" head="You have a number already">
          <ReceiptLookup />
        </Section>
      }
      countries={countryOptions()}
      cue={cue}
      head={
        <>
          <HeadSentence place="Report a work">
            If music of yours is used here without your permission, say so in four steps: your work, where it
            is used, why, and who you are.
          </HeadSentence>
          <Sentence className="mt-3 mb-8" soft>
            It needs no account and costs nothing. Only what is marked “if you like” may be left out. A person
            reads every report and answers with reasons.
          </Sentence>
          <Caution className="mb-8" />
        </>
      }
    />
  );
}
