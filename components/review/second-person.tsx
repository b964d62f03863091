"use client";

import { useState, useTransition } from "react";
import { Button } from "@/components/ui/button";
import { TextAreaField } from "@/components/ui/field";
import { AsideTitle } from "@/components/ui/page";
import { notify } from "@/components/ui/toaster";
import type { CaseView } from "@/lib/review";
import type { CaseActions } from "./case-aside";

/** The second person reads, listens, and confirms or sends it back; then the letters go out. */
export function SecondPerson({
  finding,
  confirm,
}: {
  finding: CaseView["findings"][number];
  confirm: CaseActions["confirm"];
}) {
  const [words, setWords] = useState("");
  const [error, setError] = useState<string | undefined>(undefined);
  const [pending, start] = useTransition();
  const answer = (isConfirmed: boolean) =>
    start(async () => {
      const result = await confirm({ findingId: finding.id, confirm: isConfirmed, words });
      if (result.ok)
        notify({
          title: isConfirmed
            ? "Confirmed. The statement of reasons has gone out."
            : "Sent back to the first person.",
        });
      else setError(result.fields.words ?? result.message);
    });
  return (
    <div className="grid gap-3">
      <AsideTitle below="A refusal takes effect only when a second person has listened and confirms it. Listen before you answer.">
        Do you confirm it?
      </AsideTitle>
      <TextAreaField
        error={error}
        label="What you heard and read"
        onChange={(event) => setWords(event.target.value)}
        rows={3}
        value={words}
      />
      <Button busy={pending && "Confirming"} kind="main" onClick={() => answer(true)} wide>
        Confirm: it cannot be listed
      </Button>
      <Button disabled={pending} onClick={() => answer(false)} wide>
        Do not confirm
      </Button>
    </div>
  );
}
