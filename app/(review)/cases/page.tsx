import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { CaseRow } from "@/components/review/case-row";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { businessNow } from "@/lib/kernel/clock";
import { listCases } from "@/lib/review";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Review" };

export default async function CasesPage() {
  const { actor } = await viewer();
  if (actor.kind !== "moderator") notFound();
  const [open, closed] = [await listCases(actor, {}), await listCases(actor, { closed: true })];
  const waiting = open.filter((row) => row.state === "open");
  const first = waiting[0];
  return (
    <Page>
      <HeadSentence place="Review">
        {waiting.length === 0
          ? "No case waits for you."
          : fmt.opening(
              `${fmt.countWord(waiting.length, "case")} ${waiting.length === 1 ? "waits" : "wait"} for an answer`,
            )}
        {first && `; the first look at the oldest is due ${fmt.dateTime(first.dueAt)}.`}
      </HeadSentence>
      <Section className="mt-6" head="By deadline" note="A match is a question, never a verdict.">
        {open.length === 0 ? (
          <Empty>
            When a delivery shares sound with something held, and nothing known explains it, it stands here
            for a person to hear.
          </Empty>
        ) : (
          <ol>
            {open.map((row) => (
              <CaseRow key={row.id} now={businessNow()} row={row} />
            ))}
          </ol>
        )}
      </Section>
      {closed.length > 0 && (
        <Section className="mt-8" head="Answered">
          <ol>
            {closed.map((row) => (
              <CaseRow key={row.id} now={businessNow()} row={row} />
            ))}
          </ol>
        </Section>
      )}
    </Page>
  );
}
