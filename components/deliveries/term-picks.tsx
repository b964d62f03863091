"use client";

import { type Control, useController } from "react-hook-form";
import { Fieldset } from "@/components/ui/choices";
import { TextField } from "@/components/ui/field";
import type { Term } from "@/lib/catalogue/vocabularies";
import type { DraftInput, DraftOutput } from "./draft-form";

type FormControl = Control<DraftInput, unknown, DraftOutput>;

interface TermPicksProps {
  control: FormControl;
  name: "moods" | "instruments" | "uses" | "moreGenres";
  legend: string;
  hint: string;
  terms: readonly Term[];
  most: number;
}

/** Some of a controlled list: each term a box to tick, and no more of them than the field takes. */
export function TermPicks({ control, name, legend, hint, terms, most }: TermPicksProps) {
  const { field, fieldState } = useController({ control, name });
  const picked: readonly string[] = field.value ?? [];
  const isFull = picked.length >= most;
  const toggle = (id: string, on: boolean) => {
    field.onChange(on ? [...picked, id] : picked.filter((other) => other !== id));
    field.onBlur();
  };
  return (
    <Fieldset
      error={fieldState.error && (picked.length === 0 ? "Choose at least one." : fieldState.error.message)}
      hint={`${hint} ${picked.length} of ${most} chosen.`}
      legend={legend}
    >
      <div className="grid grid-cols-2 gap-x-4 @wide:grid-cols-4">
        {terms.map((term, index) => {
          const isOn = picked.includes(term.id);
          return (
            <label
              className="grid min-h-7 cursor-pointer grid-cols-[1.5rem_minmax(0,1fr)] items-start has-disabled:cursor-default has-disabled:text-ink-soft"
              key={term.id}
            >
              <input
                checked={isOn}
                className="peer col-start-1 row-start-1 mt-[2px] size-4 cursor-pointer appearance-none rounded-plain border-[1.5px] border-ink bg-page checked:bg-ink disabled:border-dashed disabled:border-ink-soft"
                disabled={isFull && !isOn}
                onChange={(event) => toggle(term.id, event.target.checked)}
                ref={index === 0 ? field.ref : undefined}
                type="checkbox"
              />
              <svg
                aria-hidden
                className="pointer-events-none col-start-1 row-start-1 mt-[2px] hidden size-4 peer-checked:block"
                viewBox="0 0 18 18"
              >
                <path className="stroke-page" d="M4.5 9.4 7.6 12.5 13.5 5.8" fill="none" strokeWidth="2" />
              </svg>
              <span className="col-start-2 row-start-1 wrap-anywhere">{term.label}</span>
            </label>
          );
        })}
      </div>
    </Fieldset>
  );
}

interface ListFieldProps {
  control: FormControl;
  name: "keywords" | "otherTitles" | "refusedUses" | "restrictedTerritories";
  label: string;
  hint: string;
}

const split = (text: string) =>
  text
    .split(/[,;]/)
    .map((part) => part.trim())
    .filter(Boolean);

/** Several words in one line, divided by commas. */
export function ListField({ control, name, label, hint }: ListFieldProps) {
  const { field, fieldState } = useController({ control, name });
  const upper = name === "restrictedTerritories";
  const faults = fieldState.error
    ? (fieldState.error.message ?? "One of these does not fit; see the hint.")
    : undefined;
  return (
    <TextField
      defaultValue={(field.value ?? []).join(", ")}
      error={faults}
      hint={hint}
      label={label}
      onBlur={field.onBlur}
      onChange={(event) =>
        field.onChange(split(upper ? event.target.value.toUpperCase() : event.target.value))
      }
      optional
      ref={field.ref}
    />
  );
}
