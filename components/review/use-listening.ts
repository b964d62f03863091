"use client";

import { createContext, type RefObject, useContext, useEffect, useMemo, useRef, useState } from "react";
import { rememberedLevel, rememberLevel } from "@/components/player/player-engine";
import {
  buildListeningGraph,
  type ListeningGraph,
  type ListeningMode,
  type ListeningSide,
} from "./listening-graph";

export interface ListeningSource {
  /** Four channels: A left and right, then B left and right, aligned; the alteration undone. */
  url: string;
  /** The same stretch as delivered, where undoing changed anything. */
  asDeliveredUrl?: string | undefined;
  /** Brings B to A's level. */
  gainDb: number;
  durationS: number;
  /** Where in A the file begins. */
  startAS: number;
}

export interface ListeningState {
  isPlaying: boolean;
  mode: ListeningMode;
  side: ListeningSide;
  /** The number of the passage being repeated. */
  repeat: number | null;
  isUndone: boolean;
  level: number;
  problem: string | null;
}

export interface Repeated {
  number: number;
  aFromS: number;
  aToS: number;
}

interface Sounding {
  context: AudioContext;
  graph: ListeningGraph;
}

const FIRST: ListeningState = {
  isPlaying: false,
  mode: "either",
  side: "a",
  repeat: null,
  isUndone: true,
  level: 0.4,
  problem: null,
};

export interface Listening {
  state: ListeningState;
  audio: HTMLAudioElement | null;
  positionAS: () => number;
  seekA: (aS: number) => void;
  toggle: () => void;
  stop: () => void;
  choose: (mode: ListeningMode) => void;
  setLevel: (level: number) => void;
  repeatPassage: (passage: Repeated | null) => void;
  setUndone: (isUndone: boolean) => void;
}

export const ListeningContext = createContext<Listening | null>(null);

export function useListeningContext(): Listening {
  const listening = useContext(ListeningContext);
  if (!listening) throw new Error("ListeningLayer needs AlignedListening above it");
  return listening;
}

interface Attached {
  change: (part: Partial<ListeningState>) => void;
  sounding: RefObject<Sounding | null>;
  repeated: RefObject<Repeated | null>;
  startAS: number;
}

/** What the element's own events change; returns what takes it apart again. */
function attach(element: HTMLAudioElement, { change, sounding, repeated, startAS }: Attached): () => void {
  const off = new AbortController();
  const on = (name: string, run: () => void) => element.addEventListener(name, run, { signal: off.signal });
  on("play", () => change({ isPlaying: true, problem: null }));
  on("pause", () => change({ isPlaying: false }));
  on("ended", () => change({ isPlaying: false }));
  on("seeking", () => sounding.current?.graph.mute());
  on("seeked", () => sounding.current?.graph.fadeIn());
  on("playing", () => sounding.current?.graph.fadeIn());
  on("error", () => {
    if (element.getAttribute("src"))
      change({ isPlaying: false, problem: "The two recordings could not be read together." });
  });
  on("timeupdate", () => {
    const passage = repeated.current;
    if (passage && startAS + element.currentTime >= passage.aToS)
      element.currentTime = passage.aFromS - startAS;
  });
  return () => {
    off.abort();
    element.pause();
    element.removeAttribute("src");
    element.load();
    sounding.current?.graph.stop();
  };
}

/** Brings the file that is heard into the element, at the same instant. */
function useHeardFile(audio: HTMLAudioElement | null, heardUrl: string): void {
  useEffect(() => {
    if (!audio || audio.src === new URL(heardUrl, window.location.href).href) return;
    const atS = audio.currentTime;
    const wasPlaying = !audio.paused;
    audio.src = heardUrl;
    audio.addEventListener(
      "loadedmetadata",
      () => {
        audio.currentTime = atS;
        if (wasPlaying) void audio.play();
      },
      { once: true },
    );
  }, [audio, heardUrl]);
}

/** One audio element of four channels, and the graph that lets a person change between them at the same instant. */
export function useListening(source: ListeningSource): Listening {
  const { url, asDeliveredUrl, gainDb, durationS, startAS } = source;
  const [state, setState] = useState(FIRST);
  const [audio, setAudio] = useState<HTMLAudioElement | null>(null);
  const sounding = useRef<Sounding | null>(null);
  const latest = useRef(state);
  const repeated = useRef<Repeated | null>(null);
  const firstUrl = useRef(url);
  useEffect(() => {
    latest.current = state;
  });

  useEffect(() => {
    const element = new Audio();
    element.preload = "metadata";
    // A source before anybody sees the element: wavesurfer takes a source away that appears while it starts.
    element.src = firstUrl.current;
    setAudio(element);
    setState((now) => ({ ...now, level: rememberedLevel() }));
    const change: Attached["change"] = (part) => setState((now) => ({ ...now, ...part }));
    const detach = attach(element, { change, sounding, repeated, startAS });
    return () => {
      detach();
      void sounding.current?.context.close();
      sounding.current = null;
    };
  }, [startAS]);

  useHeardFile(audio, state.isUndone ? url : (asDeliveredUrl ?? url));

  return useMemo((): Listening => {
    const open = (element: HTMLAudioElement): Sounding => {
      if (sounding.current) return sounding.current;
      const context = new AudioContext({ latencyHint: "interactive" });
      const node = new MediaElementAudioSourceNode(context, { mediaElement: element });
      const graph = buildListeningGraph(context, node, gainDb);
      graph.output.connect(context.destination);
      graph.setLevel(latest.current.level);
      graph.setMode(latest.current.mode, latest.current.side);
      sounding.current = { context, graph };
      return sounding.current;
    };
    const play = () => {
      if (audio) void open(audio).context.resume();
      audio?.play().catch((cause: unknown) => {
        if (cause instanceof DOMException && cause.name === "AbortError") return;
        setState((now) => ({ ...now, problem: "The two recordings could not be played. Press again." }));
      });
    };
    const seekA = (aS: number) => {
      if (audio) audio.currentTime = Math.min(Math.max(0, aS - startAS), Math.max(0, durationS - 0.05));
    };
    return {
      state,
      audio,
      positionAS: () => startAS + (audio?.currentTime ?? 0),
      seekA,
      toggle: () => (audio && !audio.paused ? audio.pause() : play()),
      stop: () => audio?.pause(),
      choose: (mode) => {
        const flips = mode === "either" && state.mode === "either";
        const side =
          mode === "a" || mode === "b" ? mode : flips ? (state.side === "a" ? "b" : "a") : state.side;
        sounding.current?.graph.setMode(mode, side);
        setState((now) => ({ ...now, mode, side }));
      },
      setLevel: (level) => {
        sounding.current?.graph.setLevel(level);
        rememberLevel(level);
        setState((now) => ({ ...now, level }));
      },
      repeatPassage: (passage) => {
        repeated.current = passage;
        if (passage) seekA(passage.aFromS);
        setState((now) => ({ ...now, repeat: passage?.number ?? null }));
      },
      setUndone: (isUndone) => setState((now) => ({ ...now, isUndone })),
    };
  }, [state, audio, gainDb, durationS, startAS]);
}
