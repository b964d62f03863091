"use client";

import { ChartStrip } from "@/components/contour/chart-strip";
import type { FoundDetail } from "@/components/search/find-types";
import { trackOf } from "@/components/search/tracks";
import { fmt } from "@/components/ui/format";

interface CueChartProps {
  cue: { title: string; number: string; libraryName: string };
  detail: FoundDetail;
}

/** The chart of one cue with every version that can be heard beneath it. */
export function CueChart({ cue, detail }: CueChartProps) {
  const [head, ...others] = detail.versions;
  if (!head) return null;
  return (
    <ChartStrip
      head={{ track: trackOf(cue, head, head.contour), words: head.label, ending: head.ending }}
      people={`by ${fmt.list(detail.writers)}`}
      sections={detail.sections}
      versions={others
        .filter((version) => version.canBeHeard && version.contour !== null)
        .map((version) => ({
          track: trackOf(cue, version, version.contour),
          words: version.label,
          ending: version.ending,
          pieces: version.pieces ?? undefined,
          below: version.cutFrom ?? fmt.time(version.durationS),
        }))}
    />
  );
}
