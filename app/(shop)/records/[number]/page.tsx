import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { LicenceContour } from "@/components/licensing/licence-contour";
import { RecordAside } from "@/components/licensing/record-aside";
import { RecordPaper } from "@/components/licensing/record-paper";
import { stretchesOf, TermStrip } from "@/components/licensing/term-strip";
import { TextLink } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { HeadSentence, Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import { NotFound } from "@/lib/kernel/errors";
import { getLicence } from "@/lib/licensing";
import { viewer } from "@/lib/web";
import { setWithheld } from "../../orders/actions";

type Props = { params: Promise<{ number: string }>; searchParams: Promise<{ preparing?: string }> };

const SEEN_BY = ["buyer", "owner", "staff", "accountant", "auditor"];

async function read(number: string) {
  const { actor, person } = await viewer();
  if (!person) redirect(`/sign-in?to=/records/${number}`);
  if (!SEEN_BY.includes(actor.kind)) notFound();
  try {
    return await getLicence(actor, { number });
  } catch (error) {
    if (error instanceof NotFound) notFound();
    throw error;
  }
}

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: `Licence ${(await params).number}` };
}

export default async function RecordScreen({ params, searchParams }: Props) {
  const page = await read((await params).number);
  const { record, licensee, production, today } = page;
  const { term } = record.scope;
  const isBroughtIn = record.origin === "brought in";
  return (
    <Page
      aside={
        <RecordAside
          isPreparing={(await searchParams).preparing === "1"}
          page={page}
          setWithheld={setWithheld}
        />
      }
      asideLabel="Keep it, send it on"
    >
      <HeadSentence
        place={
          <>
            {page.isLicensees && (
              <>
                <TextLink href="/records">Licences</TextLink>,{" "}
              </>
            )}
            {record.number}
            {isBroughtIn && ", brought in"}
            {record.demonstration && ". Demonstration"}
          </>
        }
        size="huge"
      >
        {record.licensor.legalName} lets {licensee.name} use <Title>{record.cue.title}</Title> in{" "}
        {production.title}.
      </HeadSentence>
      <div className="mt-5 grid items-end gap-x-10 gap-y-5 @wide:grid-cols-[minmax(0,1fr)_22rem]">
        <div>
          <StatusSentence mark={today.answer === "not in force" ? "open" : "tick"}>
            {today.sentence}
          </StatusSentence>
          {isBroughtIn && (
            <Sentence className="mt-2" size="small" soft>
              {record.licensor.legalName} issued it outside this service and brought it in; the record was
              signed then.
            </Sentence>
          )}
        </div>
        {page.contour && (
          <LicenceContour ending={page.ending} height={56} packed={page.contour} title={record.cue.title} />
        )}
      </div>
      <div className="mt-4">
        <TermStrip
          lastUseAt={term.lastUseAt}
          onDate={today.date}
          startsOn={term.startsOn}
          stretches={stretchesOf(term.startsOn, term.lastUseAt, page.history)}
          today={today.date}
          zone={term.zone}
        />
      </div>
      <RecordPaper page={page} />
      {page.orderId && (
        <p className="mt-8">
          <TextLink href={`/orders/${page.orderId}`}>The order it came from, with its invoice</TextLink>
        </p>
      )}
    </Page>
  );
}
