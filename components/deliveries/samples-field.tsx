"use client";

import { useFieldArray, useFormContext, useWatch } from "react-hook-form";
import { Button } from "@/components/ui/button";
import { SelectField, TextField } from "@/components/ui/field";
import type { DraftInput, DraftOutput } from "./draft-form";
import { PaperField } from "./paper-field";
import { useTried } from "./tried";
import type { DeliveryOnWire } from "./wire";

const KINDS = [
  "registered loop",
  "royalty-free pack",
  "cleared sample",
  "public-domain recording",
  "own field recording",
].map((value) => ({ value, label: value }));

const EMPTY_SAMPLE = {
  what: "",
  source: "",
  kind: "royalty-free pack",
  loopCode: null,
  where: "",
  paperKey: null,
  paperWords: "",
} as const;

interface SamplesFieldProps {
  deliveryId: string;
  papers: DeliveryOnWire["papers"];
  onPaper: () => void;
}

/** Every sample and loop in it: what, from where, and the paper that shows that it may be used. */
export function SamplesField({ deliveryId, papers, onPaper }: SamplesFieldProps) {
  const { control } = useFormContext<DraftInput, unknown, DraftOutput>();
  const { fields, append, remove } = useFieldArray({ control, name: "declaration.samples" });
  return (
    <div>
      {fields.length === 0 && <p>None: every sound in it was played or made by its writers.</p>}
      <ol>
        {fields.map((field, index) => (
          <li className="border-b border-line py-3" key={field.id}>
            <SampleRow
              deliveryId={deliveryId}
              index={index}
              onPaper={onPaper}
              onRemove={() => remove(index)}
              papers={papers}
            />
          </li>
        ))}
      </ol>
      <div className="mt-3">
        <Button onClick={() => append({ ...EMPTY_SAMPLE })} size="small">
          Add a sample or loop
        </Button>
      </div>
    </div>
  );
}

function SampleRow(props: SamplesFieldProps & { index: number; onRemove: () => void }) {
  const { deliveryId, papers, index, onRemove, onPaper } = props;
  const { register, control, formState, setValue } = useFormContext<DraftInput, unknown, DraftOutput>();
  const tried = useTried();
  const touched = formState.touchedFields.declaration?.samples?.[index];
  const found = formState.errors.declaration?.samples?.[index];
  const errorAt = (name: "what" | "source" | "loopCode") => (tried || touched?.[name]) && found?.[name];
  const path = `declaration.samples.${index}` as const;
  const kind = useWatch({ control, name: `${path}.kind` });
  const paperKey = useWatch({ control, name: `${path}.paperKey` });
  const paperName = papers.find((paper) => paper.key === paperKey)?.name ?? "The paper";
  const isLoop = kind === "registered loop";
  return (
    <fieldset className="grid min-w-0 gap-x-4 gap-y-3 @wide:grid-cols-2">
      <legend className="sr-only">Sample {index + 1}</legend>
      <TextField
        error={errorAt("what") ? "What it is, in a few words." : undefined}
        label="What it is"
        {...register(`${path}.what`)}
      />
      <TextField
        error={errorAt("source") ? "Where it comes from." : undefined}
        label="Where it comes from"
        {...register(`${path}.source`)}
      />
      <SelectField
        label="On what terms"
        options={KINDS}
        {...register(`${path}.kind`, {
          onChange: (event: { target: { value: string } }) => {
            if (event.target.value !== "registered loop") setValue(`${path}.loopCode`, null);
          },
        })}
      />
      {isLoop && (
        <TextField
          error={
            errorAt("loopCode") ? "The register's code is LP- and three digits, such as LP-003." : undefined
          }
          hint="A registered loop explains its own matches, where its condition holds and a paper is shown."
          label="Code in the register"
          {...register(`${path}.loopCode`, {
            setValueAs: (value: string | null) => (value ? value.trim().toUpperCase() : null),
          })}
        />
      )}
      <TextField
        hint="Times or layers: drums throughout, 0:12–0:20."
        label="Where in the music"
        optional
        {...register(`${path}.where`)}
      />
      <TextField
        hint="For instance: receipt of 3 March, terms allow library music."
        label="What the paper says"
        optional
        {...register(`${path}.paperWords`)}
      />
      <div className="flex flex-wrap items-center justify-between gap-x-6 gap-y-2 @wide:col-span-2">
        <PaperField
          deliveryId={deliveryId}
          onPaper={(paper) => {
            setValue(`${path}.paperKey`, paper?.key ?? null, { shouldDirty: true });
            onPaper();
          }}
          paper={paperKey ? { key: paperKey, name: paperName } : null}
          words="Add its licence or receipt"
        />
        <Button aria-label={`Take this sample out: ${index + 1}`} kind="quiet" onClick={onRemove}>
          Take this sample out
        </Button>
      </div>
    </fieldset>
  );
}
