import type { ReactNode } from "react";

interface DisclosureProps {
  /** The underlined words that open it: "Show its parts". */
  words: string;
  children: ReactNode;
  open?: boolean;
  className?: string;
}

/** Further facts behind underlined words; works before and without scripts. */
export function Disclosure({ words, children, open, className }: DisclosureProps) {
  return (
    <details className={className} open={open}>
      <summary className="link target inline-block min-h-6 list-none [&::-webkit-details-marker]:hidden">
        {words}
      </summary>
      <div className="pt-3">{children}</div>
    </details>
  );
}
