import { fmt } from "@/components/ui/format";
import { axisSteps, edgeAnchor, percent } from "./axis";

export type EndingKind = "button" | "ring-out" | "fade" | "loop";

interface EndingMarkProps {
  ending: EndingKind;
  atS: number;
  scaleS: number;
  /** The middle line. */
  y: number;
  height: number;
}

/** The ending, drawn: a button is a post, a ring-out three dots, a loop an open ring; a fade shows itself. */
export function EndingMark({ ending, atS, scaleS, y, height }: EndingMarkProps) {
  if (ending === "fade") return null;
  return (
    <svg aria-hidden overflow="visible" x={percent(atS, scaleS)} y={y}>
      {ending === "button" && <rect className="fill-ink" height={height} width="2.5" x="1" y={-height / 2} />}
      {ending === "ring-out" &&
        [1.5, 1.2, 0.9].map((radius, index) => (
          <circle className="fill-ink" cx={4 + index * 6} cy="0" key={radius} r={radius} />
        ))}
      {ending === "loop" && (
        <circle className="stroke-ink" cx="7" cy="0" fill="none" r="4" strokeWidth="1.5" />
      )}
    </svg>
  );
}

interface ChartAxisProps {
  seconds: number;
  scaleS: number;
  y: number;
  /** Where the axis begins, for a part of a recording. */
  fromS?: number;
}

/** A chart's graduated border. Give it 24 px from `y` for its labels. */
export function ChartAxis({ seconds, scaleS, y, fromS = 0 }: ChartAxisProps) {
  const { blockS, labelEvery } = axisSteps(scaleS);
  const blocks = Math.ceil(seconds / blockS - 1e-9);
  const starts = Array.from({ length: blocks }, (_, index) => index * blockS);
  const labels = starts.filter((_, index) => index % labelEvery === 0);
  const written = blockS < 1 || fromS % 1 !== 0 ? fmt.timeTenths : fmt.time;
  return (
    <g aria-hidden>
      <rect className="fill-page stroke-ink" height="5" width={percent(seconds, scaleS)} y={y + 0.5} />
      {starts.map((startS, index) =>
        index % 2 === 0 ? (
          <rect
            className="fill-ink"
            height="5"
            key={startS}
            width={percent(Math.min(blockS, seconds - startS), scaleS)}
            x={percent(startS, scaleS)}
            y={y + 0.5}
          />
        ) : null,
      )}
      {labels.map((labelS) => (
        <text
          className="fill-ink-soft"
          key={labelS}
          textAnchor={edgeAnchor(labelS / scaleS)}
          x={percent(labelS, scaleS)}
          y={y + 20}
        >
          {written(fromS + labelS)}
        </text>
      ))}
    </g>
  );
}
