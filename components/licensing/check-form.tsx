"use client";

import { useId, useState } from "react";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { parseLicenceNumber } from "@/lib/kernel/licence-number";
import { parseProofCode } from "@/lib/kernel/proof-code";

interface CheckFormProps {
  /** main on the page that is only this, plain beside an answer */
  kind?: "main" | "plain";
  typed?: string;
}

const NUMBER_ALONE =
  "That is a licence number. It names the licence and alone opens nothing: the proof code beside it on the record does.";

/** A proof code, looked at here before anything is looked up. Without scripts the page does the same. */
export function CheckForm({ kind = "main", typed = "" }: CheckFormProps) {
  const [problem, setProblem] = useState<string | null>(null);
  const id = useId();
  return (
    <form
      action="/check"
      method="get"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        const code = String(new FormData(event.currentTarget).get("code") ?? "");
        if (/^\s*LR/i.test(code)) {
          const number = parseLicenceNumber(code);
          setProblem(number.ok ? NUMBER_ALONE : number.message);
          return;
        }
        const parsed = parseProofCode(code);
        if (parsed.ok) window.location.assign(`/check/${parsed.code}`);
        else setProblem(parsed.message);
      }}
    >
      <TextField
        autoCapitalize="characters"
        autoComplete="off"
        defaultValue={typed}
        error={problem ?? undefined}
        hint="17 characters, as on the record; small letters, spaces and dashes do not matter."
        id={id}
        label="Proof code"
        name="code"
        spellCheck={false}
      />
      <p aria-live="assertive" className="sr-only">
        {problem}
      </p>
      <Button className="mt-3" kind={kind} type="submit" wide>
        Check it
      </Button>
    </form>
  );
}
