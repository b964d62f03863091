import type { ReactNode } from "react";
import { type CueFacts, cueFacts } from "./format";

/** The facts of a cue, as one sentence. */
export function Facts(props: CueFacts) {
  return <>{cueFacts(props)}</>;
}

export interface FactRow {
  name: string;
  value: ReactNode;
  below?: ReactNode;
}

/** Named facts between hairlines: a licence's terms, a file's measurements. */
export function FactList({
  rows,
  nameWidth = "7rem",
}: {
  rows: readonly FactRow[];
  nameWidth?: "5rem" | "7rem" | "10rem";
}) {
  const columns = {
    "5rem": "sm:grid-cols-[5rem_minmax(0,1fr)]",
    "7rem": "sm:grid-cols-[7rem_minmax(0,1fr)]",
    "10rem": "sm:grid-cols-[10rem_minmax(0,1fr)]",
  }[nameWidth];
  return (
    <dl>
      {rows.map((row) => (
        <div
          className={`grid grid-cols-1 gap-x-4 border-b border-line py-2.5 in-[.buff]:border-buff-2 ${columns}`}
          key={row.name}
        >
          <dt className="text-ink-soft">{row.name}</dt>
          <dd className="min-w-0">
            {row.value}
            {row.below && <span className="block text-small text-ink-soft">{row.below}</span>}
          </dd>
        </div>
      ))}
    </dl>
  );
}
