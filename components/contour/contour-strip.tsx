import { cx } from "@/components/ui/cx";
import { fmt } from "@/components/ui/format";
import { ChartAxis, type EndingKind, EndingMark } from "./chart-marks";
import type { ContourData } from "./contour-data";
import { ContourShape } from "./contour-shape";

const ENDING_WORDS: Record<EndingKind, string> = {
  button: "ends on a button",
  "ring-out": "rings out",
  fade: "fades",
  loop: "loops",
};

interface ContourStripProps {
  data: ContourData;
  /** The recording's title or version: "Winter Timetable, bed". Begins the text equivalent. */
  label: string;
  /** Further words of the text equivalent: "A piano alone from 0:00, B cello enters at 0:27". */
  equivalent?: string;
  ending?: EndingKind | null;
  height?: number;
  /** Seconds that fill the width; give all strips of a list the same. */
  scaleS?: number;
  /** Leaves the room at the right that an open chart strip needs for its words. */
  gutter?: boolean;
  axis?: boolean;
  gain?: number;
  drawnForPx?: number;
  className?: string;
}

/** A still strip: measured contours, the ending drawn, and its text equivalent. Renders on the server. */
export function ContourStrip(props: ContourStripProps) {
  const { data, label, equivalent, ending, height = 32, scaleS = data.seconds, gutter, axis } = props;
  const words = [fmt.spokenTime(data.seconds), ...(ending ? [ENDING_WORDS[ending]] : [])].join(", ");
  const fullHeight = axis ? height + 28 : height;
  return (
    <div className={cx("pr-[18px]", gutter && "@wide:pr-[12.5rem]", props.className)}>
      <svg
        aria-label={`${label}: ${words}.${equivalent ? ` ${equivalent}` : ""}`}
        className="block w-full overflow-visible"
        height={fullHeight}
        role="img"
      >
        <ContourShape
          data={data}
          drawnForPx={props.drawnForPx ?? 760}
          gain={props.gain ?? 1}
          height={height}
          scaleS={scaleS}
        />
        {ending && (
          <EndingMark
            atS={data.seconds}
            ending={ending}
            height={Math.max(9, Math.min(16, height * 0.4))}
            scaleS={scaleS}
            y={height / 2}
          />
        )}
        {axis && <ChartAxis scaleS={scaleS} seconds={data.seconds} y={height + 4} />}
      </svg>
    </div>
  );
}

/** Seconds that fill the width of a list, so that its longest strip just fits. */
export function listScaleS(durationsS: readonly number[]): number {
  return Math.max(30, ...durationsS);
}
