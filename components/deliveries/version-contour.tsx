"use client";

import { useMemo } from "react";
import type { ContourData } from "@/components/contour/contour-data";
import { ContourStrip } from "@/components/contour/contour-strip";
import { PlayStrip } from "@/components/contour/play-strip";
import { unpackContour } from "@/lib/audio/contour";
import { ENDING_KINDS, roleHead } from "./version-words";
import type { VersionOnWire } from "./wire";

export function useContour(packed: string | null): ContourData | null {
  return useMemo(
    () => (packed ? unpackContour(Uint8Array.from(atob(packed), (letter) => letter.charCodeAt(0))) : null),
    [packed],
  );
}

interface VersionContourProps {
  version: VersionOnWire;
  title: string;
  ending: string | null;
  scaleS: number;
  height?: number;
  /** Who may hear it: the deliverer and the library, once it is a recording. */
  playable: boolean;
}

/** The measured contour of one version; pressed, it plays the deliverer's own file. */
export function VersionContour({
  version,
  title,
  ending,
  scaleS,
  height = 40,
  playable,
}: VersionContourProps) {
  const contour = useContour(version.contour);
  if (!contour) return null;
  const drawnEnding = ending ? (ENDING_KINDS[ending] ?? null) : null;
  const shared = { ending: drawnEnding, height, scaleS, drawnForPx: 620 };
  if (!playable || !version.recordingId)
    return <ContourStrip {...shared} data={contour} label={`${title}, ${roleHead(version.versionRole)}`} />;
  return (
    <PlayStrip
      {...shared}
      track={{
        id: version.recordingId,
        url: `/api/previews/${version.recordingId}`,
        title,
        below: roleHead(version.versionRole).toLowerCase(),
        durationS: contour.seconds,
        contour,
      }}
    />
  );
}
