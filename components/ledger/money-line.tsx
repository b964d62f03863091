import type { ReactNode } from "react";

interface MoneyLineProps {
  date: string;
  children: ReactNode;
  amount: string;
  /** A soft line under the amount: "of £240.00 net". */
  of?: string | undefined;
  /** What the line opens into. */
  parts?: ReactNode;
  /** The heading's rule stands above it already. */
  isFirst?: boolean;
}

/** One dated sentence with its amount; under 640 px the date and amount share a line above it. */
export function MoneyLine({ date, children, amount, of, parts, isFirst }: MoneyLineProps) {
  return (
    <li className={isFirst ? "pt-1 pb-3" : "border-t border-line py-3 in-[.buff]:border-buff-2"}>
      <div className="grid grid-cols-[minmax(0,1fr)_auto] gap-x-4 sm:grid-cols-[5.25rem_minmax(0,1fr)_auto]">
        <span className="text-ink-soft">{date}</span>
        <div className="order-last col-span-2 max-w-measure sm:order-none sm:col-span-1">{children}</div>
        <span className="text-right">
          <b className="figures text-lead font-strong">{amount}</b>
          {of && <span className="block text-small text-ink-soft">{of}</span>}
        </span>
      </div>
      {parts && <div className="mt-2 sm:ml-[6.25rem]">{parts}</div>}
    </li>
  );
}
