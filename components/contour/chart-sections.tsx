import { Disclosure } from "@/components/ui/disclosure";
import { fmt } from "@/components/ui/format";
import { Table } from "@/components/ui/table";
import { percent } from "./axis";

export interface ChartSection {
  /** "A", "B". */
  letter: string;
  fromS: number;
  toS: number;
  /** "piano alone" */
  words?: string | undefined;
  /** Loudness of the section. */
  lufs?: number | null | undefined;
}

interface SectionsProps {
  sections: readonly ChartSection[];
  scaleS: number;
}

const WORDS_SHARE = 0.11;

/** Letters along the top, and the words where there is room. */
export function SectionLetters({ sections, scaleS }: SectionsProps) {
  return (
    <svg aria-hidden className="block h-6 w-full overflow-visible">
      {sections.map((section, index) => (
        <svg aria-hidden key={section.letter} overflow="visible" x={percent(section.fromS, scaleS)}>
          <text x={index === 0 ? 0 : 6} y="14">
            <tspan className="font-label">{section.letter}</tspan>
            {section.words && (section.toS - section.fromS) / scaleS > WORDS_SHARE && (
              <tspan className="fill-ink-soft max-sm:hidden" dx="5">
                {section.words}
              </tspan>
            )}
          </text>
        </svg>
      ))}
    </svg>
  );
}

/** Hairlines at the starts of sections, through everything on the axis. */
export function SectionRules({ sections, scaleS }: SectionsProps) {
  return (
    <svg
      aria-hidden
      className="pointer-events-none absolute inset-x-0 top-1 bottom-6 block size-full h-[calc(100%-1.75rem)]"
    >
      {sections.slice(1).map((section) => (
        <line
          className="stroke-line"
          key={section.letter}
          x1={percent(section.fromS, scaleS)}
          x2={percent(section.fromS, scaleS)}
          y1="0"
          y2="100%"
        />
      ))}
    </svg>
  );
}

/** Loudness by section, written like a chart's soundings. */
export function Soundings({ sections, scaleS }: SectionsProps) {
  return (
    <svg aria-hidden className="block h-6 w-full overflow-visible">
      {sections.map((section) =>
        section.lufs === null ||
        section.lufs === undefined ||
        (section.toS - section.fromS) / scaleS < 0.03 ? null : (
          <text
            className="case-page fill-ink-soft"
            key={section.letter}
            textAnchor="middle"
            x={percent((section.fromS + section.toS) / 2, scaleS)}
            y="17"
          >
            {fmt.sounding(section.lufs)}
          </text>
        ),
      )}
    </svg>
  );
}

/** The strip's text equivalent. */
export function SectionTable({ sections, title }: { sections: readonly ChartSection[]; title: string }) {
  const loudness = (section: ChartSection) =>
    section.lufs === null || section.lufs === undefined ? "not measured" : fmt.lufs(section.lufs);
  return (
    <Disclosure words="Sections as a table">
      <Table
        caption={`Sections of ${title}`}
        captionHidden
        columns={[
          { key: "letter", head: "Section", cell: (section) => <b>{section.letter}</b> },
          { key: "words", head: "What happens", cell: (section) => section.words ?? "" },
          { key: "from", head: "From", figures: true, cell: (section) => fmt.time(section.fromS) },
          { key: "to", head: "To", figures: true, cell: (section) => fmt.time(section.toS) },
          { key: "lufs", head: "Loudness", figures: true, cell: loudness },
        ]}
        rowKey={(section) => section.letter}
        rows={sections}
        sentence={(section) => (
          <>
            <b>{section.letter}</b> {fmt.span(section.fromS, section.toS)}
            {section.words && `, ${section.words}`}, {loudness(section)}.
          </>
        )}
      />
    </Disclosure>
  );
}
