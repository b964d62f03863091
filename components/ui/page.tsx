import type { ReactNode } from "react";
import { DockPlace } from "@/components/player/dock-place";
import { cx } from "./cx";

interface PageProps {
  children: ReactNode;
  /** The buff working table, where a person decides, assembles or signs: right on a wide screen, else below. */
  aside?: ReactNode;
  /** Named for screen readers: "Your shortlist". Needed with `aside`. */
  asideLabel?: string;
}

/** One screen: the main column, and the working table if there is one. */
export function Page({ children, aside, asideLabel }: PageProps) {
  return (
    <div
      className={cx(
        "grid grow grid-cols-1 content-start lg:content-stretch",
        aside !== undefined && "lg:grid-cols-[minmax(0,1fr)_23.5rem]",
      )}
    >
      <main className="min-w-0 px-4 pt-5 pb-12 sm:px-6 lg:px-10 lg:pt-[26px]" id="main" tabIndex={-1}>
        <div className="@container mx-auto max-w-main lg:mx-0">{children}</div>
      </main>
      {aside !== undefined && (
        <aside
          aria-label={asideLabel}
          className="buff min-w-0 border-t border-ink bg-buff-1 wrap-anywhere lg:border-t-0 lg:border-l"
        >
          <div className="lg:sticky lg:top-0 lg:max-h-dvh lg:overflow-x-hidden lg:overflow-y-auto">
            <DockPlace />
            <div className="px-4 pt-5 pb-8 sm:px-6 lg:px-7 lg:pt-7">{aside}</div>
          </div>
        </aside>
      )}
    </div>
  );
}

/** The heading of the working table. */
export function AsideTitle({ children, below }: { children: ReactNode; below?: ReactNode }) {
  return (
    <div className="mb-4">
      <h2 className="text-head leading-tight font-strong tracking-[-0.006em]">{children}</h2>
      {below && <p className="mt-1">{below}</p>}
    </div>
  );
}
