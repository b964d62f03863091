import { percent } from "./axis";
import type { ContourData } from "./contour-data";
import { contourPaths } from "./contour-paths";

interface ContourShapeProps {
  data: ContourData;
  /** Seconds that fill the drawing's width. */
  scaleS: number;
  /** Where on the axis it begins. */
  atS?: number;
  fromS?: number;
  toS?: number;
  y?: number;
  height: number;
  /** The width the points are chosen for; the drawing itself is as wide as its place. */
  drawnForPx: number;
  gain?: number;
}

/** The three contours and their middle line, stretched to their place on a time axis. */
export function ContourShape(props: ContourShapeProps) {
  const { data, scaleS, atS = 0, fromS = 0, toS = data.seconds, y = 0, height, drawnForPx, gain = 1 } = props;
  const seconds = toS - fromS;
  const paths = contourPaths(data, { width: (drawnForPx * seconds) / scaleS, height, fromS, toS, gain });
  const edged = height >= 60;
  return (
    <svg
      aria-hidden
      height={height}
      overflow="visible"
      preserveAspectRatio="none"
      viewBox={`0 0 ${paths.viewWidth} ${paths.viewHeight}`}
      width={percent(seconds, scaleS)}
      x={percent(atS, scaleS)}
      y={y}
    >
      <path
        className="stroke-contour-edge"
        d={`M0 ${paths.viewHeight / 2}H${paths.viewWidth}`}
        fill="none"
        vectorEffect="non-scaling-stroke"
      />
      <path
        className="fill-shoal-2 stroke-contour-edge"
        d={paths.peak}
        strokeLinejoin="round"
        vectorEffect="non-scaling-stroke"
      />
      <path
        className={edged ? "fill-shoal-3 stroke-contour-edge" : "fill-shoal-3"}
        d={paths.rms}
        strokeWidth="0.8"
        vectorEffect="non-scaling-stroke"
      />
      <path className="fill-depth" d={paths.core} />
    </svg>
  );
}
