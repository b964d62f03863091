import { percent } from "@/components/contour/axis";
import type { ContourData } from "@/components/contour/contour-data";
import { ContourShape } from "@/components/contour/contour-shape";
import { fmt } from "@/components/ui/format";

interface LengthChartProps {
  data: ContourData;
  nominalS: number;
  toleranceS: number;
}

const HEIGHT = 56;

/** The end of a cutdown against its slot: where it must end, and where it does. */
export function LengthChart({ data, nominalS, toleranceS }: LengthChartProps) {
  const lastS = Math.max(data.seconds, nominalS + toleranceS);
  const spanS = Math.max(1.5, Math.abs(data.seconds - nominalS) * 2 + 0.6);
  const fromS = Math.max(0, Math.min(data.seconds, nominalS) - spanS * 0.6);
  const toS = lastS + spanS * 0.06;
  const scaleS = toS - fromS;
  const at = (seconds: number) => percent(seconds - fromS, scaleS);
  const long = data.seconds > nominalS;
  const blocks = Array.from({ length: Math.floor(scaleS * 10) }, (_, index) => index / 10);
  const apart = Math.abs(data.seconds - nominalS) / scaleS;
  return (
    <svg
      aria-label={`It ends at ${data.seconds.toFixed(2)} seconds; the slot ends between ${(nominalS - toleranceS).toFixed(2)} and ${(nominalS + toleranceS).toFixed(2)} seconds.`}
      className="my-2.5 block w-full overflow-visible"
      height={HEIGHT + 34}
      role="img"
    >
      <rect
        className="fill-flat-1"
        height={HEIGHT + 8}
        width={percent(toleranceS * 2, scaleS)}
        x={at(nominalS - toleranceS)}
      />
      {long && (
        <rect
          className="fill-magenta-pale"
          height={HEIGHT}
          width={percent(Math.max(0, data.seconds - nominalS - toleranceS), scaleS)}
          x={at(nominalS + toleranceS)}
        />
      )}
      {fromS < data.seconds && (
        <ContourShape
          atS={0}
          data={data}
          drawnForPx={400}
          fromS={fromS}
          gain={gainOf(data, fromS)}
          height={HEIGHT - 6}
          scaleS={scaleS}
          toS={data.seconds}
          y={3}
        />
      )}
      {[nominalS - toleranceS, nominalS + toleranceS].map((edgeS) => (
        <line className="stroke-flat-2" key={edgeS} x1={at(edgeS)} x2={at(edgeS)} y1="0" y2={HEIGHT + 8} />
      ))}
      <line
        className="stroke-magenta"
        strokeWidth="2"
        x1={at(data.seconds)}
        x2={at(data.seconds)}
        y1="0"
        y2={HEIGHT + 8}
      />
      <rect className="fill-page stroke-ink" height="5" width="100%" y={HEIGHT + 8.5} />
      {blocks.map((startS, index) =>
        index % 2 === 0 ? (
          <rect
            className="fill-ink"
            height="5"
            key={startS}
            width={percent(0.1, scaleS)}
            x={percent(startS, scaleS)}
            y={HEIGHT + 8.5}
          />
        ) : null,
      )}
      <g aria-hidden className="text-small">
        {apart > 0.2 && (
          <text className="fill-ink" textAnchor="middle" x={at(nominalS)} y={HEIGHT + 30}>
            {`${nominalS} ± ${toleranceS}`}
          </text>
        )}
        <text
          className="fill-magenta font-strong"
          textAnchor={long ? "end" : "middle"}
          x={long ? "100%" : at(data.seconds)}
          y={HEIGHT + 30}
        >
          {fmt.seconds(data.seconds, 2)}
        </text>
        {long && (
          <text className="fill-ink-soft" x="0" y={HEIGHT + 30}>
            {fmt.seconds(fromS, 1)}
          </text>
        )}
      </g>
    </svg>
  );
}

/** A quiet tail is drawn larger, so that it can be seen at all. */
function gainOf(data: ContourData, fromS: number): number {
  const first = Math.floor(fromS * data.binsPerSecond);
  const loudest = Math.max(1, ...data.channels.flatMap((channel) => Array.from(channel.peak).slice(first)));
  return Math.min(4, 230 / loudest);
}
