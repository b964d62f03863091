import type { ReactNode } from "react";

interface EmptyProps {
  /** What would be here. */
  children: ReactNode;
  /** How to get it here: a sentence with a link, or a button. */
  action?: ReactNode;
}

export function Empty({ children, action }: EmptyProps) {
  return (
    <div className="max-w-measure border-y border-line py-6 in-[.buff]:border-buff-2">
      <p className="text-lead">{children}</p>
      {action && <div className="mt-3">{action}</div>}
    </div>
  );
}
