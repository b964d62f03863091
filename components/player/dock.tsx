"use client";

import Link from "next/link";
import { useRef, useSyncExternalStore } from "react";
import { ContourShape } from "@/components/contour/contour-shape";
import { StripSeek } from "@/components/contour/strip-seek";
import { Button } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Problem } from "@/components/ui/problem";
import { Title } from "@/components/ui/title";
import type { PlayerTrack } from "./player-engine";
import { usePlayer, usePlayerPosition } from "./use-player";

let openPlaces = 0;
const listeners = new Set<() => void>();

/** Counts the working tables on screen, so that the strip at the foot knows when it is needed on a wide one. */
export const dockPlaces = {
  open(): () => void {
    openPlaces += 1;
    for (const listener of listeners) listener();
    return () => {
      openPlaces -= 1;
      for (const listener of listeners) listener();
    };
  },
  subscribe(listener: () => void): () => void {
    listeners.add(listener);
    return () => listeners.delete(listener);
  },
};

function Clock({ track }: { track: PlayerTrack }) {
  const text = useRef<HTMLSpanElement>(null);
  usePlayerPosition((positionS) => {
    if (text.current) text.current.textContent = fmt.time(positionS);
  });
  return (
    <span className="figures text-small">
      <span className="text-magenta" ref={text}>
        0:00
      </span>{" "}
      of {fmt.time(track.durationS)}
    </span>
  );
}

export function LevelControl({ id }: { id: string }) {
  const { state, setLevel } = usePlayer();
  return (
    <label className="flex min-h-6 items-center gap-2 text-small" htmlFor={id}>
      Level
      <input
        className="h-6 w-24 cursor-pointer accent-depth"
        id={id}
        max={1}
        min={0}
        onChange={(event) => setLevel(event.target.valueAsNumber)}
        step={0.05}
        type="range"
        value={state.level}
      />
    </label>
  );
}

function DockedTrack({ track, place }: { track: PlayerTrack; place: "table" | "foot" }) {
  const { state, toggle, close } = usePlayer();
  const title = <Title lang={track.titleLang}>{track.title}</Title>;
  return (
    <>
      <div className="flex items-baseline justify-between gap-3">
        <p className="min-w-0 truncate">
          {track.href ? (
            <Link className="link target" href={track.href}>
              {title}
            </Link>
          ) : (
            title
          )}
          {track.below && <span className="text-small text-ink-soft"> {track.below}</span>}
        </p>
        <Clock track={track} />
      </div>
      <StripSeek
        docked
        className="my-1 h-7"
        durationS={track.durationS}
        label={track.title}
        scaleS={track.durationS}
        track={track}
      >
        <svg aria-hidden className="block w-full overflow-visible" height="28">
          {track.contour ? (
            <ContourShape data={track.contour} drawnForPx={320} height={28} scaleS={track.durationS} />
          ) : (
            <line className="stroke-contour-edge" x2="100%" y1="14" y2="14" />
          )}
        </svg>
      </StripSeek>
      <div className="flex items-center gap-4">
        <Button onClick={toggle} size="small">
          {state.isPlaying ? "Stop" : "Play"}
        </Button>
        <LevelControl id={`level-${place}`} />
        <span className="ml-auto">
          <Button kind="quiet" onClick={close}>
            Put away
          </Button>
        </span>
      </div>
      {state.problem && <Problem live>{state.problem}</Problem>}
    </>
  );
}

/** The playing strip, docked: shown once its own strip is out of sight. */
export function Dock({ place }: { place: "table" | "foot" }) {
  const { state } = usePlayer();
  const places = useSyncExternalStore(
    dockPlaces.subscribe,
    () => openPlaces,
    () => 0,
  );
  if (!state.track || (state.isStripInSight && !state.problem)) return null;
  if (place === "table") {
    return (
      <section
        aria-label="Player"
        className="sticky top-0 z-10 hidden border-b-[1.5px] border-buff-2 bg-buff-1 px-7 py-3 lg:block"
      >
        <DockedTrack place={place} track={state.track} />
      </section>
    );
  }
  return (
    <section
      aria-label="Player"
      className={`sticky bottom-0 z-30 border-t border-ink bg-page px-4 py-2 sm:px-6 lg:px-10 ${places > 0 ? "lg:hidden" : ""}`}
    >
      <DockedTrack place={place} track={state.track} />
    </section>
  );
}

export function FootDock() {
  return <Dock place="foot" />;
}
