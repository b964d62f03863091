import { type ComponentPropsWithRef, type ReactNode, useId } from "react";
import { cx } from "./cx";
import { Mark } from "./mark";

export interface FieldError {
  /** What is wrong, as a sentence. */
  what: string;
  /** What to do about it. */
  remedy?: string | undefined;
}

interface FieldWords {
  label: ReactNode;
  /** A soft line under the label, read with the field. */
  hint?: ReactNode;
  error?: string | FieldError | undefined;
  /** Said after the label; fields are required unless marked so. */
  optional?: boolean;
  className?: string | undefined;
}

const CONTROL =
  "w-full rounded-plain border border-ink-soft bg-page px-3 text-body text-ink placeholder:text-ink-soft aria-invalid:border-magenta aria-invalid:border-[1.5px] disabled:border-dashed disabled:text-ink-soft";

function FieldProblem({ id, error }: { id: string; error: string | FieldError }) {
  const { what, remedy } = typeof error === "string" ? { what: error, remedy: undefined } : error;
  return (
    <p className="mt-1.5 grid grid-cols-[1.25rem_minmax(0,1fr)] text-small" id={id}>
      <Mark className="mt-[0.22em]" kind="warn" />
      <span>
        <span className="text-magenta">{what}</span>
        {remedy && ` ${remedy}`}
      </span>
    </p>
  );
}

function describedBy(id: string, hint: unknown, error: unknown): string | undefined {
  return [hint ? `${id}-hint` : "", error ? `${id}-error` : ""].filter(Boolean).join(" ") || undefined;
}

interface WrapProps extends FieldWords {
  id: string;
  children: ReactNode;
}

function FieldWrap({ id, label, hint, error, optional, className, children }: WrapProps) {
  return (
    <div className={className}>
      <label className="mb-1 block font-strong" htmlFor={id}>
        {label}
        {optional && <span className="font-normal text-ink-soft"> if you like</span>}
      </label>
      {hint && (
        <p className="mb-1.5 max-w-measure text-small text-ink-soft" id={`${id}-hint`}>
          {hint}
        </p>
      )}
      {children}
      {error && <FieldProblem error={error} id={`${id}-error`} />}
    </div>
  );
}

type TextFieldProps = FieldWords & Omit<ComponentPropsWithRef<"input">, "className">;

/** A line of text, a number, a date, a file. Spread react-hook-form's `register()` into it. */
export function TextField({ label, hint, error, optional, className, id, ...input }: TextFieldProps) {
  const made = useId();
  const fieldId = id ?? made;
  return (
    <FieldWrap {...{ label, hint, error, optional: optional ?? false, className }} id={fieldId}>
      <input
        type="text"
        {...input}
        aria-describedby={describedBy(fieldId, hint, error)}
        aria-invalid={error ? true : undefined}
        aria-required={optional ? undefined : true}
        className={cx(CONTROL, "min-h-[38px] file:mr-3 file:border-0 file:bg-transparent file:font-strong")}
        id={fieldId}
      />
    </FieldWrap>
  );
}

type TextAreaFieldProps = FieldWords & Omit<ComponentPropsWithRef<"textarea">, "className">;

export function TextAreaField({ label, hint, error, optional, className, id, ...area }: TextAreaFieldProps) {
  const made = useId();
  const fieldId = id ?? made;
  return (
    <FieldWrap {...{ label, hint, error, optional: optional ?? false, className }} id={fieldId}>
      <textarea
        rows={5}
        {...area}
        aria-describedby={describedBy(fieldId, hint, error)}
        aria-invalid={error ? true : undefined}
        aria-required={optional ? undefined : true}
        className={cx(CONTROL, "block py-2")}
        id={fieldId}
      />
    </FieldWrap>
  );
}

export interface FieldOption {
  value: string;
  label: string;
  disabled?: boolean;
}

type SelectFieldProps = FieldWords &
  Omit<ComponentPropsWithRef<"select">, "className" | "children"> & {
    options: readonly FieldOption[];
    /** The empty choice: "Choose a territory". */
    placeholder?: string;
  };

export function SelectField(props: SelectFieldProps) {
  const { label, hint, error, optional, className, id, options, placeholder, ...select } = props;
  const made = useId();
  const fieldId = id ?? made;
  return (
    <FieldWrap {...{ label, hint, error, optional: optional ?? false, className }} id={fieldId}>
      <select
        {...select}
        aria-describedby={describedBy(fieldId, hint, error)}
        aria-invalid={error ? true : undefined}
        aria-required={optional ? undefined : true}
        className={cx(CONTROL, "min-h-[38px]")}
        id={fieldId}
      >
        {placeholder !== undefined && <option value="">{placeholder}</option>}
        {options.map((option) => (
          <option disabled={option.disabled} key={option.value} value={option.value}>
            {option.label}
          </option>
        ))}
      </select>
    </FieldWrap>
  );
}

type CheckFieldProps = Omit<FieldWords, "optional" | "label"> &
  Omit<ComponentPropsWithRef<"input">, "className" | "type"> & {
    /** The whole sentence agreed to. */
    children: ReactNode;
  };

export function CheckField({ children, hint, error, className, id, ...input }: CheckFieldProps) {
  const made = useId();
  const fieldId = id ?? made;
  return (
    <div className={className}>
      <label className="grid min-h-6 cursor-pointer grid-cols-[1.75rem_minmax(0,1fr)]" htmlFor={fieldId}>
        <input
          {...input}
          aria-describedby={describedBy(fieldId, hint, error)}
          aria-invalid={error ? true : undefined}
          className="peer col-start-1 row-start-1 mt-[1px] size-[18px] cursor-pointer appearance-none rounded-plain border-[1.5px] border-ink bg-page checked:bg-ink aria-invalid:border-magenta"
          id={fieldId}
          type="checkbox"
        />
        <svg
          aria-hidden
          className="pointer-events-none col-start-1 row-start-1 mt-[1px] hidden size-[18px] peer-checked:block"
          viewBox="0 0 18 18"
        >
          <path className="stroke-page" d="M4.5 9.4 7.6 12.5 13.5 5.8" fill="none" strokeWidth="2" />
        </svg>
        <span className="col-start-2 row-start-1 max-w-measure">{children}</span>
      </label>
      {hint && (
        <p className="mt-0.5 ml-7 max-w-measure text-small text-ink-soft" id={`${fieldId}-hint`}>
          {hint}
        </p>
      )}
      {error && (
        <div className="ml-7">
          <FieldProblem error={error} id={`${fieldId}-error`} />
        </div>
      )}
    </div>
  );
}
