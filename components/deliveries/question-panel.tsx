"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { useForm } from "react-hook-form";
import { z } from "zod";
import { replyToQuestion } from "@/app/(composer)/actions";
import { Refusal } from "@/components/account/refusal";
import { useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { TextAreaField } from "@/components/ui/field";
import { fmt } from "@/components/ui/format";
import { AsideTitle } from "@/components/ui/page";
import { CasePlaces } from "./case-places";
import { type Paper, PaperField } from "./paper-field";
import type { CaseOnWire, DeliveryOnWire } from "./wire";

const Reply = z.object({
  words: z.string().trim().min(5, "A sentence that answers the question.").max(4000),
});

interface QuestionPanelProps {
  delivery: DeliveryOnWire;
  caseOf: CaseOnWire;
  zone: string;
  onDone: () => void;
}

/** A moderator's question: its words, the places it is about, until when, and the answer with a paper. */
export function QuestionPanel({ delivery, caseOf, zone, onDone }: QuestionPanelProps) {
  const question = caseOf.messages.findLast((message) => message.kind === "question");
  const reply = useAct(replyToQuestion);
  const [paper, setPaper] = useState<Paper | null>(null);
  const form = useForm({ resolver: zodResolver(Reply), defaultValues: { words: "" } });
  if (!question) return null;
  const send = form.handleSubmit(({ words }) =>
    reply.run({ deliveryId: delivery.id, words, fileKey: paper?.key ?? null }, () => {
      form.reset();
      onDone();
    }),
  );
  return (
    <section className="mb-8 scroll-mt-4" id="question">
      <AsideTitle
        below={
          question.answerUntil
            ? `Please answer by ${fmt.dateTime(question.answerUntil, { zone, weekday: true })}. Nothing is decided yet.`
            : "Nothing is decided yet."
        }
      >
        A question to you
      </AsideTitle>
      <blockquote className="border-y-[1.5px] border-buff-2 py-3 text-lead whitespace-pre-line">
        {question.words}
      </blockquote>
      <div className="mt-3">
        <CasePlaces caseOf={caseOf} delivery={delivery} />
      </div>
      <form className="mt-4 space-y-4" noValidate onSubmit={send}>
        <TextAreaField
          error={form.formState.errors.words?.message ?? reply.fieldError("words")}
          label="Your answer"
          rows={5}
          {...form.register("words")}
        />
        <PaperField
          deliveryId={delivery.id}
          onPaper={setPaper}
          paper={paper}
          words="Add a file: a licence, a receipt, a session"
        />
        <Refusal failure={reply.failure} shownAtFields={["words"]} />
        <Button busy={reply.isRunning && "Answering"} kind="main" type="submit" wide>
          Send the answer
        </Button>
        <p className="text-small text-ink-soft">
          If the file itself should be another, replace it in its row; it is measured and screened again.
        </p>
      </form>
    </section>
  );
}
