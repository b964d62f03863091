"use client";

import { createContext, useContext, useEffect, useRef, useSyncExternalStore } from "react";
import { IDLE, type PlayerEngine, type PlayerState } from "./player-engine";

export const EngineContext = createContext<PlayerEngine | null>(null);

export function usePlayerEngine(): PlayerEngine {
  const engine = useContext(EngineContext);
  if (!engine) throw new Error("usePlayer needs PlayerProvider above it");
  return engine;
}

export interface Player
  extends Pick<PlayerEngine, "load" | "toggle" | "play" | "pause" | "seek" | "setLevel" | "close"> {
  state: PlayerState;
  /** The position now; it does not re-render as it moves. Use usePlayerPosition to follow it. */
  positionS: () => number;
}

export function usePlayer(): Player {
  const engine = usePlayerEngine();
  const state = useSyncExternalStore(engine.subscribe, engine.getState, () => IDLE);
  const { load, toggle, play, pause, seek, setLevel, close } = engine;
  return { state, load, toggle, play, pause, seek, setLevel, close, positionS: () => engine.positionS };
}

/** Calls `follow` with the position on every frame while playing, and once after a seek or a stop. */
export function usePlayerPosition(follow: (positionS: number) => void, enabled = true): void {
  const engine = usePlayerEngine();
  const latest = useRef(follow);
  useEffect(() => {
    latest.current = follow;
  });
  useEffect(() => {
    if (!enabled) return;
    let frame = 0;
    const tell = () => latest.current(engine.positionS);
    const run = () => {
      tell();
      frame = engine.state.isPlaying ? requestAnimationFrame(run) : 0;
    };
    const wake = () => {
      cancelAnimationFrame(frame);
      run();
    };
    wake();
    const off = engine.subscribe(wake);
    const audio = engine.audio;
    audio?.addEventListener("seeked", wake);
    return () => {
      cancelAnimationFrame(frame);
      off();
      audio?.removeEventListener("seeked", wake);
    };
  }, [engine, enabled]);
}
