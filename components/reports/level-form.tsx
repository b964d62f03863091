"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import { Refusal } from "@/components/account/refusal";
import { type Act, useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { Choices } from "@/components/ui/choices";
import { TextAreaField } from "@/components/ui/field";
import { notify } from "@/components/ui/toaster";
import { SetEvidenceLevel } from "@/lib/reports/schemas";
import { EVIDENCE_LEVELS } from "@/lib/reports/states";

export type LevelAct = Act<SetEvidenceLevel, unknown>;

interface LevelFormProps {
  reportedWorkId: string;
  level: string;
  setLevel: LevelAct;
}

export const LEVEL_OPTIONS = Object.entries(EVIDENCE_LEVELS).map(([value, consequence]) => ({
  value,
  sentence: value.charAt(0).toUpperCase() + value.slice(1),
  below: consequence,
}));

/** How sure an entry is, each level with what it does to deliveries. */
export function LevelForm({ reportedWorkId, level, setLevel }: LevelFormProps) {
  const act = useAct(setLevel);
  const form = useForm({
    resolver: zodResolver(SetEvidenceLevel),
    defaultValues: { reportedWorkId, level: level as SetEvidenceLevel["level"], words: "" },
  });
  const { errors } = form.formState;
  const submit = form.handleSubmit((given) =>
    act.run(given, () => {
      form.reset({ ...given, words: "" });
      notify({ title: `It is ${given.level} now.` });
    }),
  );
  return (
    <form className="grid gap-3" noValidate onSubmit={submit}>
      <Choices
        error={errors.level?.message ?? act.fieldError("level")}
        legend="How sure is it?"
        options={LEVEL_OPTIONS}
        {...form.register("level")}
      />
      <TextAreaField
        error={errors.words?.message ?? act.fieldError("words")}
        label="What the level rests on"
        rows={3}
        {...form.register("words")}
      />
      <Refusal failure={act.failure} shownAtFields={["level", "words"]} />
      <Button busy={act.isRunning && "Keeping it"} className="justify-self-start" type="submit">
        Keep this level
      </Button>
    </form>
  );
}
