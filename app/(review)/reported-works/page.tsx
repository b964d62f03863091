import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { BlocklistRow } from "@/components/reports/blocklist-row";
import { NoticeRow } from "@/components/reports/notice-row";
import { Caution } from "@/components/ui/caution";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { businessNow } from "@/lib/kernel/clock";
import { listReports, type ReportList } from "@/lib/reports";
import { viewer } from "@/lib/web";
import { setLevel } from "./actions";

export const metadata: Metadata = { title: "Reported works" };

function headFor(notices: ReportList["notices"], now: Date): string {
  const waiting = notices.filter((notice) => notice.state === "received" || notice.state === "under review");
  const first = waiting[0];
  if (!first) return "No report waits for you.";
  const count = fmt.countWord(waiting.length, "report");
  const due = `${first.dueAt < now ? "was" : "is"} due ${fmt.dateTime(first.dueAt, "Europe/London")}`;
  return `${count.charAt(0).toUpperCase()}${count.slice(1)} ${waiting.length === 1 ? "waits" : "wait"} for a decision; the first reading of the oldest ${due}.`;
}

export default async function ReportedWorksPage() {
  const { actor } = await viewer();
  if (actor.kind !== "moderator" || actor.libraryId !== null) notFound();
  const { notices, works } = await listReports(actor, {});
  const open = notices.filter((notice) => notice.state !== "decided");
  const decided = notices.filter((notice) => notice.state === "decided");
  const now = businessNow();
  return (
    <Page>
      <HeadSentence place="Reported works">{headFor(notices, now)}</HeadSentence>
      <Section className="mt-8" head="By deadline" note="Each report is read; none is judged by software.">
        {open.length === 0 ? (
          <Empty>A report that somebody sends by the public form stands here until it is decided.</Empty>
        ) : (
          <ol>
            {open.map((notice) => (
              <NoticeRow key={notice.id} notice={notice} now={now} />
            ))}
          </ol>
        )}
      </Section>
      <Section
        className="mt-10"
        head="What every delivery is compared with"
        note="Only supported and adjudicated recordings hold a delivery."
      >
        {works.length === 0 ? (
          <Empty>A work whose report is accepted stands here with its evidence level.</Empty>
        ) : (
          <ol>
            {works.map((work) => (
              <BlocklistRow key={work.id} setLevel={setLevel} work={work} />
            ))}
          </ol>
        )}
      </Section>
      {decided.length > 0 && (
        <Section className="mt-10" head="Decided">
          <ol>
            {decided.map((notice) => (
              <NoticeRow key={notice.id} notice={notice} now={now} />
            ))}
          </ol>
        </Section>
      )}
      <Caution className="mt-10" />
    </Page>
  );
}
