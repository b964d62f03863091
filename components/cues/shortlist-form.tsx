"use client";

import { useState, useTransition } from "react";
import { Button, TextLink } from "@/components/ui/button";
import { SelectField, TextField } from "@/components/ui/field";
import { StatusSentence } from "@/components/ui/status-sentence";

interface ShortlistFormProps {
  productions: readonly { id: string; words: string }[];
  versions: readonly { recordingId: string; label: string }[];
  chosenProductionId: string | null;
  add: (input: {
    productionId: string;
    recordingId: string;
    note: string;
  }) => Promise<{ ok: true } | { ok: false; message: string }>;
}

/** Puts a version of this cue on a production's shortlist. */
export function ShortlistForm({ productions, versions, chosenProductionId, add }: ShortlistFormProps) {
  const [pending, start] = useTransition();
  const [answer, setAnswer] = useState<{ ok: boolean; words: string; productionId: string } | null>(null);
  const submit = (form: FormData) =>
    start(async () => {
      const productionId = String(form.get("productionId"));
      const result = await add({
        productionId,
        recordingId: String(form.get("recordingId")),
        note: String(form.get("note") ?? ""),
      });
      setAnswer({
        ok: result.ok,
        words: result.ok ? "It is on the shortlist." : result.message,
        productionId,
      });
    });
  return (
    <form action={submit} className="grid gap-2.5">
      <SelectField
        label="Production"
        name="productionId"
        options={productions.map(({ id, words }) => ({ value: id, label: words }))}
        {...(chosenProductionId ? { defaultValue: chosenProductionId } : {})}
      />
      <SelectField
        label="Version"
        name="recordingId"
        options={versions.map(({ recordingId, label }) => ({ value: recordingId, label }))}
      />
      <TextField label="Note" maxLength={500} name="note" optional />
      <Button busy={pending && "Putting it there"} type="submit" wide>
        Put it on the shortlist
      </Button>
      <div aria-live="polite">
        {answer && (
          <StatusSentence mark={answer.ok ? "done" : "warn"}>
            {answer.words}{" "}
            {answer.ok && <TextLink href={`/productions/${answer.productionId}`}>See it</TextLink>}
          </StatusSentence>
        )}
      </div>
    </form>
  );
}
