"use client";

import { type ReactNode, useState } from "react";
import type { PlayerTrack } from "@/components/player/player-engine";
import { usePlayer, usePlayerEngine } from "@/components/player/use-player";
import { cx } from "@/components/ui/cx";
import { fmt } from "@/components/ui/format";
import { axisInstant, type CutPiece, percent, versionInstant } from "./axis";
import { ChartAxis, type EndingKind, EndingMark } from "./chart-marks";
import { type ChartSection, SectionLetters, SectionRules, SectionTable, Soundings } from "./chart-sections";
import type { ContourData } from "./contour-data";
import { ContourShape } from "./contour-shape";
import { Playhead } from "./playhead";
import { StripSeek } from "./strip-seek";
import { WaveLayer } from "./wave-layer";

export interface ChartVersion {
  track: PlayerTrack & { contour: ContourData };
  /** "full", "no piano", "60". */
  words: string;
  /** "cut from A, D to E, G" */
  below?: string | undefined;
  ending?: EndingKind | null | undefined;
  /** Where a cutdown's pieces come from on the head's axis; leave out for a version of the same length. */
  pieces?: readonly CutPiece[] | undefined;
}

interface ChartStripProps {
  head: ChartVersion;
  versions?: readonly ChartVersion[];
  sections?: readonly ChartSection[];
  /** Seconds that fill the width; the list's scale. */
  scaleS?: number;
  /** Above the head's words at the right: "by Ailsa Trevarrick-Moe". */
  people?: ReactNode;
  height?: number;
}

const VERSION_PX = 26;
const DRAWN_FOR_PX = 860;

function PieceMarks({ pieces, scaleS }: { pieces: readonly CutPiece[]; scaleS: number }) {
  return pieces.map((piece, index) => {
    const endS = piece.atS + piece.toS - piece.fromS;
    const next = pieces[index + 1];
    return (
      <g key={piece.atS}>
        {[piece.atS, endS].map((edgeS) => (
          <line
            className="stroke-ink"
            key={edgeS}
            x1={percent(edgeS, scaleS)}
            x2={percent(edgeS, scaleS)}
            y1="2"
            y2={VERSION_PX - 2}
          />
        ))}
        {next && (
          <line
            className="stroke-ink-soft"
            strokeDasharray="1 4"
            x1={percent(endS, scaleS)}
            x2={percent(next.atS, scaleS)}
            y1={VERSION_PX / 2}
            y2={VERSION_PX / 2}
          />
        )}
      </g>
    );
  });
}

function VersionDrawing({ version, scaleS }: { version: ChartVersion; scaleS: number }) {
  const { track, pieces, ending } = version;
  const shared = { data: track.contour, scaleS, height: VERSION_PX, drawnForPx: DRAWN_FOR_PX };
  return (
    <svg aria-hidden className="block w-full overflow-visible" height={VERSION_PX}>
      {pieces ? (
        <>
          {pieces.map((piece) => (
            <ContourShape {...shared} {...piece} key={piece.atS} />
          ))}
          <PieceMarks pieces={pieces} scaleS={scaleS} />
        </>
      ) : (
        <ContourShape {...shared} />
      )}
      {ending && !pieces && (
        <EndingMark atS={track.durationS} ending={ending} height={11} scaleS={scaleS} y={VERSION_PX / 2} />
      )}
    </svg>
  );
}

