"use client";

import { useQuery } from "@tanstack/react-query";
import { useRef } from "react";
import { ChartStrip } from "@/components/contour/chart-strip";
import { PlayStrip } from "@/components/contour/play-strip";
import { usePlayer } from "@/components/player/use-player";
import { Button, TextLink } from "@/components/ui/button";
import { cx } from "@/components/ui/cx";
import { cueFacts, fmt } from "@/components/ui/format";
import { Title } from "@/components/ui/title";
import type { FoundCue, FoundDetail } from "./find-types";
import { trackOf } from "./tracks";

interface CueRowProps {
  cue: FoundCue;
  /** Seconds that fill the width, the same in the whole list. */
  scaleS: number;
  /** Puts a version on the shortlist in use; without one there is no such button. */
  shortlist?: ((recordingId: string, title: string) => void) | undefined;
  isShortlisted: boolean;
  /** "episode 4": what an exact price is for. */
  priceFor: string | null;
}

/** "no drums, bed and stems": the other versions, stems as one. */
function alsoWords(cue: FoundCue): string[] {
  const others = cue.versions.slice(1);
  const plain = others.filter((version) => !version.role.startsWith("stem:"));
  const hasStems = plain.length < others.length;
  return [...plain.map((version) => version.label), ...(hasStems ? ["stems"] : [])];
}

/** One result: facts and reason as sentences, its strip; while it plays, open in place into the chart. */
export function CueRow({ cue, scaleS, shortlist, isShortlisted, priceFor }: CueRowProps) {
  const { state, load } = usePlayer();
  const [head] = cue.versions;
  const playing = cue.versions.find((version) => version.recordingId === state.track?.id);
  const isOpen = playing !== undefined;
  if (!head) return null;
  const facts = cueFacts({
    durationS: cue.durationS,
    bpm: cue.bpm,
    musicalKey: cue.musicalKey,
    ending: head.ending,
    also: alsoWords(cue),
  });
  return (
    <li
      className={cx(
        "border-t py-2.5",
        isOpen
          ? "-mx-4 border-y border-ink px-4 sm:-mx-6 sm:px-6 lg:-mx-10 lg:px-10 [&+li]:border-t-0"
          : "border-line",
      )}
      data-cue={cue.number}
    >
      <div className="mb-1 grid gap-x-8 @wide:grid-cols-[minmax(0,55fr)_minmax(0,42fr)] @wide:justify-between">
        <p>
          <TextLink className="text-lead no-underline hover:underline" href={`/cues/${cue.number}`}>
            <Title className="text-head">{cue.title}</Title>
          </TextLink>
          , from {cue.libraryName}. {facts} <Price cue={cue} priceFor={priceFor} />
        </p>
        <p className="text-ink-soft">
          {cue.verdict && <b className="font-label text-ink">{cue.verdict} </b>}
          {cue.why}
          {shortlist && (
            <>
              {" "}
              <Button
                className="whitespace-nowrap text-ink"
                disabled={isShortlisted}
                kind="quiet"
                onClick={() => shortlist((playing ?? head).recordingId, cue.title)}
              >
                {isShortlisted
                  ? "On the shortlist"
                  : playing && playing !== head
                    ? `Shortlist the ${playing.label}`
                    : "Shortlist it"}
              </Button>
            </>
          )}
        </p>
      </div>
      {isOpen ? (
        <OpenCue cue={cue} scaleS={scaleS} />
      ) : head.canBeHeard ? (
        <PlayStrip ending={head.ending} gutter scaleS={scaleS} track={trackOf(cue, head, cue.contour)} />
      ) : (
        <p className="text-small text-ink-soft">
          Its preview is being made; it can be heard in a few minutes.
        </p>
      )}
      {isOpen && cue.opensS !== null && (
        <p className="mt-1 text-small">
          <Button kind="quiet" onClick={() => load(trackOf(cue, head, cue.contour), cue.opensS ?? 0)}>
            Hear it from {fmt.time(cue.opensS)}, where it opens
          </Button>
        </p>
      )}
    </li>
  );
}

function Price({ cue, priceFor }: { cue: FoundCue; priceFor: string | null }) {
  const { price } = cue;
  if (price.kind === "exact")
    return (
      <span>
        <b className="font-label">{price.text}</b>
        {priceFor ? ` for ${priceFor.replace(/ (?=\d)/, "\u00a0")}.` : "."}
      </span>
    );
  if (price.kind === "from") return <span className="whitespace-nowrap">{price.sentence}.</span>;
  return price.sentence ? <span className="text-ink-soft">{price.sentence}</span> : null;
}

async function readDetail(number: string): Promise<FoundDetail> {
  const answer = await fetch(`/api/cues/${number}`);
  if (!answer.ok) throw new Error("its versions could not be read");
  return (await answer.json()) as FoundDetail;
}

/** The chart of the playing cue; its versions and soundings come when it opens. */
function OpenCue({ cue, scaleS }: { cue: FoundCue; scaleS: number }) {
  const place = useRef<HTMLDivElement>(null);
  const { data } = useQuery({
    queryKey: ["cue", cue.number],
    queryFn: () => readDetail(cue.number),
    staleTime: 300_000,
  });
  const [head, ...others] = data?.versions ?? cue.versions.map((version) => ({ ...version, contour: null }));
  if (!head) return null;
  return (
    <div ref={place}>
      <ChartStrip
        head={{
          track: trackOf(cue, head, head.contour ?? cue.contour),
          words: head.label,
          ending: head.ending,
        }}
        people={`by ${fmt.list(cue.writers)}`}
        scaleS={scaleS}
        sections={(data?.sections ?? []).map((section) => ({ ...section }))}
        versions={others
          .filter((version) => version.canBeHeard && version.contour !== null)
          .map((version) => ({
            track: trackOf(cue, version, version.contour),
            words: version.label,
            ending: version.ending,
            pieces: "pieces" in version ? (version.pieces ?? undefined) : undefined,
            below: "cutFrom" in version && version.cutFrom ? version.cutFrom : fmt.time(version.durationS),
          }))}
      />
      {data === undefined && <p className="mt-1 text-small text-ink-soft">Reading its versions.</p>}
    </div>
  );
}
