import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { TextLink } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Sentence } from "@/components/ui/sentence";
import { Table } from "@/components/ui/table";
import { type AuditLine, auditList } from "@/lib/accounts";
import { isSignedIn } from "@/lib/kernel/actor";
import { viewer } from "@/lib/web";
import { type SearchParams, wordOf } from "../where-to";

export const metadata: Metadata = { title: "Log" };

const whoOf = (line: AuditLine) =>
  line.role === "system" || line.who.endsWith(line.role) ? line.who : `${line.who}, ${line.role}`;

export default async function LogPage({ searchParams }: { searchParams: SearchParams }) {
  const { actor } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in?to=/log");
  if (actor.kind !== "owner" && actor.kind !== "auditor" && actor.kind !== "admin") notFound();
  const search = await searchParams;
  const subject = wordOf(search.about)?.slice(0, 80) ?? null;
  const after = wordOf(search.after)?.slice(0, 40) ?? null;
  const { lines, next } = await auditList(actor, { subject, after });
  const more = new URLSearchParams({
    ...(subject ? { about: subject } : {}),
    ...(next ? { after: next } : {}),
  });
  return (
    <Page>
      <HeadSentence place={subject ? `About ${lines[0]?.subjectName ?? subject}` : "Log"}>
        {actor.kind === "admin"
          ? "Everything that was changed, by whom, newest first."
          : "Everything that was changed in this library, by whom, newest first."}
      </HeadSentence>
      <Sentence className="mt-3 mb-6" soft>
        Rows are written with the change itself and can be neither altered nor removed. Times are the
        machine’s, in UTC.
        {subject && (
          <>
            {" "}
            <TextLink href="/log">Show everything</TextLink>
          </>
        )}
      </Sentence>
      {lines.length > 0 ? (
        <Table
          caption="What was done"
          captionHidden
          columns={[
            { key: "at", head: "When", cell: (line) => fmt.dateTime(line.at) },
            { key: "who", head: "Who", cell: whoOf },
            { key: "did", head: "What", cell: (line) => line.did },
            {
              key: "subject",
              head: "About",
              cell: (line) => (
                <TextLink href={`/log?about=${encodeURIComponent(line.subject)}`}>
                  {line.subjectName ?? line.subject}
                </TextLink>
              ),
            },
          ]}
          rowKey={(line) => line.id}
          rows={lines}
          sentence={(line) => (
            <>
              {line.did}, by {whoOf(line)}
              <span className="block text-small text-ink-soft">
                {fmt.dateTime(line.at)}, about{" "}
                <TextLink className="wrap-anywhere" href={`/log?about=${encodeURIComponent(line.subject)}`}>
                  {line.subjectName ?? line.subject}
                </TextLink>
              </span>
            </>
          )}
        />
      ) : (
        <Empty>{after ? "There is nothing older." : "Changes stand here as soon as there are any."}</Empty>
      )}
      {next && (
        <p className="mt-5">
          <TextLink href={`/log?${more}`}>Older rows</TextLink>
        </p>
      )}
    </Page>
  );
}
