"use client";

import { useEffect, useRef } from "react";
import { edgeAnchor, percent } from "@/components/contour/axis";
import type { ContourData } from "@/components/contour/contour-data";
import { PASSAGE_PX } from "@/components/contour/passage-measures";
import { type ChartPassage, referenceInstant } from "@/components/contour/passages";
import { WaveLayer } from "@/components/contour/wave-layer";
import { fmt } from "@/components/ui/format";
import { useListeningContext } from "./use-listening";

interface ListeningLayerProps {
  passages: readonly ChartPassage[];
  /** The longer of the two recordings, as PassageChart has it. */
  scaleS: number;
  /** A's contour, and the stretch of it that is heard. */
  data: ContourData;
  fromS: number;
  toS: number;
}

const { topPx, stripPx, bTopPx: B_TOP, bottomPx: BOTTOM, heightPx } = PASSAGE_PX;
const STROKES = [
  { className: "stroke-page", strokeWidth: 4 },
  { className: "stroke-magenta", strokeWidth: 2 },
];

/** The playhead over both strips of a case; a press or a drag on A's strip goes there. */
export function ListeningLayer({ passages, scaleS, data, fromS, toS }: ListeningLayerProps) {
  const { audio, positionAS, state } = useListeningContext();
  const drawing = useRef<SVGSVGElement>(null);

  useEffect(() => {
    let frame = 0;
    const place = () => {
      const svg = drawing.current;
      if (!svg) return;
      const aS = positionAS();
      const bS = referenceInstant(passages, aS);
      const xa = percent(aS, scaleS);
      const xb = bS === null ? xa : percent(bS, scaleS);
      for (const line of svg.querySelectorAll("[data-at]")) {
        const [first, second] = (line.getAttribute("data-at") ?? "aa").split("");
        line.setAttribute(line.tagName === "line" ? "x1" : "x", first === "a" ? xa : xb);
        if (line.tagName === "line") line.setAttribute("x2", second === "a" ? xa : xb);
      }
      svg.dataset.paired = String(bS !== null);
      const label = svg.querySelector("[data-time]");
      if (!label) return;
      label.textContent = fmt.timeTenths(aS);
      label.setAttribute("text-anchor", edgeAnchor(aS / scaleS));
    };
    const run = () => {
      place();
      frame = state.isPlaying ? requestAnimationFrame(run) : 0;
    };
    run();
    audio?.addEventListener("seeked", place);
    return () => {
      cancelAnimationFrame(frame);
      audio?.removeEventListener("seeked", place);
    };
  }, [audio, positionAS, passages, scaleS, state.isPlaying]);

  return (
    <>
      {audio && (
        <div className="absolute inset-x-0 cursor-pointer" style={{ top: topPx, height: stripPx }}>
          <WaveLayer
            data={data}
            fromS={fromS}
            height={stripPx}
            media={audio}
            scaleS={scaleS}
            toS={toS}
            undrawn
          />
        </div>
      )}
      <svg
        aria-hidden
        className="group pointer-events-none absolute inset-x-0 top-0 block w-full overflow-visible"
        height={heightPx}
        ref={drawing}
      >
        {STROKES.map((stroke) => (
          <g key={stroke.className} {...stroke}>
            <line data-at="aa" y1={topPx - 4} y2={topPx + stripPx} />
            <g className="group-data-[paired=false]:hidden">
              <line data-at="ab" y1={topPx + stripPx} y2={B_TOP} />
              <line data-at="bb" y1={B_TOP} y2={BOTTOM + 4} />
            </g>
          </g>
        ))}
        <svg aria-hidden data-at="aa" overflow="visible" y={topPx - 5}>
          <path className="fill-magenta stroke-page" d="M-6.5-1H6.5L0 10Z" />
          <text className="case-page fill-magenta font-label" data-time textAnchor="middle" y="-5" />
        </svg>
        <g className="group-data-[paired=false]:hidden">
          <svg aria-hidden data-at="bb" overflow="visible" y={BOTTOM + 5}>
            <path className="fill-magenta stroke-page" d="M-6.5 1H6.5L0-10Z" />
          </svg>
        </g>
      </svg>
    </>
  );
}
