"use client";

import { useMemo, useState } from "react";
import type { ContourData } from "@/components/contour/contour-data";
import { PassageChart } from "@/components/contour/passage-chart";
import type { ChartPassage } from "@/components/contour/passages";
import { AlignedListening } from "@/components/review/aligned-listening";
import { ListeningLayer } from "@/components/review/listening-layer";
import { Button } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Sentence } from "@/components/ui/sentence";
import { Title } from "@/components/ui/title";
import { unpackContour } from "@/lib/audio/contour";
import type { CaseGroupView, CaseView } from "@/lib/review";
import { alterationWords, referenceName } from "./case-sentence";
import { PassageTable } from "./passage-table";

type Hit = CaseGroupView["hits"][number];

function contourOf(packed: string | null): ContourData | undefined {
  return packed ? unpackContour(Uint8Array.from(atob(packed), (letter) => letter.charCodeAt(0))) : undefined;
}

const chartPassages = (hit: Hit): ChartPassage[] =>
  hit.passages.map((passage) => ({
    number: passage.number,
    aFromS: passage.startS,
    aToS: passage.endS,
    bFromS: passage.refStartS,
    bToS: passage.refEndS,
  }));

/** Two strips on one time axis, what lines up between them, and the means to hear it. */
export function CaseEvidence({ view }: { view: CaseView }) {
  const found = view.groups.flatMap((group) => group.hits.map((hit) => ({ group, hit })));
  const [hitId, setHitId] = useState(found[0]?.hit.id);
  const [number, setNumber] = useState(1);
  const current = found.find((entry) => entry.hit.id === hitId) ?? found[0];
  if (!current) return <NotCompared view={view} />;
  return (
    <div>
      {found.length > 1 && (
        <div className="mt-3 flex flex-wrap gap-2">
          {found.map((entry) => (
            <Button
              aria-pressed={entry.hit.id === current.hit.id}
              key={entry.hit.id}
              onClick={() => {
                setHitId(entry.hit.id);
                setNumber(1);
              }}
              size="small"
            >
              {versionOf(view, entry.hit)} and {entry.group.reference.title ?? entry.group.reference.words}
            </Button>
          ))}
        </div>
      )}
      <HitEvidence
        group={current.group}
        hit={current.hit}
        key={current.hit.id}
        number={number}
        onNumber={setNumber}
        view={view}
      />
    </div>
  );
}

const versionOf = (view: CaseView, hit: Hit) =>
  view.recordings.find((recording) => recording.id === hit.recordingId)?.versionRole ?? "A";

interface HitEvidenceProps {
  view: CaseView;
  group: CaseGroupView;
  hit: Hit;
  number: number;
  onNumber: (number: number) => void;
}

