"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { type Resolver, useForm } from "react-hook-form";
import { Refusal } from "@/components/account/refusal";
import { type Act, useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { Choices } from "@/components/ui/choices";
import { CheckField, TextAreaField } from "@/components/ui/field";
import { notify } from "@/components/ui/toaster";
import { JudgeNotice } from "@/lib/reports/schemas";
import type { EvidenceLevel } from "@/lib/reports/states";
import { LEVEL_OPTIONS } from "./level-form";

interface Fields {
  noticeId: string;
  decision: JudgeNotice["decision"];
  level: EvidenceLevel;
  holdTarget: boolean;
  reasons: string;
}

interface JudgeFormProps {
  noticeId: string;
  /** The cue it is about, where it was found. */
  target: string | null;
  judge: Act<JudgeNotice, unknown>;
}

const DECISIONS = [
  {
    value: "ask for more",
    sentence: "Ask for more",
    below:
      "The reporter hears by mail what is missing. Nothing is hidden and nothing is turned down; the report stays open.",
  },
  {
    value: "reject",
    sentence: "Reject",
    below: "Nothing is removed. The reporter gets your reasons, and has six months to complain.",
  },
  {
    value: "accept",
    sentence: "Accept",
    below: "The work joins the list at the level you choose. The reporter gets your reasons.",
  },
];

const HINTS: Record<JudgeNotice["decision"], string> = {
  "ask for more": "What is missing, in a sentence or two.",
  reject: "At least two sentences that the reporter understands.",
  accept: "At least two sentences that both sides understand.",
};

/** Ask for more, reject, or accept with a level and a hold; each says what will happen before it is chosen. */
export function JudgeForm({ noticeId, target, judge }: JudgeFormProps) {
  const act = useAct(judge);
  const form = useForm<Fields>({
    // The verb's own schema is a union by decision; this form holds the fields of all three.
    resolver: zodResolver(JudgeNotice) as unknown as Resolver<Fields>,
    defaultValues: { noticeId, holdTarget: false, reasons: "" },
    shouldUnregister: false,
  });
  const { errors } = form.formState;
  const decision = form.watch("decision");
  const submit = form.handleSubmit((given) =>
    act.run(given as unknown as JudgeNotice, () => notify({ title: "Kept. The reporter hears by mail." })),
  );
  return (
    <form className="grid gap-4" noValidate onSubmit={submit}>
      <Choices
        error={errors.decision?.message ?? act.fieldError("decision")}
        legend="What do you decide?"
        options={DECISIONS}
        size="head"
        {...form.register("decision")}
      />
      {decision === "accept" && (
        <>
          <Choices
            error={errors.level?.message ?? act.fieldError("level")}
            legend="How sure is it?"
            options={LEVEL_OPTIONS}
            {...form.register("level")}
          />
          {target ? (
            <CheckField
              hint="New sales stop at once and money on it is held. Licences already issued stay and are handled separately."
              {...form.register("holdTarget")}
            >
              Stop new sales of {target} while the question is open.
            </CheckField>
          ) : (
            <p className="text-small text-ink-soft">
              The report names no cue that is held here, so there are no sales to stop.
            </p>
          )}
        </>
      )}
      {decision && (
        <TextAreaField
          error={errors.reasons?.message ?? act.fieldError("reasons")}
          hint={HINTS[decision]}
          label={
            decision === "ask for more" ? "What you need" : "Your reasons, as the reporter will read them"
          }
          rows={5}
          {...form.register("reasons")}
        />
      )}
      <Refusal failure={act.failure} shownAtFields={["decision", "level", "reasons"]} />
      <Button busy={act.isRunning && "Keeping it"} kind="main" type="submit" wide>
        {decision === "ask for more" ? "Ask the reporter" : "Decide"}
      </Button>
    </form>
  );
}
