import type { ContourData } from "@/components/contour/contour-data";
import type { PlayerTrack } from "@/components/player/player-engine";
import { unpackContour } from "@/lib/audio/contour";
import type { FoundVersion } from "./find-types";

const unpacked = new Map<string, ContourData>();

/** A contour from the text it travels as; kept, so that a strip is unpacked once. */
export function contourOf(text: string | null, seconds: number): ContourData {
  if (text === null) return { seconds, binsPerSecond: 4, channels: [] };
  const kept = unpacked.get(text);
  if (kept) return kept;
  const contour = unpackContour(Uint8Array.from(atob(text), (letter) => letter.charCodeAt(0)));
  unpacked.set(text, contour);
  return contour;
}

export function trackOf(
  cue: { title: string; number: string; libraryName: string },
  version: FoundVersion,
  contour: string | null,
): PlayerTrack & { contour: ContourData } {
  return {
    id: version.recordingId,
    url: `/api/previews/${version.recordingId}`,
    title: cue.title,
    below: `${version.label}, from ${cue.libraryName}`,
    href: `/cues/${cue.number}`,
    durationS: version.durationS,
    contour: contourOf(contour, version.durationS),
  };
}
