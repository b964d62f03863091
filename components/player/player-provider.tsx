"use client";

import { type ReactNode, useEffect, useRef, useState } from "react";
import { fmt } from "@/components/ui/format";
import { useKeys } from "@/components/ui/keys";
import { FootDock } from "./dock";
import { PlayerEngine } from "./player-engine";
import { EngineContext, usePlayer } from "./use-player";

const SKIP_S = 5;

/** Once, in the root layout, inside UiProvider: one player follows the person through the site. */
export function PlayerProvider({ children }: { children: ReactNode }) {
  const [engine] = useState(() => new PlayerEngine());
  const audio = useRef<HTMLAudioElement>(null);
  useEffect(() => (audio.current ? engine.attach(audio.current) : undefined), [engine]);
  return (
    <EngineContext value={engine}>
      {children}
      {/* biome-ignore lint/a11y/useMediaCaption: instrumental previews; every strip has a text equivalent */}
      <audio className="hidden" preload="metadata" ref={audio} />
      <PlayerKeys />
      <FootDock />
    </EngineContext>
  );
}

function PlayerKeys() {
  const { state, toggle, seek, positionS } = usePlayer();
  const skip = (byS: number) => () => seek(positionS() + byS);
  useKeys(
    "Listening",
    [
      { key: " ", does: state.isPlaying ? "stops" : "plays", run: toggle },
      { key: "ArrowLeft", does: `goes back ${fmt.seconds(SKIP_S, 0)}`, run: skip(-SKIP_S) },
      { key: "ArrowRight", does: `goes on ${fmt.seconds(SKIP_S, 0)}`, run: skip(SKIP_S) },
    ],
    state.track !== null,
  );
  return null;
}
