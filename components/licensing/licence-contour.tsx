"use client";

import { useMemo } from "react";
import type { EndingKind } from "@/components/contour/chart-marks";
import { ContourStrip } from "@/components/contour/contour-strip";
import { PlayStrip } from "@/components/contour/play-strip";
import { unpackContour } from "@/lib/audio/contour";

const ENDINGS: Record<string, EndingKind> = {
  button: "button",
  "ring-out": "ring-out",
  fade: "fade",
  loop: "loop",
};

interface LicenceContourProps {
  packed: string;
  title: string;
  ending: string | null;
  /** Where the preview may be heard: pressed, the strip plays it. */
  recordingId?: string;
  height?: number;
}

/** The measured contours of the licensed recording. */
export function LicenceContour({ packed, title, ending, recordingId, height = 64 }: LicenceContourProps) {
  const contour = useMemo(
    () => unpackContour(Uint8Array.from(atob(packed), (letter) => letter.charCodeAt(0))),
    [packed],
  );
  const drawn = { ending: ending ? (ENDINGS[ending] ?? null) : null, height, drawnForPx: 420 };
  if (!recordingId) return <ContourStrip {...drawn} data={contour} label={title} />;
  return (
    <PlayStrip
      {...drawn}
      track={{
        id: recordingId,
        url: `/api/previews/${recordingId}`,
        title,
        below: "the licensed recording",
        durationS: contour.seconds,
        contour,
      }}
    />
  );
}
