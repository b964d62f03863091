"use client";

import { useRef } from "react";
import { usePlayerPosition } from "@/components/player/use-player";
import { fmt } from "@/components/ui/format";
import { axisInstant, type CutPiece, edgeAnchor, percent } from "./axis";

interface PlayheadProps {
  scaleS: number;
  pieces?: readonly CutPiece[] | undefined;
  /** Writes the time above the head; leave 20 px there. */
  labelled?: boolean;
}

/** The playhead: 2 px with a small head and a 1 px casing, over whatever stands in its positioned parent. */
export function Playhead({ scaleS, pieces, labelled }: PlayheadProps) {
  const head = useRef<SVGSVGElement>(null);
  const time = useRef<SVGTextElement>(null);
  usePlayerPosition((positionS) => {
    const axisS = axisInstant(pieces, positionS);
    head.current?.setAttribute("x", percent(axisS, scaleS));
    if (!time.current) return;
    time.current.textContent = fmt.time(positionS);
    time.current.setAttribute("text-anchor", edgeAnchor(axisS / scaleS));
  });
  return (
    <svg aria-hidden className="pointer-events-none absolute inset-0 size-full overflow-visible">
      <svg aria-hidden overflow="visible" ref={head} x="0">
        <line className="stroke-page" strokeWidth="4" y1="0" y2="100%" />
        <line className="stroke-magenta" strokeWidth="2" y1="0" y2="100%" />
        <path className="fill-magenta stroke-page" d="M-6.5-2.5H6.5L0 8.5Z" />
        {labelled && (
          <text className="case-page fill-magenta font-label" ref={time} textAnchor="middle" y="-6" />
        )}
      </svg>
    </svg>
  );
}
