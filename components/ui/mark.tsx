import { cx } from "./cx";

export type MarkKind = "done" | "half" | "open" | "held" | "warn" | "tick" | "pick";

interface MarkProps {
  kind: MarkKind;
  /** Pixels; 13 in running text. */
  sizePx?: number;
  className?: string;
  /** Read aloud. Leave out where the words beside the mark already say it. */
  label?: string;
}

const RING = { cx: 7, cy: 7, fill: "none", strokeWidth: 1.5 };

function Shape({ kind }: { kind: MarkKind }) {
  switch (kind) {
    case "done":
      return <circle className="fill-ink" cx="7" cy="7" r="6.75" />;
    case "half":
      return (
        <>
          <circle {...RING} className="stroke-ink" r="6" />
          <path className="fill-ink" d="M7 1a6 6 0 0 1 0 12z" />
        </>
      );
    case "open":
      return <circle {...RING} className="stroke-ink" r="6" />;
    case "held":
      return <circle {...RING} className="stroke-ink" r="6" strokeDasharray="4.2 2.083" strokeWidth="1.7" />;
    case "warn":
      return (
        <>
          <circle {...RING} className="stroke-magenta" r="6" />
          <path className="stroke-magenta" d="M7 3.5v4.3M7 9.3v1.6" fill="none" strokeWidth="1.7" />
        </>
      );
    case "tick":
      return (
        <>
          <circle {...RING} className="stroke-flat-2" r="6.1" strokeWidth="1.4" />
          <path className="stroke-flat-2" d="M4 7.3 6.2 9.5 10.2 5" fill="none" strokeWidth="1.6" />
        </>
      );
    case "pick":
      return (
        <>
          <circle {...RING} className="fill-page stroke-ink" r="6" />
          <circle className="fill-ink" cx="7" cy="7" r="3.2" />
        </>
      );
  }
}

/** Done, under way, to come; held; needs you; genuine or listed; chosen. Always with a word beside it. */
export function Mark({ kind, sizePx = 13, className, label }: MarkProps) {
  return (
    <svg
      aria-hidden={label ? undefined : true}
      aria-label={label}
      className={cx("inline-block shrink-0", className)}
      height={sizePx}
      role={label ? "img" : undefined}
      viewBox="0 0 14 14"
      width={sizePx}
    >
      <Shape kind={kind} />
    </svg>
  );
}
