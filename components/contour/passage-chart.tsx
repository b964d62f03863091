import type { ReactNode } from "react";
import { cx } from "@/components/ui/cx";
import { fmt } from "@/components/ui/format";
import { percent } from "./axis";
import { ChartAxis, type EndingKind, EndingMark } from "./chart-marks";
import type { ContourData } from "./contour-data";
import { ContourShape } from "./contour-shape";
import { Bounds, EndNumbers, Joined } from "./passage-marks";
import { PASSAGE_PX } from "./passage-measures";
import { type ChartPassage, type Span, undrawnSpans } from "./passages";

export interface PassageSide {
  seconds: number;
  /** Leave out where nothing of it may be drawn. */
  data?: ContourData | undefined;
  /** Leave out to draw all of it. */
  drawn?: readonly Span[] | undefined;
  ending?: EndingKind | null | undefined;
  /** The line that says what it is: a Title, its length, from whom. */
  words: ReactNode;
}

interface PassageChartProps {
  a: PassageSide;
  b: PassageSide;
  passages: readonly ChartPassage[];
  selected?: number | undefined;
  /** At the right of A's line: "one time axis for both". */
  note?: ReactNode;
  /** A layer over the drawing, such as ListeningLayer. */
  children?: ReactNode;
}

const { topPx: TOP, stripPx: STRIP, bTopPx: B_TOP, bottomPx: BOTTOM, heightPx: HEIGHT } = PASSAGE_PX;

function Side({ side, scaleS, y }: { side: PassageSide; scaleS: number; y: number }) {
  const drawn = side.data ? (side.drawn ?? [{ fromS: 0, toS: side.seconds }]) : [];
  const middle = y + STRIP / 2;
  return (
    <g>
      {undrawnSpans(drawn, side.seconds).map((gap) => (
        <g key={gap.fromS}>
          <line
            className="stroke-ink-soft"
            strokeDasharray="1 4"
            x1={percent(gap.fromS, scaleS)}
            x2={percent(gap.toS, scaleS)}
            y1={middle}
            y2={middle}
          />
          {(gap.toS - gap.fromS) / scaleS > 0.08 && (
            <text
              className={cx(
                "fill-ink-soft",
                (gap.toS - gap.fromS) / scaleS > 0.15 ? "max-sm:hidden" : "hidden @wide:inline",
              )}
              textAnchor="middle"
              x={percent((gap.fromS + gap.toS) / 2, scaleS)}
              y={middle - 9}
            >
              not drawn
            </text>
          )}
        </g>
      ))}
      {side.data &&
        drawn.map((span) => (
          <ContourShape
            {...span}
            atS={span.fromS}
            data={side.data as ContourData}
            drawnForPx={1000}
            height={STRIP}
            key={span.fromS}
            scaleS={scaleS}
            y={y}
          />
        ))}
      {side.data && !side.drawn && side.ending && (
        <EndingMark atS={side.seconds} ending={side.ending} height={16} scaleS={scaleS} y={middle} />
      )}
    </g>
  );
}

function equivalent(passages: readonly ChartPassage[]): string {
  const each = passages.map(
    (passage) =>
      `${passage.number}: ${fmt.spanTenths(passage.aFromS, passage.aToS)} of A with ${fmt.spanTenths(passage.bFromS, passage.bToS)} of B`,
  );
  return `Two recordings on one time axis with ${fmt.countWord(passages.length, "passage")}. ${each.join("; ")}.`;
}

/** The delivery above, the reference below, on one time axis; passages bounded and joined across the gap. */
export function PassageChart({ a, b, passages, selected, note, children }: PassageChartProps) {
  const scaleS = Math.max(a.seconds, b.seconds);
  return (
    <div>
      <div className="flex flex-wrap items-baseline justify-between gap-x-6">
        <p>
          <b className="mr-2">A</b>
          {a.words}
        </p>
        {note && <p className="text-small text-ink-soft">{note}</p>}
      </div>
      <div className="relative mr-2">
        <svg
          aria-label={equivalent(passages)}
          className="block w-full overflow-visible"
          height={HEIGHT}
          role="img"
        >
          {passages.map((passage) => (
            <Joined
              isSelected={passage.number === selected}
              key={passage.number}
              passage={passage}
              scaleS={scaleS}
            />
          ))}
          <Side scaleS={scaleS} side={a} y={TOP} />
          <Side scaleS={scaleS} side={b} y={B_TOP} />
          {passages.map((passage) => (
            <Bounds key={passage.number} passage={passage} scaleS={scaleS} />
          ))}
          {passages.map((passage) => (
            <EndNumbers
              isSelected={passage.number === selected}
              key={passage.number}
              passage={passage}
              scaleS={scaleS}
            />
          ))}
          <ChartAxis scaleS={scaleS} seconds={scaleS} y={BOTTOM + 9} />
        </svg>
        {children}
      </div>
      <p>
        <b className="mr-2">B</b>
        {b.words}
      </p>
    </div>
  );
}
