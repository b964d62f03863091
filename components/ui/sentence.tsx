import type { ReactNode } from "react";
import { cx } from "./cx";

interface SentenceProps {
  children: ReactNode;
  /** small 12.5 px, body 14.5 px, lead 17 px */
  size?: "small" | "body" | "lead";
  soft?: boolean;
  className?: string;
}

const SIZES = { small: "text-small", body: "text-body", lead: "text-lead" };

export function Sentence({ children, size = "body", soft = false, className }: SentenceProps) {
  return <p className={cx("max-w-measure", SIZES[size], soft && "text-ink-soft", className)}>{children}</p>;
}

interface HeadSentenceProps {
  children: ReactNode;
  /** Where in the site or in time this is: one soft line above the sentence. */
  place?: ReactNode;
  /** Quiet links at the right of the place line. */
  links?: ReactNode;
  /** huge for two short lines, big for most screens */
  size?: "big" | "huge";
}

/** The first thing on a screen: the state of affairs, in one sentence. It is the page's only h1. */
export function HeadSentence({ children, place, links, size = "big" }: HeadSentenceProps) {
  return (
    <div>
      {(place || links) && (
        <div className="mb-2 flex flex-wrap items-baseline justify-between gap-x-6 text-small text-ink-soft">
          <p>{place}</p>
          {links && <p className="flex gap-x-4 text-ink">{links}</p>}
        </div>
      )}
      <h1
        className={cx(
          "max-w-head text-head font-normal tracking-[-0.008em] text-pretty [&_b]:font-strong",
          size === "huge" ? "sm:text-huge sm:tracking-[-0.013em]" : "sm:text-big",
        )}
      >
        {children}
      </h1>
    </div>
  );
}

interface SectionProps {
  head: ReactNode;
  children: ReactNode;
  /** A soft phrase at the right of the heading: "in euro". */
  note?: ReactNode;
  className?: string;
  level?: 2 | 3;
  id?: string;
}

/** A headed part of a page, its heading on an ink rule; on the working table the rule is buff. */
export function Section({ head, children, note, className, level = 2, id }: SectionProps) {
  const Heading = level === 2 ? "h2" : "h3";
  return (
    <section className={className} id={id}>
      <div className="mb-2 flex items-baseline justify-between gap-4 border-b border-ink pb-1 in-[.buff]:border-b-[1.5px] in-[.buff]:border-buff-2">
        <Heading className="text-body font-strong">{head}</Heading>
        {note && <span className="text-small text-ink-soft">{note}</span>}
      </div>
      {children}
    </section>
  );
}
