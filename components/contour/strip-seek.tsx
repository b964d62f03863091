"use client";

import { type KeyboardEvent, type ReactNode, useEffect, useRef } from "react";
import type { PlayerTrack } from "@/components/player/player-engine";
import { usePlayer, usePlayerEngine } from "@/components/player/use-player";
import { cx } from "@/components/ui/cx";
import { fmt } from "@/components/ui/format";
import { axisInstant, type CutPiece, versionInstant } from "./axis";
import { Playhead } from "./playhead";

interface StripSeekProps {
  track: PlayerTrack;
  label: string;
  durationS: number;
  /** Seconds that fill the width. */
  scaleS: number;
  pieces?: readonly CutPiece[] | undefined;
  /** Starts of sections, for page up and page down. */
  sectionStartsS?: readonly number[];
  className?: string;
  children: ReactNode;
  /** Leave the playhead to a layer above. */
  bare?: boolean;
  /** A docked strip does not count as the strip being in sight. */
  docked?: boolean;
}

const STEP_S = 5;

/** Where a key moves the position to, on the axis; null where it does not. */
export function keyTargetS(
  key: string,
  fromS: number,
  durationS: number,
  sectionStartsS: readonly number[],
): number | null {
  switch (key) {
    case "ArrowLeft":
    case "ArrowDown":
      return fromS - STEP_S;
    case "ArrowRight":
    case "ArrowUp":
      return fromS + STEP_S;
    case "Home":
      return 0;
    case "End":
      return durationS - STEP_S;
    case "PageUp":
      return sectionStartsS.filter((startS) => startS < fromS - 1).at(-1) ?? 0;
    case "PageDown":
      return sectionStartsS.find((startS) => startS > fromS + 0.1) ?? fromS;
    default:
      return null;
  }
}

/** Makes a drawn strip play: a press goes there, space plays and stops, arrows move. */
export function StripSeek(props: StripSeekProps) {
  const {
    track,
    label,
    durationS,
    scaleS,
    pieces,
    sectionStartsS = [],
    className,
    children,
    bare,
    docked,
  } = props;
  const { state, load, toggle, seek, positionS } = usePlayer();
  const box = useRef<HTMLDivElement>(null);
  const isLoaded = state.track?.id === track.id;
  const engine = usePlayerEngine();
  useEffect(() => {
    const strip = box.current;
    if (!strip || !isLoaded || docked) return;
    const id = Symbol("strip");
    const watch = new IntersectionObserver((entries) => {
      const latest = entries.at(-1);
      if (latest) engine.setSight(id, latest.isIntersecting);
    });
    watch.observe(strip);
    return () => {
      watch.disconnect();
      engine.setSight(id, null);
    };
  }, [engine, isLoaded, docked]);
  const positionNowS = isLoaded ? axisInstant(pieces, positionS()) : 0;

  const goTo = (axisS: number) => {
    const atS = versionInstant(pieces, Math.min(Math.max(0, axisS), durationS));
    if (isLoaded) seek(atS);
    else load(track, atS);
  };
  const press = (clientX: number) => {
    const edges = box.current?.getBoundingClientRect();
    if (!edges || edges.width === 0) return;
    const axisS = ((clientX - edges.left) / edges.width) * scaleS;
    if (axisS > durationS + 1) return;
    goTo(axisS);
    if (isLoaded && !state.isPlaying) toggle();
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.altKey || event.ctrlKey || event.metaKey) return;
    if (event.key === " " || event.key === "Enter") {
      event.preventDefault();
      if (isLoaded) toggle();
      else load(track, 0);
      return;
    }
    const toS = keyTargetS(event.key, axisInstant(pieces, positionS()), durationS, sectionStartsS);
    if (toS === null) return;
    event.preventDefault();
    goTo(toS);
  };

  return (
    <div
      aria-label={`Position in ${label}`}
      aria-valuemax={Math.round(durationS)}
      aria-valuemin={0}
      aria-valuenow={Math.round(positionNowS)}
      aria-valuetext={`${fmt.spokenTime(positionNowS)} of ${fmt.spokenTime(durationS)}, ${isLoaded && state.isPlaying ? "playing" : "stopped"}`}
      className={cx("relative cursor-pointer touch-pan-y", className)}
      onClick={(event) => press(event.clientX)}
      onKeyDown={onKeyDown}
      ref={box}
      role="slider"
      tabIndex={0}
    >
      {children}
      {!bare && isLoaded && <Playhead pieces={pieces} scaleS={scaleS} />}
    </div>
  );
}
