import type { ReactNode } from "react";
import { cx } from "./cx";
import { Mark, type MarkKind } from "./mark";

interface StatusSentenceProps {
  mark: MarkKind;
  children: ReactNode;
  /** A soft line beneath: when, by whom, what follows. */
  below?: ReactNode;
  /** A figure or link at the right. */
  end?: ReactNode;
  as?: "p" | "li" | "div";
  className?: string;
}

/** A status: its shape, then the sentence that says it. A sentence marked warn is magenta. */
export function StatusSentence({ mark, children, below, end, as = "p", className }: StatusSentenceProps) {
  const Outer = as === "p" ? "div" : as;
  return (
    <Outer className={cx("grid grid-cols-[1.4375rem_minmax(0,1fr)_auto]", className)}>
      <Mark className="mt-[0.22em]" kind={mark} />
      <span className={cx(mark === "warn" && "text-magenta")}>{children}</span>
      {end ? <span className="pl-3 text-right">{end}</span> : <span />}
      {below && <span className="col-start-2 col-end-4 text-small text-ink-soft">{below}</span>}
    </Outer>
  );
}
