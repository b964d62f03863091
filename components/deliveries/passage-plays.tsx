"use client";

import { usePlayer } from "@/components/player/use-player";
import { fmt } from "@/components/ui/format";
import { useContour } from "./version-contour";
import { roleHead } from "./version-words";
import type { VersionOnWire } from "./wire";

interface PassagePlaysProps {
  version: VersionOnWire;
  title: string;
  passages: readonly { startS: number; endS: number }[];
  playable: boolean;
}

const SHOWN = 12;

/** Places in the deliverer's own file, each of which plays from its start. */
export function PassagePlays({ version, title, passages, playable }: PassagePlaysProps) {
  const { load } = usePlayer();
  const contour = useContour(version.contour);
  const { recordingId } = version;
  const shown = passages.slice(0, SHOWN);
  const rest = passages.length - shown.length;
  return (
    <ul className="flex flex-wrap gap-x-4 gap-y-1">
      {shown.map((passage) => (
        <li key={`${passage.startS}:${passage.endS}`}>
          {playable && recordingId && contour ? (
            <button
              className="link min-h-6"
              onClick={() =>
                load(
                  {
                    id: recordingId,
                    url: `/api/previews/${recordingId}`,
                    title,
                    below: roleHead(version.versionRole).toLowerCase(),
                    durationS: contour.seconds,
                    contour,
                  },
                  passage.startS,
                )
              }
              type="button"
            >
              Play {fmt.spanTenths(passage.startS, passage.endS)}
            </button>
          ) : (
            fmt.spanTenths(passage.startS, passage.endS)
          )}
        </li>
      ))}
      {rest > 0 && <li className="text-ink-soft">and {fmt.count(rest, "more place", "more places")}</li>}
    </ul>
  );
}
