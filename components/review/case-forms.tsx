"use client";

import { useState, useTransition } from "react";
import { Button } from "@/components/ui/button";
import { SelectField, TextAreaField } from "@/components/ui/field";
import { notify } from "@/components/ui/toaster";
import type { CaseActions } from "./case-aside";

/** One field and one button: what is written is kept when the server refuses it. */
function WordsForm({
  label,
  hint,
  button,
  send,
}: {
  label: string;
  hint: string;
  button: string;
  send: (words: string) => Promise<{ ok: boolean; message?: string; fields?: Record<string, string> }>;
}) {
  const [words, setWords] = useState("");
  const [error, setError] = useState<string | undefined>(undefined);
  const [pending, start] = useTransition();
  const submit = () =>
    start(async () => {
      const result = await send(words);
      if (result.ok) {
        setWords("");
        setError(undefined);
        notify({ title: "Kept." });
      } else setError(result.fields?.words ?? result.message);
    });
  return (
    <form
      className="mt-2 grid gap-3"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      <TextAreaField
        error={error}
        hint={hint}
        label={label}
        onChange={(event) => setWords(event.target.value)}
        rows={4}
        value={words}
      />
      <Button busy={pending && "Sending"} type="submit">
        {button}
      </Button>
    </form>
  );
}

export function QuestionForm({ caseId, ask }: { caseId: string; ask: CaseActions["ask"] }) {
  return (
    <WordsForm
      button="Ask, with seven days to answer"
      hint="The places in their own recording go with it. Nothing is decided by asking."
      label="One specific question"
      send={(words) => ask({ caseId, words })}
    />
  );
}

export function ConflictForm({ caseId, declare }: { caseId: string; declare: CaseActions["declare"] }) {
  return (
    <WordsForm
      button="Declare it and step back"
      hint="The case goes back to the queue; you decide and confirm nothing in it."
      label="What the conflict is"
      send={(words) => declare({ caseId, words })}
    />
  );
}

export function HandOverForm({
  caseId,
  colleagues,
  passOn,
}: {
  caseId: string;
  colleagues: readonly { id: string; name: string }[];
  passOn: CaseActions["passOn"];
}) {
  const [to, setTo] = useState("");
  return (
    <div className="mt-2 grid gap-3">
      <SelectField
        label="To whom"
        onChange={(event) => setTo(event.target.value)}
        options={[
          { value: "", label: "back to the queue" },
          ...colleagues.map((person) => ({ value: person.id, label: person.name })),
        ]}
        value={to}
      />
      <WordsForm
        button="Hand over"
        hint="What you heard so far."
        label="A line for the colleague"
        send={(words) => passOn({ caseId, toPersonId: to || null, words })}
      />
    </div>
  );
}
