"use client";

import { useTransition } from "react";
import { Button } from "@/components/ui/button";
import { Disclosure } from "@/components/ui/disclosure";
import { fmt } from "@/components/ui/format";
import { AsideTitle } from "@/components/ui/page";
import { Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { notify } from "@/components/ui/toaster";
import type { CaseView } from "@/lib/review";
import type { ActionResult } from "@/lib/web";
import { ConflictForm, HandOverForm, QuestionForm } from "./case-forms";
import { FindingForm, type FindingInput } from "./finding-form";
import { SecondPerson } from "./second-person";

type Act<I> = (input: I) => Promise<ActionResult<unknown>>;

export interface CaseActions {
  take: Act<{ caseId: string }>;
  passOn: Act<{ caseId: string; toPersonId: string | null; words: string }>;
  declare: Act<{ caseId: string; words: string }>;
  ask: Act<{ caseId: string; words: string }>;
  find: Act<FindingInput>;
  confirm: Act<{ findingId: string; confirm: boolean; words: string }>;
}

/** The working table of a case: who holds it, what was asked, what is found. */
export function CaseAside({ view, actions }: { view: CaseView; actions: CaseActions }) {
  const waiting = view.findings.find((finding) => finding.needsSecond && !finding.second);
  const open = view.groups.filter((group) => !view.findings.some((finding) => finding.groupId === group.id));
  const isYours = view.holder?.isYou ?? false;
  return (
    <div className="grid gap-6">
      {view.findings.map((finding) => (
        <GivenFinding finding={finding} key={finding.id} />
      ))}
      {view.youDeclaredConflict ? (
        <Sentence>You declared a conflict of interest here. Somebody else decides this case.</Sentence>
      ) : waiting && view.state === "waiting on second person" ? (
        waiting.isYours ? (
          <Sentence>Your refusal waits for a second person. Nothing has been sent yet.</Sentence>
        ) : (
          <SecondPerson confirm={actions.confirm} finding={waiting} />
        )
      ) : view.state === "open" && isYours && open[0] ? (
        <FindingForm caseId={view.id} find={actions.find} group={open[0]} groupsOpen={open.length} />
      ) : view.state === "open" && !view.holder ? (
        <Take caseId={view.id} take={actions.take} />
      ) : (
        <Sentence soft>
          {view.state === "closed"
            ? `Closed ${view.closedAt ? fmt.dateTime(view.closedAt) : ""}. The letters have gone out.`
            : view.state === "waiting on composer"
              ? "The deliverer has been asked; the case comes back with the answer."
              : view.holder
                ? `${view.holder.name} holds this case.`
                : ""}
        </Sentence>
      )}
      <Conversation view={view} />
      {view.state === "open" && isYours && (
        <div className="grid gap-3 border-t border-buff-2 pt-4">
          <Disclosure words="Ask the composer">
            <QuestionForm ask={actions.ask} caseId={view.id} />
          </Disclosure>
          <Disclosure words="Hand over">
            <HandOverForm caseId={view.id} colleagues={view.colleagues} passOn={actions.passOn} />
          </Disclosure>
        </div>
      )}
      {view.state !== "closed" && !view.youDeclaredConflict && (
        <Disclosure words="I know one of the people">
          <ConflictForm caseId={view.id} declare={actions.declare} />
        </Disclosure>
      )}
    </div>
  );
}

function Take({ caseId, take }: { caseId: string; take: CaseActions["take"] }) {
  const [pending, start] = useTransition();
  return (
    <div>
      <AsideTitle below="A case has one holder at a time. Names stay closed until you open the papers; listen first.">
        What do you find?
      </AsideTitle>
      <Button
        busy={pending && "Taking"}
        kind="main"
        onClick={() =>
          start(async () => {
            const result = await take({ caseId });
            if (!result.ok) notify({ title: result.message });
          })
        }
        wide
      >
        Take this case
      </Button>
    </div>
  );
}

function GivenFinding({ finding }: { finding: CaseView["findings"][number] }) {
  const state = finding.needsSecond
    ? finding.second
      ? finding.second.confirmed
        ? `confirmed by ${finding.second.name}`
        : "not confirmed"
      : "waits for a second person"
    : "in effect";
  return (
    <div>
      <StatusSentence
        below={`${finding.deciderName}, ${fmt.dateTime(finding.decidedAt)}; ${state}`}
        mark={finding.needsSecond && !finding.second ? "half" : "done"}
      >
        Found: {finding.outcome}
        {finding.explainedBy && ` by ${finding.explainedBy}`}
        {finding.codes.length > 0 && ` · ${finding.codes.join(", ")}`}
      </StatusSentence>
      <p className="mt-1 whitespace-pre-line">{finding.reasons}</p>
      {finding.notDecided && (
        <p className="mt-1 text-small text-ink-soft">Not decided: {finding.notDecided}</p>
      )}
      {finding.knowing && (
        <p className="mt-1 text-small">Knowing or reckless, because {finding.knowingBecause}</p>
      )}
    </div>
  );
}

const MESSAGE_HEADS: Record<string, string> = {
  question: "Asked",
  answer: "Answered",
  note: "Note to colleagues",
};

function Conversation({ view }: { view: CaseView }) {
  if (view.messages.length === 0) return null;
  return (
    <ol className="grid gap-3 border-t border-buff-2 pt-4">
      {view.messages.map((message) => (
        <li key={message.id}>
          <p className="text-small text-ink-soft">
            {MESSAGE_HEADS[message.kind] ?? message.kind}, {fmt.dateTime(message.at)}
            {message.answerUntil && `; answer until ${fmt.dateTime(message.answerUntil)}`}
            {message.hasFile && "; with a file"}
          </p>
          <p className="whitespace-pre-line">{message.words}</p>
        </li>
      ))}
    </ol>
  );
}
