"use client";

import { useTransition } from "react";
import { Button } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Section } from "@/components/ui/sentence";
import { Title } from "@/components/ui/title";
import { notify } from "@/components/ui/toaster";
import type { CaseView } from "@/lib/review";
import type { ActionResult } from "@/lib/web";

interface PapersProps {
  view: CaseView;
  openPapers: (input: { caseId: string }) => Promise<ActionResult<null>>;
}

const percent = (bps: number) => (bps / 100).toFixed(2);

/** People are roles until the papers are opened; opening them is logged. */
export function Papers({ view, openPapers }: PapersProps) {
  const [pending, start] = useTransition();
  if (!view.papers) {
    return (
      <Section head="The papers" note="Opening them is logged">
        <p className="max-w-measure">
          Names, dates and declarations of both sides stay closed until you have listened. The sound comes
          first.
        </p>
        <Button
          busy={pending && "Opening"}
          className="mt-3"
          onClick={() =>
            start(async () => {
              const result = await openPapers({ caseId: view.id });
              if (!result.ok) notify({ title: result.message });
            })
          }
        >
          Open the papers
        </Button>
      </Section>
    );
  }
  const { delivery, references, earlierCases, upheldFindings } = view.papers;
  return (
    <Section head="The papers">
      <p>
        <b className="font-strong">A:</b> delivered by {delivery.delivererName} to {delivery.libraryName}
        {delivery.deliveredAt && ` on ${fmt.date(delivery.deliveredAt)}`}. Writers:{" "}
        {fmt.list(delivery.writers.map((writer) => `${writer.name} ${percent(writer.shareBps)}`))}.
      </p>
      {delivery.declarations.map((declaration) => (
        <p className="mt-1 text-small text-ink-soft" key={declaration.version}>
          Declaration {declaration.version}, signed by {declaration.signedName} on{" "}
          {fmt.dateTime(declaration.signedAt)}; SHA-256 {declaration.sha256.slice(0, 16)}…
        </p>
      ))}
      {references.map((reference) => (
        <p className="mt-3" key={reference.title}>
          <b className="font-strong">B:</b> <Title>{reference.title}</Title>, {reference.state} at{" "}
          {reference.libraryName}
          {reference.listedAt && ` since ${fmt.date(reference.listedAt)}`}, {reference.deal}. Writers:{" "}
          {fmt.list(reference.writers.map((writer) => `${writer.name} ${percent(writer.shareBps)}`))}.
        </p>
      ))}
      <p className="mt-3 text-small text-ink-soft">
        {earlierCases.length === 0
          ? "No earlier case touches this delivery."
          : fmt.list(earlierCases.map((earlier) => `case ${earlier.number}: ${earlier.outcome}`))}{" "}
        {upheldFindings.length === 0
          ? "Nothing is on the deliverer's record."
          : `${fmt.countWord(upheldFindings.length, "upheld finding")} on the deliverer's record.`}{" "}
        Dates of listing are weak evidence.
      </p>
    </Section>
  );
}
