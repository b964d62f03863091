import type { ReactNode } from "react";
import { fmt } from "@/components/ui/format";
import { percent } from "./axis";
import { ChartAxis, type EndingKind, EndingMark } from "./chart-marks";
import type { ContourData } from "./contour-data";
import { ContourShape } from "./contour-shape";
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

/** Measures of the drawing, shared with the layer that moves over it. */
export const PASSAGE_PX = { topPx: 22, stripPx: 126, gapPx: 50 } as const;
const { topPx: TOP, stripPx: STRIP, gapPx: GAP } = PASSAGE_PX;
const B_TOP = TOP + STRIP + GAP;
const BOTTOM = B_TOP + STRIP;
const HEIGHT = BOTTOM + 34;
const NARROW = 0.06;
const NARROW_ON_PHONE = 0.16;

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
              className="fill-ink-soft max-sm:hidden"
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

function Joined({
  passage,
  scaleS,
  isSelected,
}: {
  passage: ChartPassage;
  scaleS: number;
  isSelected: boolean;
}) {
  const at = (seconds: number) => ((1000 * seconds) / scaleS).toFixed(2);
  const middleS = (passage.aFromS + passage.aToS + passage.bFromS + passage.bToS) / 4;
  const share = (passage.aToS - passage.aFromS) / scaleS;
  const aLength = fmt.seconds(passage.aToS - passage.aFromS);
  const bLength = fmt.seconds(passage.bToS - passage.bFromS);
  return (
    <g>
      <svg
        aria-hidden
        height={GAP}
        overflow="visible"
        preserveAspectRatio="none"
        viewBox={`0 0 1000 ${GAP}`}
        width="100%"
        y={TOP + STRIP}
      >
        <path
          className="fill-magenta-pale"
          d={`M${at(passage.aFromS)} 0H${at(passage.aToS)}L${at(passage.bToS)} ${GAP}H${at(passage.bFromS)}Z`}
        />
      </svg>
      {share > 0.17 && (
        <text
          className={isSelected ? "font-label max-sm:hidden" : "max-sm:hidden"}
          textAnchor="middle"
          x={percent(middleS, scaleS)}
          y={TOP + STRIP + GAP / 2 + 4.5}
        >
          {aLength} in A, {bLength} in B
        </text>
      )}
    </g>
  );
}

function Bounds({ passage, scaleS }: { passage: ChartPassage; scaleS: number }) {
  const ends = [
    [passage.aFromS, passage.bFromS],
    [passage.aToS, passage.bToS],
  ] as const;
  return ["stroke-page", "stroke-magenta"].map((stroke) => (
    <g className={stroke} key={stroke} strokeWidth={stroke === "stroke-page" ? 3.5 : 1.5}>
      {ends.map(([aS, bS]) => {
        const xa = percent(aS, scaleS);
        const xb = percent(bS, scaleS);
        return (
          <g key={aS}>
            <line x1={xa} x2={xa} y1={TOP - 2} y2={TOP + STRIP} />
            <line x1={xa} x2={xb} y1={TOP + STRIP} y2={B_TOP} />
            <line x1={xb} x2={xb} y1={B_TOP} y2={BOTTOM + 2} />
          </g>
        );
      })}
    </g>
  ));
}

interface EndNumberProps {
  number: number;
  atS: number;
  scaleS: number;
  y: number;
  side: 1 | -1;
  isSelected: boolean;
  className?: string | undefined;
}

function EndNumber({ number, atS, scaleS, y, side, isSelected, className }: EndNumberProps) {
  return (
    <svg aria-hidden className={className} overflow="visible" x={percent(atS, scaleS)} y={y}>
      <circle
        className={isSelected ? "fill-magenta stroke-magenta" : "fill-page stroke-magenta"}
        cx={14 * side}
        r="9.5"
        strokeWidth="1.5"
      />
      <text
        className={isSelected ? "fill-page font-label" : "fill-magenta font-label"}
        textAnchor="middle"
        x={14 * side}
        y="4.4"
      >
        {number}
      </text>
    </svg>
  );
}

function EndNumbers({
  passage,
  scaleS,
  isSelected,
}: {
  passage: ChartPassage;
  scaleS: number;
  isSelected: boolean;
}) {
  const share = Math.min(passage.aToS - passage.aFromS, passage.bToS - passage.bFromS) / scaleS;
  const shared = { number: passage.number, scaleS, isSelected };
  const late = share < NARROW_ON_PHONE ? "max-sm:hidden" : undefined;
  return (
    <>
      <EndNumber {...shared} atS={passage.aFromS} side={1} y={TOP + 9} />
      <EndNumber {...shared} atS={passage.bFromS} side={1} y={BOTTOM - 9} />
      {share >= NARROW && (
        <>
          <EndNumber {...shared} atS={passage.aToS} className={late} side={-1} y={TOP + 9} />
          <EndNumber {...shared} atS={passage.bToS} className={late} side={-1} y={BOTTOM - 9} />
        </>
      )}
    </>
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

/** The number of a passage in its ring, for tables and sentences. */
export function PassageNumber({ number }: { number: number }) {
  return (
    <span className="inline-block size-[19px] rounded-round border-[1.5px] border-magenta bg-page text-center text-small leading-[16px] font-label text-magenta">
      {number}
    </span>
  );
}