function HitEvidence({ view, group, hit, number, onNumber }: HitEvidenceProps) {
  const recording = view.recordings.find((candidate) => candidate.id === hit.recordingId);
  const dataA = useMemo(() => contourOf(recording?.contour ?? null), [recording]);
  const dataB = useMemo(() => contourOf(hit.reference?.contour ?? null), [hit]);
  const passages = chartPassages(hit);
  const selected = hit.passages.find((passage) => passage.number === number) ?? hit.passages[0];
  if (!recording || !selected) return null;
  const secondsB = hit.reference?.durationS ?? Math.max(...hit.passages.map((passage) => passage.refEndS));
  const scaleS = Math.max(recording.durationS, secondsB);
  const drawn = hit.reference?.wholeIsDrawn
    ? undefined
    : hit.passages.map((passage) => ({ fromS: Math.max(0, passage.refStartS), toS: passage.refEndS }));
  const render = (view.youDeclaredConflict ? null : selected.listening) as {
    startA?: number;
    durationS?: number;
    method?: string;
    differenceGain?: number;
    residualDb?: number;
  } | null;
  const chart = (layer: boolean) => (
    <PassageChart
      a={{
        seconds: recording.durationS,
        data: dataA,
        ending: endingOf(recording.ending),
        words: (
          <>
            <Title>{view.title}</Title>, {fmt.time(recording.durationS)}, from the deliverer
          </>
        ),
      }}
      b={{
        seconds: secondsB,
        data: dataB,
        drawn,
        words: (
          <>
            {referenceName(group)}, {fmt.time(secondsB)}
            {group.reference.title ? `, ${group.reference.words}` : ""}
          </>
        ),
      }}
      note="one time axis for both"
      passages={passages}
      selected={selected.number}
    >
      {layer && dataA && render && (
        <ListeningLayer
          data={dataA}
          fromS={render.startA ?? selected.startS}
          passages={passages}
          scaleS={scaleS}
          toS={(render.startA ?? selected.startS) + (render.durationS ?? selected.endS - selected.startS)}
        />
      )}
    </PassageChart>
  );
  return (
    <div className="mt-4">
      {render ? (
        <AlignedListening
          differenceWords={
            render.method === "tempo and pitch undone" ? "What differs in the spectra" : "What differs"
          }
          durationS={render.durationS ?? selected.endS - selected.startS}
          gainDb={
            render.method !== "tempo and pitch undone" && render.differenceGain && render.differenceGain > 0
              ? 20 * Math.log10(render.differenceGain)
              : 0
          }
          key={selected.id}
          passages={passages.filter((passage) => passage.number === selected.number)}
          residualClaim={residualWords(render)}
          startAS={render.startA ?? selected.startS}
          url={`/api/listening/${selected.id}`}
        >
          {chart(true)}
        </AlignedListening>
      ) : (
        <>
          {chart(false)}
          <Sentence className="mt-3" soft>
            {view.youDeclaredConflict
              ? "You declared a conflict of interest, so the recordings are not played to you."
              : listeningWords(selected.listeningState, hit.reversed)}
          </Sentence>
        </>
      )}
      <PassageTable hit={hit} onChoose={onNumber} selected={selected.number} />
      <NumbersInWords hit={hit} />
    </div>
  );
}

const endingOf = (ending: string): "button" | "ring-out" | null =>
  ending === "button" || ending === "ring-out" ? ending : null;

function residualWords(render: { method?: string; residualDb?: number }): string {
  if (render.method === "tempo and pitch undone")
    return "The tempo or pitch was changed on its own; undoing that does not bring the waveform back, so no null is claimed.";
  const level =
    render.residualDb === undefined
      ? ""
      : ` What differs is ${fmt.db(Math.abs(render.residualDb), 0)} below A.`;
  return `${render.method === "varispeed undone" ? "The change of speed is undone." : "Nothing had to be undone."}${level} Levels match within 0.5\u00a0LU and start low.`;
}

function listeningWords(state: string, reversed: boolean): string {
  if (reversed) return "It lines up played backwards; aligned listening is not offered for that.";
  if (state === "confidential") return "It is a confidential holding: nothing of it is heard here.";
  if (state === "impossible")
    return "The two could not be rendered side by side; the passages below say where they line up.";
  return "The listening file of this passage is being rendered; it comes by itself in a moment when you reload.";
}

function NumbersInWords({ hit }: { hit: Hit }) {
  const altered = alterationWords(hit);
  return (
    <Sentence className="mt-3" size="small" soft>
      Together {fmt.percent(hit.coverageRecording * 100)} of A and {fmt.percent(hit.coverageReference * 100)}{" "}
      of B.{" "}
      {altered
        ? `A runs ${altered} against B, the same in every passage.`
        : "Speed and pitch are the same in both."}{" "}
      Evidence {fmt.number(hit.evidence)} nats, {fmt.number(hit.evidence2)} against alignments on the beat.
      {hit.lowDistinctiveness &&
        " B agrees with itself almost as well at other places: a drone or a loop, so the evidence is weak."}
    </Sentence>
  );
}

function NotCompared({ view }: { view: CaseView }) {
  const recording = view.recordings[0];
  if (!recording) return null;
  return (
    <div className="mt-4">
      <Sentence>
        {recording.notComparable.length === 0
          ? "No other recording lines up with it."
          : `${fmt.seconds(
              recording.notComparable.reduce((total, span) => total + span.endS - span.startS, 0),
              0,
            )} of ${fmt.seconds(recording.durationS, 0)} could not be compared: ${fmt.list([...new Set(recording.notComparable.map((span) => span.reason))])}. That is “not comparable”, never “original”.`}
      </Sentence>
    </div>
  );
}
