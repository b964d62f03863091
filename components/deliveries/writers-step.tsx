"use client";

import { useFieldArray, useFormContext, useWatch } from "react-hook-form";
import { Button } from "@/components/ui/button";
import { SelectField, TextField } from "@/components/ui/field";
import { Section, Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { WRITER_ROLES } from "@/lib/catalogue/states";
import { checkIpiNameNumber } from "@/lib/kernel/identifiers";
import { type DraftInput, type DraftOutput, sumOf } from "./draft-form";
import { useTried } from "./tried";

type Side = "writers" | "publishers";

const ROLES: Record<Side, { value: string; label: string }[]> = {
  writers: Object.entries(WRITER_ROLES).map(([value, label]) => ({ value, label })),
  publishers: [
    { value: "E", label: "original publisher" },
    { value: "SE", label: "sub-publisher" },
    { value: "AM", label: "administrator" },
  ],
};

/** Who wrote it and who publishes it: two columns of shares, each of which makes 100.00. */
export function WritersStep() {
  return (
    <div className="space-y-8">
      <Shares
        add="Add a writer"
        intro="Each writer accepts these shares from their own account; until then nothing is listed. A writer whose name and IPI the library has confirmed is shown as confirmed."
        one="Writer"
        side="writers"
      />
      <Shares
        add="Add a publisher"
        intro="Only where the work is published. Their shares make 100.00 of their own."
        one="Publisher"
        side="publishers"
      />
    </div>
  );
}

function Shares({ side, one, add, intro }: { side: Side; one: string; add: string; intro: string }) {
  const { control } = useFormContext<DraftInput, unknown, DraftOutput>();
  const { fields, append, remove } = useFieldArray({ control, name: side });
  const rows = useWatch({ control, name: side }) ?? [];
  const sum = sumOf(rows);
  const isWriters = side === "writers";
  const rest = Math.max(0, 10_000 - sum.bps);
  const addRow = () => {
    const share = rest > 0 ? (rest / 100).toFixed(2) : "";
    if (isWriters) append({ name: "", email: "", ipi: "", role: "C", share } as never);
    else append({ name: "", ipi: "", role: "E", share } as never);
  };
  return (
    <Section
      head={`${one}s`}
      note={rows.length > 0 ? `shares make ${(sum.bps / 100).toFixed(2)}` : undefined}
    >
      <Sentence className="mb-3" size="small" soft>
        {intro}
      </Sentence>
      <ol>
        {fields.map((field, index) => (
          <li className="border-b border-line pt-3 pb-4" key={field.id}>
            <ShareRow
              index={index}
              one={one}
              onRemove={fields.length > 1 || !isWriters ? () => remove(index) : undefined}
              side={side}
            />
          </li>
        ))}
      </ol>
      <div aria-live="polite" className="mt-3">
        {rows.length > 0 &&
          (sum.isWhole ? (
            <StatusSentence mark="done">Together they make 100.00.</StatusSentence>
          ) : (
            <StatusSentence below="Correct a share to go on; everything else is kept. (M01)" mark="warn">
              Together they make {sum.words}.
            </StatusSentence>
          ))}
      </div>
      <div className="mt-3">
        <Button onClick={addRow} size="small">
          {add}
        </Button>
      </div>
    </Section>
  );
}

interface ShareRowProps {
  side: Side;
  one: string;
  index: number;
  onRemove: (() => void) | undefined;
}

function ShareRow({ side, one, index, onRemove }: ShareRowProps) {
  const form = useFormContext<DraftInput, unknown, DraftOutput>();
  const { register, formState, control, setValue } = form;
  const tried = useTried();
  type Fields<Value> = Partial<Record<"name" | "email" | "ipi" | "share", Value>> | undefined;
  const touched = formState.touchedFields[side]?.[index] as Fields<boolean>;
  const found = formState.errors[side]?.[index] as Fields<{ message?: string }>;
  const errorAt = (name: "name" | "email" | "ipi" | "share") =>
    tried || touched?.[name] ? found?.[name] : undefined;
  const ipi = useWatch({ control, name: `${side}.${index}.ipi` }) ?? "";
  const checked = ipi.replace(/\D/g, "").length >= 11 ? checkIpiNameNumber(ipi) : null;
  const wrong = checked && !checked.ok ? checked : null;
  const suggestion = wrong?.suggestion;
  const number = index + 1;
  return (
    <fieldset className="grid min-w-0 grid-cols-2 gap-x-4 gap-y-3 @wide:grid-cols-6">
      <legend className="sr-only">
        {one} {number}
      </legend>
      <TextField
        className="col-span-2 @wide:col-span-3"
        error={errorAt("name") && "The name as it stands in the contract."}
        label="Name"
        {...register(`${side}.${index}.name`)}
      />
      {side === "writers" && (
        <TextField
          className="col-span-2 @wide:col-span-3"
          error={errorAt("email")?.message}
          inputMode="email"
          label="E-mail address"
          optional
          type="email"
          {...register(`writers.${index}.email`)}
        />
      )}
      <div className="col-span-2">
        <TextField
          autoComplete="off"
          error={wrong?.message ?? errorAt("ipi")?.message}
          inputMode="numeric"
          label="IPI name number"
          optional
          {...register(`${side}.${index}.ipi`)}
        />
        {suggestion && (
          <p className="mt-1 ml-5">
            <Button
              kind="quiet"
              onClick={() =>
                setValue(`${side}.${index}.ipi`, suggestion, { shouldDirty: true, shouldValidate: true })
              }
            >
              Use {suggestion}
            </Button>
          </p>
        )}
      </div>
      <SelectField
        className="@wide:col-span-2"
        label="Role"
        options={ROLES[side]}
        {...register(`${side}.${index}.role`)}
      />
      <TextField
        className="@wide:col-span-1"
        error={errorAt("share") && "A share like 33.34."}
        inputMode="decimal"
        label="Share, %"
        {...register(`${side}.${index}.share`)}
      />
      {onRemove && (
        <div className="col-span-2 self-end pb-2 @wide:col-span-1">
          <Button aria-label={`Take out ${one.toLowerCase()} ${number}`} kind="quiet" onClick={onRemove}>
            Take out
          </Button>
        </div>
      )}
    </fieldset>
  );
}
