"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import type { ReactNode } from "react";
import { useForm } from "react-hook-form";
import { sendReport } from "@/app/(shop)/report/actions";
import { Refusal } from "@/components/account/refusal";
import { useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { Page } from "@/components/ui/page";
import { Sentence } from "@/components/ui/sentence";
import { SubmitNotice, type SubmitNoticeInput } from "@/lib/reports/schemas";
import { EMPTY_NOTICE, messageOf, type NoticeField } from "./notice-form";
import { PlaceStep } from "./place-step";
import { SignStep } from "./sign-step";
import { useReportDraft } from "./use-report-draft";
import { WorkStep } from "./work-step";

const FIELDS = Object.keys(SubmitNotice.shape) as NoticeField[];

interface ReportFormProps {
  countries: readonly { value: string; label: string }[];
  /** The cue the person came from. */
  cue: string | null;
  head: ReactNode;
  after: ReactNode;
}

/** A report in four steps on one page; what is written stays in this browser until it is sent. */
export function ReportForm({ countries, cue, head, after }: ReportFormProps) {
  const start = cue ? { where: cue } : {};
  const send = useAct(sendReport);
  const form = useForm<SubmitNoticeInput, unknown, SubmitNotice>({
    resolver: zodResolver(SubmitNotice),
    defaultValues: { ...EMPTY_NOTICE, ...start },
  });
  const draft = useReportDraft(form, start);
  const errorAt = (name: NoticeField) => messageOf(form.formState.errors, name) ?? send.fieldError(name);
  const missing = FIELDS.filter((name) => form.formState.errors[name]).length;
  const submit = form.handleSubmit((notice) =>
    send.run(notice, ({ receiptNumber }) => {
      draft.forget();
      window.location.assign(`/report/${receiptNumber}`);
    }),
  );
  const throwAway = () => {
    draft.forget();
    form.reset(EMPTY_NOTICE);
    window.location.assign("/report");
  };
  return (
    <form className="contents" noValidate onSubmit={submit}>
      <Page
        aside={
          <>
            <SignStep countries={countries} errorAt={errorAt} form={form} />
            <div className="mt-5 grid gap-3">
              {missing > 0 && (
                <p aria-live="polite" className="text-magenta">
                  {missing === 1 ? "One place needs" : `${missing} places need`} a word from you; each says
                  what. Nothing is lost.
                </p>
              )}
              <Refusal className="" failure={send.failure} shownAtFields={FIELDS} />
              <Button busy={send.isRunning && "Sending"} kind="main" type="submit" wide>
                Send the report
              </Button>
              <Sentence size="small">
                You get a number at once and a copy by mail. A person reads it within one working day; nothing
                is hidden or turned down by software.
              </Sentence>
            </div>
            {after}
          </>
        }
        asideLabel="You, and your signature"
      >
        {head}
        <WorkStep errorAt={errorAt} form={form} />
        <PlaceStep errorAt={errorAt} form={form} />
        {draft.isKept && (
          <p className="mt-6 text-small text-ink-soft">
            Kept in this browser, and nowhere else until you send it.{" "}
            <Button className="text-small" kind="quiet" onClick={throwAway}>
              Throw it away
            </Button>
          </p>
        )}
      </Page>
    </form>
  );
}
