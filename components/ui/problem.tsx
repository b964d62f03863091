import type { ReactNode } from "react";
import { cx } from "./cx";
import { Mark } from "./mark";

interface ProblemProps {
  /** What happened, in one sentence: "30: needs a new file from you." */
  children: ReactNode;
  /** The measured place: "It runs 30.40 s; a 30 must run 29.95 to 30.05 s." */
  place?: ReactNode;
  /** What is kept, and what to do next. */
  remedy?: ReactNode;
  id?: string;
  /** Announced at once; for answers to something the person just did. */
  live?: boolean;
  className?: string;
}

/** An error: its ring, a magenta sentence, the measured place, the remedy. No box. */
export function Problem({ children, place, remedy, id, live, className }: ProblemProps) {
  return (
    <div
      className={cx("grid grid-cols-[1.4375rem_minmax(0,1fr)]", className)}
      id={id}
      role={live ? "alert" : undefined}
    >
      <Mark className="mt-[0.22em]" kind="warn" />
      <div className="max-w-measure">
        <p className="text-magenta">{children}</p>
        {place && <p>{place}</p>}
        {remedy && <p>{remedy}</p>}
      </div>
    </div>
  );
}