/** The playing cue, open in place: sections, contours, soundings, its versions on the same axis, the graduated border. */
export function ChartStrip(props: ChartStripProps) {
  const {
    head,
    versions = [],
    sections = [],
    scaleS = props.head.track.durationS,
    people,
    height = 112,
  } = props;
  const { state, load, positionS } = usePlayer();
  const engine = usePlayerEngine();
  const [isDrawn, setDrawn] = useState(false);
  const all = [head, ...versions];
  const active = all.find((version) => version.track.id === state.track?.id);
  const isHeadActive = active === head;
  const startsS = sections.map((section) => section.fromS);

  const play = (version: ChartVersion) => {
    const axisS = active ? axisInstant(active.pieces, positionS()) : 0;
    load(version.track, versionInstant(version.pieces, axisS));
  };
  const words = (version: ChartVersion) => {
    const isActive = version === active;
    const doing = isActive && state.isPlaying ? ", playing" : "";
    return (
      <span className="relative flex w-fit flex-wrap items-baseline gap-x-2 @max-wide:bg-page @max-wide:pr-2 @wide:absolute @wide:top-1/2 @wide:left-[calc(100%+22px)] @wide:w-44 @wide:-translate-y-1/2">
        <button
          aria-pressed={isActive}
          className={cx("min-h-6 text-left", isActive ? "font-label" : "link")}
          onClick={() => play(version)}
          type="button"
        >
          {version.words}
          {doing}
        </button>
        <span className="text-small text-ink-soft">
          {version === head
            ? isActive && "space plays and stops"
            : (version.below ?? fmt.time(version.track.durationS))}
        </span>
      </span>
    );
  };

  return (
    <div className="pr-[18px] @wide:pr-[12.5rem]">
      <div className="relative">
        <SectionRules scaleS={scaleS} sections={sections} />
        <SectionLetters scaleS={scaleS} sections={sections} />
        {people && (
          <p className="relative w-fit text-small text-ink-soft @max-wide:mb-1 @max-wide:bg-page @max-wide:pr-2 @wide:absolute @wide:top-0 @wide:left-[calc(100%+22px)] @wide:w-44">
            {people}
          </p>
        )}
        <div className="relative">
          {words(head)}
          <StripSeek
            bare
            durationS={head.track.durationS}
            label={`${head.track.title}, ${head.words}`}
            scaleS={scaleS}
            sectionStartsS={startsS}
            track={head.track}
          >
            <svg aria-hidden className="block w-full overflow-visible" height={height}>
              {!(isHeadActive && isDrawn) && (
                <ContourShape
                  data={head.track.contour}
                  drawnForPx={DRAWN_FOR_PX}
                  height={height}
                  scaleS={scaleS}
                />
              )}
              {head.ending && (
                <EndingMark
                  atS={head.track.durationS}
                  ending={head.ending}
                  height={16}
                  scaleS={scaleS}
                  y={height / 2}
                />
              )}
            </svg>
            {isHeadActive && engine.audio && (
              <WaveLayer
                data={head.track.contour}
                height={height}
                media={engine.audio}
                onDrawn={() => setDrawn(true)}
                scaleS={scaleS}
              />
            )}
          </StripSeek>
        </div>
        <div className="relative">
          <Soundings scaleS={scaleS} sections={sections} />
          {sections.some((section) => typeof section.lufs === "number") && (
            <p className="relative w-fit text-small text-ink-soft @max-wide:bg-page @max-wide:pr-2 @wide:absolute @wide:top-[3px] @wide:left-[calc(100%+22px)] @wide:w-44">
              soundings in LUFS, by section
            </p>
          )}
        </div>
        {versions.map((version) => (
          <div className="relative mt-1" key={version.track.id}>
            {words(version)}
            <StripSeek
              bare
              durationS={head.track.durationS}
              label={`${version.track.title}, ${version.words}`}
              pieces={version.pieces}
              scaleS={scaleS}
              sectionStartsS={startsS}
              track={version.track}
            >
              <VersionDrawing scaleS={scaleS} version={version} />
            </StripSeek>
          </div>
        ))}
        <svg aria-hidden className="mt-1 block h-7 w-full overflow-visible">
          <ChartAxis scaleS={scaleS} seconds={head.track.durationS} y={0} />
        </svg>
        {active && (
          <div className="pointer-events-none absolute inset-x-0 top-[21px] bottom-[22px]">
            <Playhead labelled pieces={active.pieces} scaleS={scaleS} />
          </div>
        )}
      </div>
      {sections.length > 0 && (
        <div className="mt-2 text-small">
          <SectionTable sections={sections} title={head.track.title} />
        </div>
      )}
    </div>
  );
}
