import type { ReactNode } from "react";

interface ProgressProps {
  /** What is being done: "Reading 1:10 of 2:02, then searching 112 recordings." */
  children: ReactNode;
  /** Work done and in all, in the same unit; leave `of` out while the amount is not known. */
  done: number;
  of?: number | undefined;
  /** Written at the ends of the bar: "1:10" and "2:02". */
  doneText?: string;
  ofText?: string;
  label: string;
}

/** What is being done, and how much of how much. Never a counted-up number. */
export function Progress({ children, done, of, doneText, ofText, label }: ProgressProps) {
  const share = of && of > 0 ? Math.min(1, Math.max(0, done / of)) : 0;
  return (
    <div>
      <p>{children}</p>
      {of !== undefined && of > 0 && (
        <>
          <svg
            aria-label={label}
            aria-valuemax={of}
            aria-valuemin={0}
            aria-valuenow={Math.min(done, of)}
            aria-valuetext={doneText && ofText ? `${doneText} of ${ofText}` : undefined}
            className="mt-2 block w-full overflow-visible"
            height="6"
            role="progressbar"
          >
            <rect className="fill-page stroke-ink" height="5" width="100%" y="0.5" />
            <rect
              className="fill-depth stroke-ink"
              height="5"
              width={`${(share * 100).toFixed(2)}%`}
              y="0.5"
            />
          </svg>
          {(doneText || ofText) && (
            <p className="mt-1 flex justify-between text-small">
              <span>{doneText}</span>
              <span className="text-ink-soft">{ofText}</span>
            </p>
          )}
        </>
      )}
    </div>
  );
}
