"use client";

import type { PlayerTrack } from "@/components/player/player-engine";
import { cx } from "@/components/ui/cx";
import { type EndingKind, EndingMark } from "./chart-marks";
import type { ContourData } from "./contour-data";
import { ContourShape } from "./contour-shape";
import { StripSeek } from "./strip-seek";

interface PlayStripProps {
  track: PlayerTrack & { contour: ContourData };
  ending?: EndingKind | null;
  height?: number;
  scaleS?: number;
  gutter?: boolean;
  drawnForPx?: number;
  className?: string;
}

/** A strip in a row that plays when it is pressed. */
export function PlayStrip(props: PlayStripProps) {
  const {
    track,
    ending,
    height = 32,
    scaleS = props.track.durationS,
    gutter,
    drawnForPx = 760,
    className,
  } = props;
  return (
    <div className={cx("pr-[18px]", gutter && "@wide:pr-[12.5rem]", className)}>
      <StripSeek
        durationS={track.durationS}
        label={track.below ? `${track.title}, ${track.below}` : track.title}
        scaleS={scaleS}
        track={track}
      >
        <svg aria-hidden className="block w-full overflow-visible" height={height}>
          <ContourShape data={track.contour} drawnForPx={drawnForPx} height={height} scaleS={scaleS} />
          {ending && (
            <EndingMark
              atS={track.durationS}
              ending={ending}
              height={Math.max(9, Math.min(16, height * 0.4))}
              scaleS={scaleS}
              y={height / 2}
            />
          )}
        </svg>
      </StripSeek>
    </div>
  );
}
