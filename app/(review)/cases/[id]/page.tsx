import type { Metadata } from "next";
import { notFound } from "next/navigation";
import { CaseAside } from "@/components/review/case-aside";
import { CaseEvidence } from "@/components/review/case-evidence";
import { caseSentence } from "@/components/review/case-sentence";
import { Explanations } from "@/components/review/explanations";
import { Papers } from "@/components/review/papers";
import { Caution } from "@/components/ui/caution";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence } from "@/components/ui/sentence";
import { NotFound } from "@/lib/kernel/errors";
import { getCase } from "@/lib/review";
import { viewer } from "@/lib/web";
import { ask, confirm, declare, find, papers, passOn, take } from "../actions";

export const metadata: Metadata = { title: "A case" };

export default async function CasePage({ params }: { params: Promise<{ id: string }> }) {
  const { id } = await params;
  const { actor } = await viewer();
  if (actor.kind !== "moderator") notFound();
  const view = await getCase(actor, { caseId: id }).catch((error: unknown) => {
    if (error instanceof NotFound) notFound();
    throw error;
  });
  const due =
    view.state === "open" ? `A first look is due ${fmt.dateTime(view.dueAt)}.` : `It is ${view.state}.`;
  const held = view.holder
    ? view.holder.isYou
      ? "You hold this case."
      : `${view.holder.name} holds it.`
    : "Nobody holds it yet.";
  return (
    <Page
      aside={<CaseAside actions={{ ask, confirm, declare, find, passOn, take }} view={view} />}
      asideLabel="What do you find?"
    >
      <HeadSentence place={`Case ${view.number}. ${due} ${held}`} size="big">
        {caseSentence(view)}
      </HeadSentence>
      <CaseEvidence view={view} />
      <div className="mt-8 grid gap-8 @wide:grid-cols-2">
        <Explanations facts={view.explanations} papersOpen={view.papers !== null} />
        <Papers openPapers={papers} view={view} />
      </div>
      <Caution
        className="mt-8"
        notCompared="Melody, harmony and lyrics were not compared, nor anything outside this index."
      />
    </Page>
  );
}
