"use client";

import { HeadSentence } from "@/components/ui/sentence";
import type { Brief } from "@/lib/catalogue/schemas";
import * as say from "./brief-words";
import { ChoiceMenu } from "./choice-menu";
import { FigureField, RangePopover } from "./range-popover";

export interface BriefSentenceProps {
  brief: Brief;
  change: (changes: Partial<Brief>) => void;
  libraries: readonly { code: string; name: string }[];
}

const options = (terms: readonly { id: string; label: string }[]) =>
  terms.map((term) => ({ id: term.id, words: term.label }));
const ANY = "Any of these will do.";

/** The brief as one sentence; its underlined words are the controls. */
export function BriefSentence(props: BriefSentenceProps) {
  const { brief, change } = props;
  const list =
    <K extends keyof Brief>(key: K) =>
    (ids: string[]) =>
      change({ [key]: ids } as Partial<Brief>);
  const one =
    <K extends keyof Brief>(key: K) =>
    (ids: string[]) =>
      change({ [key]: ids[0] ?? null } as Partial<Brief>);
  return (
    <HeadSentence size="big">
      Something{" "}
      <ChoiceMenu
        chosen={brief.moods}
        groups={[{ options: options(say.moods) }]}
        hint={ANY}
        isOpen={brief.moods.length === 0}
        name="Mood"
        onChange={list("moods")}
        several
        words={say.moodWords(brief)}
      />{" "}
      for{" "}
      <ChoiceMenu
        chosen={brief.uses}
        groups={[{ options: options(say.uses) }]}
        hint={ANY}
        isOpen={brief.uses.length === 0}
        name="Use"
        onChange={list("uses")}
        several
        words={say.purposeWords(brief)}
      />
      , led by{" "}
      <ChoiceMenu
        chosen={brief.lead}
        groups={[{ options: options(say.instruments) }]}
        hint={ANY}
        isOpen={brief.lead.length === 0}
        name="Leading instrument"
        onChange={list("lead")}
        several
        words={say.leadWords(brief)}
      />
      ,{" "}
      <ChoiceMenu
        chosen={brief.voice ? [brief.voice] : []}
        groups={[{ options: say.voiceOptions }]}
        isOpen={brief.voice === null}
        name="Voice"
        onChange={one("voice")}
        words={say.voiceWords(brief)}
      />
      , <TempoChoice {...props} />, that{" "}
      <ChoiceMenu
        chosen={brief.shape ? [brief.shape] : []}
        groups={[{ options: say.shapeOptions }]}
        isOpen={brief.shape === null}
        name="Shape"
        onChange={one("shape")}
        words={say.shapeWords(brief)}
      />
      , with{" "}
      <ChoiceMenu
        chosen={brief.versions}
        groups={[{ options: say.versionOptions }]}
        hint={ANY}
        isOpen={brief.versions.length === 0}
        name="Versions"
        onChange={list("versions")}
        several
        words={say.versionWords(brief)}
      />
      , and nothing <ExclusionChoice {...props} />
      <FurtherWords {...props} isSet />.
    </HeadSentence>
  );
}

function TempoChoice({ brief, change }: BriefSentenceProps) {
  const set = (bpmFrom: number | null, bpmTo: number | null) => change({ bpmFrom, bpmTo });
  return (
    <RangePopover
      isOpen={brief.bpmFrom === null && brief.bpmTo === null}
      name="Tempo"
      onClear={() => set(null, null)}
      onSubmit={(form) => set(figure(form.get("from"), 20, 400), figure(form.get("to"), 20, 400))}
      presets={say.tempoPresets.map((preset) => ({
        words: preset.words,
        isCurrent: brief.bpmFrom === preset.from && brief.bpmTo === preset.to,
        pick: () => set(preset.from, preset.to),
      }))}
      words={say.tempoWords(brief)}
    >
      <FigureField initial={brief.bpmFrom} label="from, bpm" max={400} min={20} name="from" />
      <FigureField initial={brief.bpmTo} label="to, bpm" max={400} min={20} name="to" />
    </RangePopover>
  );
}

export function figure(text: FormDataEntryValue | null, least: number, most: number): number | null {
  const value = Number.parseInt(String(text ?? ""), 10);
  return Number.isFinite(value) ? Math.min(most, Math.max(least, value)) : null;
}

