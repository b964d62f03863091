"use client";

import { useState, useTransition } from "react";
import { useForm } from "react-hook-form";
import { Button } from "@/components/ui/button";
import { Choices, Fieldset } from "@/components/ui/choices";
import { CheckField, SelectField, TextAreaField } from "@/components/ui/field";
import { AsideTitle } from "@/components/ui/page";
import { notify } from "@/components/ui/toaster";
import type { CaseGroupView } from "@/lib/review";
import {
  EXPLAINED_BY,
  FINDING_OUTCOMES,
  type FindingOutcome,
  INNOCENT_EXPLANATIONS,
  RIGHTS_CODES,
  type RightsCode,
} from "@/lib/review/states";
import type { CaseActions } from "./case-aside";

export interface FindingInput {
  caseId: string;
  groupId: string;
  outcome: FindingOutcome;
  explainedBy: (typeof EXPLAINED_BY)[number] | null;
  codes: RightsCode[];
  reasons: string;
  notDecided: string;
  knowing: boolean | null;
  knowingBecause: string;
  alternatives: string[];
}

interface Fields {
  outcome: FindingOutcome | "";
  explainedBy: (typeof EXPLAINED_BY)[number];
  code: RightsCode;
  reasons: string;
  notDecided: string;
  knowing: "no" | "yes" | "";
  knowingBecause: string;
  alternatives: string[];
}

const SENTENCES: Record<FindingOutcome, string> = {
  "nothing in common": "Nothing in common",
  explained: "Explained",
  "send back": "Send back to correct",
  "hold for rights": "Hold for rights",
  "cannot be listed": "Cannot be listed",
  "refer out": "Refer out",
};

const needsCode = (outcome: string) => ["cannot be listed", "hold for rights", "send back"].includes(outcome);

/** Outcomes with what will happen shown before they are chosen; a reason a stranger understands; a code; a second person. */
export function FindingForm({
  caseId,
  group,
  groupsOpen,
  find,
}: {
  caseId: string;
  group: CaseGroupView;
  groupsOpen: number;
  find: CaseActions["find"];
}) {
  const { register, handleSubmit, watch, setError, formState } = useForm<Fields>({
    defaultValues: {
      outcome: "",
      explainedBy: "own version",
      code: "R01",
      reasons: "",
      notDecided: "",
      knowing: "",
      knowingBecause: "",
      alternatives: [],
    },
  });
  const [problem, setProblem] = useState<string | null>(null);
  const [pending, start] = useTransition();
  const outcome = watch("outcome");
  const knowing = watch("knowing");
  const submit = handleSubmit((fields) => {
    if (fields.outcome === "") return setError("outcome", { message: "Choose what you find." });
    const input: FindingInput = {
      caseId,
      groupId: group.id,
      outcome: fields.outcome,
      explainedBy: fields.outcome === "explained" ? fields.explainedBy : null,
      codes: needsCode(fields.outcome) ? [fields.code] : [],
      reasons: fields.reasons,
      notDecided: fields.notDecided,
      knowing: fields.outcome === "cannot be listed" && fields.knowing ? fields.knowing === "yes" : null,
      knowingBecause: fields.knowingBecause,
      alternatives: fields.alternatives,
    };
    start(async () => {
      const result = await find(input);
      if (result.ok)
        return notify({
          title: fields.outcome === "cannot be listed" ? "A second person has been asked." : "Kept.",
        });
      setProblem(Object.keys(result.fields).length === 0 ? result.message : null);
      for (const [name, message] of Object.entries(result.fields))
        setError((name === "codes" ? "code" : name) as keyof Fields, { message });
    });
  });
  const errors = formState.errors;
  return (
    <form className="grid gap-4" onSubmit={submit}>
      <AsideTitle
        below={
          groupsOpen > 1
            ? `About ${group.reference.title ?? group.reference.words}; ${groupsOpen} groups are to be answered.`
            : undefined
        }
      >
        What do you find?
      </AsideTitle>
      <Choices
        error={errors.outcome?.message}
        legend={<span className="sr-only">What do you find?</span>}
        options={(Object.keys(FINDING_OUTCOMES) as FindingOutcome[]).map((value) => ({
          value,
          sentence: SENTENCES[value],
          below: FINDING_OUTCOMES[value].consequence,
          inside: outcome === "explained" && value === "explained" && (
            <SelectField
              label="by"
              options={EXPLAINED_BY.map((choice) => ({ value: choice, label: choice }))}
              {...register("explainedBy")}
            />
          ),
        }))}
        {...register("outcome")}
      />
      {needsCode(outcome) && (
        <SelectField
          error={errors.code?.message}
          label="Code"
          options={Object.entries(RIGHTS_CODES).map(([value, words]) => ({
            value,
            label: `${value}: ${words}`,
          }))}
          {...register("code")}
        />
      )}
      {outcome === "cannot be listed" && (
        <>
          <Choices
            error={errors.knowing?.message}
            legend="Was it knowing or reckless? This is a question of its own."
            options={[
              { value: "no", sentence: "No, or not shown", below: "Nothing goes on the deliverer's record." },
              {
                value: "yes",
                sentence: "Yes",
                below: "It counts on the deliverer's record for 24 months from confirmation.",
              },
            ]}
            {...register("knowing")}
          />
          {knowing === "yes" && (
            <TextAreaField
              error={errors.knowingBecause?.message}
              label="Knowing or reckless, because"
              rows={2}
              {...register("knowingBecause")}
            />
          )}
        </>
      )}
      <Fieldset legend="Innocent explanations you considered">
        {INNOCENT_EXPLANATIONS.map((explanation) => (
          <CheckField key={explanation} value={explanation} {...register("alternatives")}>
            {explanation}
          </CheckField>
        ))}
      </Fieldset>
      <TextAreaField
        error={errors.reasons?.message}
        hint="At least two sentences that a stranger understands."
        label="Your reasons, as the deliverer will read them"
        rows={5}
        {...register("reasons")}
      />
      <TextAreaField label="What was not decided" optional rows={2} {...register("notDecided")} />
      {problem && (
        <p className="text-magenta" role="alert">
          {problem}
        </p>
      )}
      <Button busy={pending && "Keeping it"} kind="main" type="submit" wide>
        {outcome === "cannot be listed" ? "Ask a second person to confirm" : "Record this finding"}
      </Button>
    </form>
  );
}
