import type { Metadata } from "next";
import { type SearchParams, wordOf } from "@/app/(account)/where-to";
import { ConfirmAddress } from "@/components/reports/confirm-address";
import { NoticeSentence } from "@/components/reports/notice-sentence";
import { ReceiptLookup } from "@/components/reports/receipt-lookup";
import { ButtonLink, TextLink } from "@/components/ui/button";
import { Caution } from "@/components/ui/caution";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Invalid, NotFound } from "@/lib/kernel/errors";
import { getNoticeStatus, type NoticeStatus } from "@/lib/reports";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "A report" };

interface ReceiptPageProps {
  params: Promise<{ receipt: string }>;
  searchParams: SearchParams;
}

/** Mistyped and unknown are told apart: the first is found without looking anything up. */
function NoSuchReport({ typed, message }: { typed: string; message: string }) {
  return (
    <Page>
      <HeadSentence place={`Report ${typed}`}>{message}</HeadSentence>
      <div className="mt-8">
        <ReceiptLookup typed={typed} />
      </div>
      <Caution className="mt-10" />
    </Page>
  );
}

function Steps({ notice }: { notice: NoticeStatus }) {
  const isOver = notice.state === "decided";
  return (
    <Section className="mt-8" head="What happened so far">
      <ol>
        {notice.events.map((event) => (
          <StatusSentence
            as="li"
            below={fmt.dateTime(event.at)}
            className="border-b border-line py-2.5"
            key={`${event.at.toISOString()} ${event.words}`}
            mark="done"
          >
            {event.words}
          </StatusSentence>
        ))}
        {!isOver && (
          <StatusSentence as="li" className="py-2.5" mark="open">
            A person decides, with reasons; you hear by mail.
          </StatusSentence>
        )}
      </ol>
    </Section>
  );
}

export default async function ReceiptPage({ params, searchParams }: ReceiptPageProps) {
  const typed = decodeURIComponent((await params).receipt).slice(0, 40);
  const secret = wordOf((await searchParams).confirm);
  const { actor } = await viewer();
  const notice = await getNoticeStatus(actor, { receiptNumber: typed }).catch((error: unknown) => {
    if (error instanceof Invalid || error instanceof NotFound) return error.message;
    throw error;
  });
  if (typeof notice === "string") return <NoSuchReport message={notice} typed={typed} />;
  return (
    <Page
      aside={
        <ConfirmAddress
          expectsRecording={notice.expectsRecording}
          isConfirmed={notice.addressConfirmed}
          key={notice.receiptNumber}
          receiptNumber={notice.receiptNumber}
          secret={secret}
        />
      }
      asideLabel="Your address"
    >
      <HeadSentence place={`Report ${notice.receiptNumber}`}>
        <NoticeSentence notice={notice} />
      </HeadSentence>
      {notice.reasons && (
        <Section className="mt-8" head={notice.state === "decided" ? "The reasons" : "What we need"}>
          <Sentence className="whitespace-pre-line">{notice.reasons}</Sentence>
        </Section>
      )}
      {notice.state === "incomplete" && (
        <div className="mt-4">
          <ButtonLink href="/report">Write a report that names this number</ButtonLink>
        </div>
      )}
      <Steps notice={notice} />
      <Sentence className="mt-8" size="small" soft>
        Keep the number: whoever has it sees this page. It shows no name and no address. Licences already
        issued are handled separately from new sales. Another work is{" "}
        <TextLink href="/report">another report</TextLink>.
      </Sentence>
      <Caution className="mt-4" />
    </Page>
  );
}