function ExclusionChoice({ brief, change }: BriefSentenceProps) {
  const of = (kind: string, terms: readonly { id: string; label: string }[]) =>
    terms.map((term) => ({ id: `${kind}:${term.id}`, words: term.label }));
  const words = brief.not.filter((entry) => entry.startsWith("word:"));
  return (
    <ChoiceMenu
      chosen={brief.not}
      groups={[
        ...(words.length
          ? [{ head: "Words", options: words.map((entry) => ({ id: entry, words: `“${entry.slice(5)}”` })) }]
          : []),
        { head: "Moods", options: of("mood", say.moods) },
        { head: "Instruments", options: of("instrument", say.instruments) },
        { head: "Genres", options: of("genre", say.genres) },
      ]}
      hint="Cues with any of these are left out."
      isOpen={brief.not.length === 0}
      name="Ruled out"
      onChange={(ids) => change({ not: ids })}
      several
      words={say.excludedWords(brief)}
    />
  );
}

const LENGTHS = [6, 10, 15, 20, 30, 60, 90, 120, 180];

/** Words that are not always asked for: in the sentence once they are set, else in the line beneath it. */
export function FurtherWords(props: BriefSentenceProps & { isSet: boolean }) {
  const { brief, change, libraries, isSet } = props;
  const entries = [
    {
      key: "genres",
      set: brief.genres.length > 0,
      before: ", filed under ",
      control: (
        <ChoiceMenu
          chosen={brief.genres}
          groups={[{ options: options(say.genres) }]}
          hint={ANY}
          isOpen={false}
          name="Genre"
          onChange={(ids) => change({ genres: ids as Brief["genres"] })}
          quiet={!isSet}
          several
          words={say.genreWords(brief)}
        />
      ),
    },
    {
      key: "length",
      set: brief.lengthS !== null,
      before: ", about ",
      control: (
        <RangePopover
          isOpen={brief.lengthS === null}
          name="Length"
          onClear={() => change({ lengthS: null })}
          onSubmit={(form) => change({ lengthS: figure(form.get("seconds"), 1, 3600) })}
          presets={LENGTHS.map((seconds) => ({
            words: `${Math.floor(seconds / 60)}:${String(seconds % 60).padStart(2, "0")}`,
            isCurrent: brief.lengthS === seconds,
            pick: () => change({ lengthS: seconds }),
          }))}
          quiet={!isSet}
          words={say.lengthWords(brief)}
        >
          <FigureField initial={brief.lengthS} label="seconds" max={3600} min={1} name="seconds" />
        </RangePopover>
      ),
    },
    {
      key: "ending",
      set: brief.ending !== null,
      before: ", ending on ",
      control: (
        <ChoiceMenu
          chosen={brief.ending ? [brief.ending] : []}
          groups={[{ options: say.endingOptions }]}
          isOpen={false}
          name="Ending"
          onChange={(ids) => change({ ending: (ids[0] ?? null) as Brief["ending"] })}
          quiet={!isSet}
          words={say.endingWords(brief)}
        />
      ),
    },
    {
      key: "library",
      set: brief.library !== null,
      before: ", from ",
      control: (
        <ChoiceMenu
          chosen={brief.library ? [brief.library] : []}
          groups={[{ options: libraries.map(({ code, name }) => ({ id: code, words: name })) }]}
          isOpen={false}
          name="Library"
          onChange={(ids) => change({ library: ids[0] ?? null })}
          quiet={!isSet}
          words={libraries.find(({ code }) => code === brief.library)?.name ?? "library"}
        />
      ),
    },
    {
      key: "oneStop",
      set: brief.oneStop.length > 0,
      before: ", ",
      control: (
        <ChoiceMenu
          chosen={brief.oneStop.length ? [brief.oneStop.join(",")] : []}
          groups={[{ options: say.TERRITORIES }]}
          hint="One library licenses work and recording, for all of:"
          isOpen={false}
          name="Rights"
          onChange={(ids) => change({ oneStop: ids[0]?.split(",") ?? [] })}
          quiet={!isSet}
          words={say.oneStopWords(brief)}
        />
      ),
    },
  ];
  if (isSet) {
    const set = entries.filter((entry) => entry.set);
    return (
      <>
        {set.map((entry) => (
          <span key={entry.key}>
            {entry.before}
            {entry.control}
          </span>
        ))}
        {brief.text && (
          <>
            , with the words{" "}
            <button
              aria-label={`Words of the description: “${brief.text}”. Take them out`}
              className="choice"
              onClick={() => change({ text: "" })}
              title="Take these words out"
              type="button"
            >
              “{brief.text}”
            </button>
          </>
        )}
      </>
    );
  }
  const left = entries.filter((entry) => !entry.set);
  if (left.length === 0) return null;
  return (
    <p className="text-small text-ink-soft">
      Say more by{" "}
      {left.map((entry, index) => (
        <span className="text-ink" key={entry.key}>
          {index > 0 && <span className="text-ink-soft">{index === left.length - 1 ? " or " : ", "}</span>}
          {entry.control}
        </span>
      ))}
      .
    </p>
  );
}
