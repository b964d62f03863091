"use client";

import type { ReactNode } from "react";
import type { ChartPassage } from "@/components/contour/passages";
import { usePlayer } from "@/components/player/use-player";
import { cx } from "@/components/ui/cx";
import { fmt } from "@/components/ui/format";
import { type KeyBinding, useKeys } from "@/components/ui/keys";
import { KeyCap } from "@/components/ui/keys-help";
import { Problem } from "@/components/ui/problem";
import type { ListeningMode } from "./listening-graph";
import { type Listening, ListeningContext, type ListeningSource, useListening } from "./use-listening";

interface AlignedListeningProps extends ListeningSource {
  passages: readonly ChartPassage[];
  /** What is claimed of the difference: "With the alteration undone, what differs is 19 dB below A." */
  residualClaim: string;
  /** A difference of waveforms, or of aligned spectra; absent where no difference is offered. */
  differenceWords?: string | undefined;
  /** The PassageChart, with a ListeningLayer in it. */
  children?: ReactNode;
}

const MODES: readonly { key: string; mode: ListeningMode; words: string }[] = [
  { key: "1", mode: "a", words: "A" },
  { key: "2", mode: "b", words: "B" },
  { key: "3", mode: "either", words: "A or B, same instant" },
  { key: "4", mode: "sides", words: "A left, B right" },
  { key: "5", mode: "difference", words: "What differs" },
];
const STEP_S = 2;

function heardWords({ mode, side }: Listening["state"]): string {
  if (mode === "sides") return "A left, B right";
  if (mode === "difference") return "what differs";
  return (mode === "either" ? side : mode) === "a" ? "A, the delivery" : "B, the reference";
}

interface KeyButtonProps {
  cap: string;
  words: ReactNode;
  isOn: boolean;
  onPress: () => void;
}

function KeyButton({ cap, words, isOn, onPress }: KeyButtonProps) {
  return (
    <button
      aria-pressed={isOn}
      className={cx(
        "flex min-h-8 cursor-pointer items-center gap-2 rounded-plain border py-0.5 pr-2.5 pl-1.5",
        isOn
          ? "border-ink bg-shoal-1 font-strong shadow-[inset_0_0_0_0.5px_var(--color-ink)]"
          : "border-ink-soft bg-page",
      )}
      onClick={onPress}
      type="button"
    >
      <KeyCap>{cap}</KeyCap>
      <span>{words}</span>
    </button>
  );
}

/** The passage at the position, else the next one, else the first. */
function passageAt(passages: readonly ChartPassage[], aS: number): ChartPassage | undefined {
  return passages.find((passage) => aS < passage.aToS) ?? passages[0];
}

/** Both recordings of a case, heard side by side at the same instant, by mouse or by key. */
export function AlignedListening(props: AlignedListeningProps) {
  const {
    passages,
    residualClaim,
    differenceWords = "What differs",
    asDeliveredUrl,
    children,
    ...source
  } = props;
  const listening = useListening({ ...source, asDeliveredUrl });
  const player = usePlayer();
  const { state, toggle, choose, seekA, positionAS, repeatPassage, setUndone, setLevel } = listening;

  const start = () => {
    if (!state.isPlaying) player.pause();
    toggle();
  };
  const repeat = () => {
    const passage = passageAt(passages, positionAS());
    repeatPassage(state.repeat === null && passage ? passage : null);
  };
  const toPassage = (by: 1 | -1) => {
    const atS = positionAS();
    const next =
      by > 0
        ? passages.find((passage) => passage.aFromS > atS + 0.1)
        : passages.filter((passage) => passage.aFromS < atS - 1).at(-1);
    if (next) seekA(next.aFromS);
  };
  const keys: KeyBinding[] = [
    { key: " ", does: state.isPlaying ? "stops" : "plays", run: start },
    ...MODES.map(({ key, mode, words }) => ({
      key,
      does:
        mode === "either"
          ? `${words}; again to change over`
          : mode === "difference"
            ? differenceWords
            : words,
      run: () => choose(mode),
    })),
    ...(asDeliveredUrl
      ? [{ key: "u", does: "alteration undone, or as delivered", run: () => setUndone(!state.isUndone) }]
      : []),
    { key: "r", does: "repeats the passage, or goes on", run: repeat },
    {
      key: "ArrowLeft",
      does: `goes back ${fmt.seconds(STEP_S, 0)}`,
      run: () => seekA(positionAS() - STEP_S),
    },
    { key: "ArrowRight", does: `goes on ${fmt.seconds(STEP_S, 0)}`, run: () => seekA(positionAS() + STEP_S) },
    { key: "ArrowUp", does: "goes to the passage before", run: () => toPassage(-1) },
    { key: "ArrowDown", does: "goes to the next passage", run: () => toPassage(1) },
  ];
  useKeys("This case", keys);
  const repeated = state.repeat ?? passageAt(passages, positionAS())?.number;

  return (
    <ListeningContext value={listening}>
      {children}
      <div className="mt-4 flex flex-wrap items-center gap-[7px]">
        <KeyButton cap=" " isOn={state.isPlaying} onPress={start} words={state.isPlaying ? "Stop" : "Play"} />
        {MODES.map(({ key, mode, words }) => (
          <KeyButton
            cap={key}
            isOn={state.mode === mode}
            key={key}
            onPress={() => choose(mode)}
            words={mode === "difference" ? differenceWords : words}
          />
        ))}
        <span className="contents xl:ml-auto">
          {asDeliveredUrl && (
            <KeyButton
              cap="u"
              isOn={state.isUndone}
              onPress={() => setUndone(!state.isUndone)}
              words="Alteration undone"
            />
          )}
          {repeated !== undefined && (
            <KeyButton
              cap="r"
              isOn={state.repeat !== null}
              onPress={repeat}
              words={`Repeat passage ${repeated}`}
            />
          )}
        </span>
      </div>
      <div className="mt-2 flex flex-wrap items-center gap-x-6 gap-y-1 text-small">
        <label className="flex min-h-6 items-center gap-2">
          Level
          <input
            className="h-6 w-28 cursor-pointer accent-depth"
            max={1}
            min={0}
            onChange={(event) => setLevel(event.target.valueAsNumber)}
            step={0.05}
            type="range"
            value={state.level}
          />
        </label>
        <p aria-live="polite">
          {state.isPlaying ? `Playing ${heardWords(state)}` : `Stopped; ready to play ${heardWords(state)}`}
          {asDeliveredUrl && (state.isUndone ? ", alteration undone" : ", as delivered")}
          {state.repeat !== null && `, repeating passage ${state.repeat}`}.
        </p>
        <p className="text-ink-soft">{residualClaim}</p>
      </div>
      {state.problem && (
        <Problem className="mt-2" live remedy="What you wrote is kept. Try again, or reload the case.">
          {state.problem}
        </Problem>
      )}
    </ListeningContext>
  );
}
