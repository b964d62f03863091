"use client";

import { useState, useTransition } from "react";
import { PlayStrip } from "@/components/contour/play-strip";
import { trackOf } from "@/components/search/tracks";
import { Button, TextLink } from "@/components/ui/button";
import { SelectField, TextField } from "@/components/ui/field";
import { Mark, type MarkKind } from "@/components/ui/mark";
import { Title } from "@/components/ui/title";
import type { ShortlistState } from "@/lib/productions/states";
import type { ShortlistLine } from "./shortlist-line";

type Answer = Promise<{ ok: boolean; message?: string }>;

export interface ItemActions {
  setItem: (input: { itemId: string; state?: ShortlistState; note?: string; recordingId?: string }) => Answer;
  removeItem: (input: { itemId: string }) => Answer;
}

interface ShortlistEntryProps {
  line: ShortlistLine;
  scaleS: number;
  actions: ItemActions;
  inFull: boolean;
}

const MARKS: Record<ShortlistState, MarkKind> = { picked: "done", considering: "half", out: "open" };
const STATE_WORDS: Record<ShortlistState, string> = {
  picked: "Picked.",
  considering: "Being considered.",
  out: "Out.",
};

export function ShortlistEntry({ line, scaleS, actions, inFull }: ShortlistEntryProps) {
  const [pending, start] = useTransition();
  const [problem, setProblem] = useState<string | null>(null);
  const [isChanging, setChanging] = useState(false);
  const run = (work: () => Answer) =>
    start(async () => {
      const answer = await work();
      setProblem(answer.ok ? null : (answer.message ?? "It could not be changed."));
    });
  const set = (changes: Omit<Parameters<ItemActions["setItem"]>[0], "itemId">) =>
    run(() => actions.setItem({ itemId: line.itemId, ...changes }));
  const { version } = line;
  return (
    <li aria-busy={pending || undefined} className="border-b border-buff-2 py-2.5">
      <div className="grid grid-cols-[1.4375rem_minmax(0,1fr)_auto] items-baseline">
        <Mark kind={line.unavailable ? "held" : MARKS[line.state]} />
        <TextLink className="no-underline hover:underline" href={`/cues/${line.number}`}>
          <Title className="text-lead">{line.title}</Title>
        </TextLink>
        <span className="figures pl-3 text-right">{line.unavailable ? "" : line.price?.text}</span>
        <div className="col-start-2 col-end-4 grid gap-0.5">
          {line.contour && version && (
            <PlayStrip
              drawnForPx={290}
              height={22}
              scaleS={scaleS}
              track={trackOf(line, { ...version, role: "", ending: null, canBeHeard: true }, line.contour)}
            />
          )}
          <p className="text-small text-ink-soft">{entryWords(line)}</p>
          <p className="flex flex-wrap gap-x-3 text-small">
            {!line.unavailable && version && line.state !== "picked" && (
              <Button kind="quiet" onClick={() => set({ state: "picked" })}>
                Pick it
              </Button>
            )}
            {!line.unavailable && line.state === "picked" && (
              <Button kind="quiet" onClick={() => set({ state: "considering" })}>
                Put it back
              </Button>
            )}
            {inFull && line.state !== "out" && (
              <Button kind="quiet" onClick={() => set({ state: "out" })}>
                Leave it out
              </Button>
            )}
            {inFull && (
              <Button aria-expanded={isChanging} kind="quiet" onClick={() => setChanging(!isChanging)}>
                Note and version
              </Button>
            )}
            {line.unavailable && <TextLink href={line.nearHref}>Find cues near it</TextLink>}
          </p>
          {isChanging && (
            <ChangeForm
              line={line}
              onRemove={() => run(() => actions.removeItem({ itemId: line.itemId }))}
              onSave={(changes) => {
                set(changes);
                setChanging(false);
              }}
            />
          )}
          {problem && (
            <p className="text-small text-magenta" role="alert">
              {problem}
            </p>
          )}
        </div>
      </div>
    </li>
  );
}

function entryWords(line: ShortlistLine): string {
  if (line.unavailable) return line.unavailable;
  const version = line.version ? line.version.label : "Its version is no longer on sale; choose another";
  const note = line.note ? ` ${line.addedBy}: “${line.note}”` : "";
  const noPrice = line.price && line.price.text === null ? ` ${line.price.sentence}` : "";
  return `${version}. ${STATE_WORDS[line.state]}${note}${noPrice}`;
}

function ChangeForm({
  line,
  onSave,
  onRemove,
}: {
  line: ShortlistLine;
  onSave: (changes: { note: string; recordingId?: string }) => void;
  onRemove: () => void;
}) {
  return (
    <form
      className="mt-2 grid gap-2"
      onSubmit={(event) => {
        event.preventDefault();
        const form = new FormData(event.currentTarget);
        const recordingId = String(form.get("recordingId") ?? "");
        onSave({ note: String(form.get("note") ?? ""), ...(recordingId ? { recordingId } : {}) });
      }}
    >
      {line.versions.length > 0 && (
        <SelectField
          defaultValue={line.version?.recordingId ?? ""}
          label="Version"
          name="recordingId"
          options={line.versions.map((version) => ({ value: version.recordingId, label: version.label }))}
          {...(line.version ? {} : { placeholder: "Choose a version" })}
        />
      )}
      <TextField defaultValue={line.note} label="Note" maxLength={500} name="note" optional />
      <p className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <Button size="small" type="submit">
          Keep
        </Button>
        <Button kind="quiet" onClick={onRemove}>
          Take it off the list
        </Button>
      </p>
    </form>
  );
}
