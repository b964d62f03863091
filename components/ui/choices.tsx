import { type ComponentPropsWithRef, type ReactNode, useId } from "react";
import { cx } from "./cx";
import type { FieldError } from "./field";
import { Mark } from "./mark";

export interface Choice {
  value: string;
  /** The choice as a sentence or phrase. */
  sentence: ReactNode;
  /** What will happen if it is chosen. */
  below?: ReactNode;
  /** Further fields that belong to this choice; keep them in the form only while it is chosen. */
  inside?: ReactNode;
  disabled?: boolean;
}

interface FieldsetProps {
  legend: ReactNode;
  hint?: ReactNode;
  error?: string | FieldError | undefined;
  children: ReactNode;
  /** lead for the question of a working table, body within a form */
  size?: "body" | "head";
  className?: string | undefined;
}

/** Fields that answer one question. */
export function Fieldset({ legend, hint, error, children, size = "body", className }: FieldsetProps) {
  const id = useId();
  const problem = typeof error === "string" ? { what: error, remedy: undefined } : error;
  const described = [hint ? `${id}-hint` : "", problem ? `${id}-error` : ""].filter(Boolean).join(" ");
  return (
    <fieldset aria-describedby={described || undefined} className={cx("min-w-0", className)}>
      <legend className={cx("mb-1 font-strong", size === "head" && "text-head leading-tight")}>
        {legend}
      </legend>
      {hint && (
        <p className="mb-1.5 max-w-measure text-small text-ink-soft" id={`${id}-hint`}>
          {hint}
        </p>
      )}
      {children}
      {problem && (
        <p className="mt-1.5 grid grid-cols-[1.25rem_minmax(0,1fr)] text-small" id={`${id}-error`}>
          <Mark className="mt-[0.22em]" kind="warn" />
          <span>
            <span className="text-magenta">{problem.what}</span>
            {problem.remedy && ` ${problem.remedy}`}
          </span>
        </p>
      )}
    </fieldset>
  );
}

type ChoicesProps = Omit<FieldsetProps, "children"> &
  Omit<ComponentPropsWithRef<"input">, "className" | "type" | "value" | "size" | "children"> & {
    options: readonly Choice[];
    /** Chosen at first, in a form without react-hook-form. */
    chosen?: string | undefined;
  };

/** One of several, each a sentence that says what it does. Spread `register()` into it. */
export function Choices({ legend, hint, error, size, className, options, chosen, ...input }: ChoicesProps) {
  const id = useId();
  return (
    <Fieldset {...{ legend, hint, error, className, size: size ?? "body" }}>
      <div>
        {options.map((option, index) => {
          const optionId = `${id}-${index}`;
          return (
            <div
              className="-mx-3 rounded-plain border border-b-line border-transparent px-3 py-2.5 in-[.buff]:border-b-buff-2 has-checked:border-ink has-checked:bg-page"
              key={option.value}
            >
              <label
                className="grid min-h-6 cursor-pointer grid-cols-[1.5625rem_minmax(0,1fr)] has-disabled:cursor-default"
                htmlFor={optionId}
              >
                <input
                  {...input}
                  {...(chosen === undefined ? {} : { defaultChecked: chosen === option.value })}
                  aria-describedby={option.below ? `${optionId}-below` : undefined}
                  className="peer col-start-1 row-start-1 mt-[3px] size-[15px] cursor-pointer appearance-none rounded-round border-[1.6px] border-ink bg-page disabled:border-dashed disabled:border-ink-soft"
                  disabled={option.disabled ?? input.disabled}
                  id={optionId}
                  type="radio"
                  value={option.value}
                />
                <svg
                  aria-hidden
                  className="pointer-events-none col-start-1 row-start-1 mt-[3px] hidden size-[15px] peer-checked:block"
                  viewBox="0 0 15 15"
                >
                  <circle className="fill-ink" cx="7.5" cy="7.5" r="3.6" />
                </svg>
                <span className="col-start-2 row-start-1 font-strong">{option.sentence}</span>
                {option.below && (
                  <span
                    className="col-start-2 text-small font-normal text-ink-soft peer-checked:text-ink"
                    id={`${optionId}-below`}
                  >
                    {option.below}
                  </span>
                )}
              </label>
              {option.inside && <div className="ml-[1.5625rem] pt-2">{option.inside}</div>}
            </div>
          );
        })}
      </div>
    </Fieldset>
  );
}
