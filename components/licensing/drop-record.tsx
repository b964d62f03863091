"use client";

import { useRef, useState } from "react";
import { Button, TextLink } from "@/components/ui/button";
import { cx } from "@/components/ui/cx";
import { fmt } from "@/components/ui/format";
import { Problem } from "@/components/ui/problem";
import { StatusSentence } from "@/components/ui/status-sentence";
import type { CheckedFile } from "@/lib/licensing";

const BYTES_MAX = 4_000_000;

type Answer = { checked: CheckedFile } | { problem: string };

async function check(file: File): Promise<Answer> {
  if (file.size > BYTES_MAX) return { problem: "The file is too large to be a licence file." };
  const answer = await fetch("/api/check", {
    method: "POST",
    headers: { "content-type": "text/plain; charset=utf-8" },
    body: await file.text(),
  }).catch(() => null);
  const body = answer ? await answer.json().catch(() => null) : null;
  if (answer?.ok) return { checked: body as CheckedFile };
  return { problem: body?.error?.message ?? "The file could not be read just now. Try again in a moment." };
}

/** A signed record as a file: genuine, altered and where, or unknown. */
export function DropRecord() {
  const [answer, setAnswer] = useState<Answer | null>(null);
  const [name, setName] = useState("");
  const [isOver, setOver] = useState(false);
  const [isReading, setReading] = useState(false);
  const input = useRef<HTMLInputElement>(null);
  const take = async (file: File | undefined) => {
    if (!file) return;
    setReading(true);
    setName(file.name);
    setAnswer(await check(file));
    setReading(false);
  };
  return (
    <div>
      {/* biome-ignore lint/a11y/noStaticElementInteractions: dropping has a click alternative, the button inside */}
      <div
        className={cx("rounded-plain border border-dashed border-ink p-4", isOver && "bg-page")}
        onDragLeave={() => setOver(false)}
        onDragOver={(event) => {
          event.preventDefault();
          setOver(true);
        }}
        onDrop={(event) => {
          event.preventDefault();
          setOver(false);
          take(event.dataTransfer.files[0]);
        }}
      >
        <p>
          <b className="font-strong">Or drop a signed record here.</b> The JSON file is read, answered and not
          kept.
        </p>
        <input
          accept=".json,application/json"
          className="sr-only"
          onChange={(event) => take(event.target.files?.[0])}
          ref={input}
          tabIndex={-1}
          type="file"
          aria-label="A signed record as a JSON file"
        />
        <Button
          busy={isReading && "Reading"}
          className="mt-2"
          kind="quiet"
          onClick={() => input.current?.click()}
        >
          Choose a file
        </Button>
      </div>
      <div aria-live="polite" className="mt-3">
        {answer && <FileAnswer answer={answer} name={name} />}
      </div>
    </div>
  );
}

function FileAnswer({ answer, name }: { answer: Answer; name: string }) {
  if ("problem" in answer) return <Problem>{answer.problem}</Problem>;
  const { checked } = answer;
  if (checked.verdict !== "genuine")
    return (
      <Problem
        remedy={
          checked.verdict === "altered"
            ? "Ask whoever gave you the file for the original, or check the proof code on it."
            : "It may be genuine and of another service, or an older or newer list of keys."
        }
      >
        {name}: {checked.sentence}
      </Problem>
    );
  return (
    <>
      <StatusSentence mark="tick">
        {name} is genuine: licence {checked.number}.
      </StatusSentence>
      {checked.on && <p className="mt-1">{checked.on.sentence}</p>}
      {checked.asOf && (
        <p className="mt-1 text-small text-ink-soft">
          By the history that was signed into the file on {fmt.dateTime(checked.asOf)}.
        </p>
      )}
      {checked.proofCode && (
        <p className="mt-2">
          <TextLink href={`/check/${checked.proofCode}`}>Where it stands today</TextLink>
        </p>
      )}
    </>
  );
}
