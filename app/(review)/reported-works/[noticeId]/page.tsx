import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { ActButton } from "@/components/account/act-button";
import { JudgeForm } from "@/components/reports/judge-form";
import { LevelForm } from "@/components/reports/level-form";
import { NoticeClaim, NoticeContact } from "@/components/reports/notice-claim";
import { ReportedRecording } from "@/components/reports/reported-recording";
import { TextLink } from "@/components/ui/button";
import { Caution } from "@/components/ui/caution";
import { fmt } from "@/components/ui/format";
import { AsideTitle, Page } from "@/components/ui/page";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { Title } from "@/components/ui/title";
import { NotFound } from "@/lib/kernel/errors";
import { getReport, type ReportView } from "@/lib/reports";
import { viewer } from "@/lib/web";
import { judge, setLevel, take } from "../actions";

export const metadata: Metadata = { title: "A report" };

function Aside({ report }: { report: ReportView }) {
  if (report.state === "received")
    return (
      <>
        <AsideTitle below="Whoever sent it sees by its number that a person is reading it.">
          Nobody has read it yet
        </AsideTitle>
        <ActButton
          act={take}
          busyWords="Taking it"
          input={{ noticeId: report.id }}
          kind="main"
          words="Begin to read it"
        />
      </>
    );
  if (report.state !== "decided")
    return <JudgeForm judge={judge} noticeId={report.id} target={report.target?.catalogueNumber ?? null} />;
  return (
    <>
      <AsideTitle below={report.decidedAt ? fmt.dateTime(report.decidedAt) : undefined}>
        {report.work
          ? `Accepted as ${report.work.code}, ${report.work.level}`
          : "Rejected: nothing was removed"}
      </AsideTitle>
      <Sentence className="mb-6 whitespace-pre-line">{report.reasons}</Sentence>
      {report.work && (
        <LevelForm level={report.work.level} reportedWorkId={report.work.id} setLevel={setLevel} />
      )}
    </>
  );
}

function Earlier({ report }: { report: ReportView }) {
  if (report.earlier.length === 0) return <Sentence soft>No other report came from this address.</Sentence>;
  return (
    <ul>
      {report.earlier.map((other) => (
        <li className="border-b border-line py-2" key={other.id}>
          <TextLink href={`/reported-works/${other.id}`}>{other.receiptNumber}</TextLink>,{" "}
          {other.outcome ?? other.state}
        </li>
      ))}
    </ul>
  );
}

export default async function NoticePage({ params }: { params: Promise<{ noticeId: string }> }) {
  const { noticeId } = await params;
  const { actor } = await viewer();
  if (actor.kind !== "moderator" || actor.libraryId !== null) notFound();
  const report = await getReport(actor, { noticeId }).catch((error: unknown) => {
    if (error instanceof NotFound) notFound();
    throw error;
  });
  const { claim } = report;
  return (
    <Page aside={<Aside report={report} />} asideLabel="What do you decide?">
      <HeadSentence place={`Report ${report.receiptNumber}, received ${fmt.dateTime(report.receivedAt)}`}>
        Somebody says that <Title>{claim.workTitle}</Title> is used in{" "}
        {report.target ? <Title>{report.target.title}</Title> : "a cue that could not be found"}.
      </HeadSentence>
      <Section className="mt-8" head="What is claimed">
        <NoticeClaim report={report} />
      </Section>
      <Section className="mt-8" head="The recording">
        {report.hasRecording ? (
          <>
            <Sentence className="mb-2">Sent in confidence: you hear it, and each hearing is logged.</Sentence>
            <ReportedRecording noticeId={report.id} title={`report ${report.receiptNumber}`} />
          </>
        ) : (
          <Sentence soft>
            {claim.hasRecording
              ? "One was announced and has not arrived; its sender confirms the address first."
              : "None was announced. Without a recording an entry is a note for people; it holds no delivery."}
          </Sentence>
        )}
      </Section>
      <Section className="mt-8" head="Who sent it" note="for the marketplace’s moderators alone">
        <NoticeContact report={report} />
      </Section>
      <Section className="mt-8" head="Other reports from this address">
        <Earlier report={report} />
      </Section>
      <Caution className="mt-8" />
    </Page>
  );
}
