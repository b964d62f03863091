"use client";

import { useEffect, useRef } from "react";
import { usePlayer } from "@/components/player/use-player";

/** The confidential recording, played low at first and only on a press; the site's player makes way for it. */
export function ReportedRecording({ noticeId, title }: { noticeId: string; title: string }) {
  const audio = useRef<HTMLAudioElement>(null);
  const player = usePlayer();
  useEffect(() => {
    if (audio.current) audio.current.volume = 0.25;
  }, []);
  return (
    // biome-ignore lint/a11y/useMediaCaption: a recording of music that is under examination has no captions.
    <audio
      aria-label={`The recording sent with ${title}`}
      className="w-full max-w-measure"
      controls
      onPlay={() => player.pause()}
      preload="none"
      ref={audio}
      src={`/api/reports/${noticeId}/recording`}
    />
  );
}
