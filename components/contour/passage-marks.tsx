import { cx } from "@/components/ui/cx";
import { fmt } from "@/components/ui/format";
import { percent } from "./axis";
import { NARROW, NARROW_ON_PHONE, PASSAGE_PX } from "./passage-measures";
import type { ChartPassage } from "./passages";

const { topPx: TOP, stripPx: STRIP, gapPx: GAP, bTopPx: B_TOP, bottomPx: BOTTOM } = PASSAGE_PX;

interface MarkProps {
  passage: ChartPassage;
  scaleS: number;
  isSelected: boolean;
}

export function Joined({ passage, scaleS, isSelected }: MarkProps) {
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
          className={cx(share > 0.2 ? "max-sm:hidden" : "hidden @wide:inline", isSelected && "font-label")}
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

export function Bounds({ passage, scaleS }: { passage: ChartPassage; scaleS: number }) {
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

export function EndNumbers({ passage, scaleS, isSelected }: MarkProps) {
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

/** The number of a passage in its ring, for tables and sentences. */
export function PassageNumber({ number }: { number: number }) {
  return (
    <span className="inline-block size-[19px] rounded-round border-[1.5px] border-magenta bg-page text-center text-small leading-[16px] font-label text-magenta">
      {number}
    </span>
  );
}
