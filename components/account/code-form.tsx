"use client";

import { type FormEvent, useState } from "react";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { giveCode } from "./give-code";

interface CodeFormProps {
  /** Where to go when the code is right. */
  to: string;
  /** In a demonstration: the code of one of its people, or the seconds until there is a next one. */
  demonstration: { code: string | null; nextInS: number } | null;
  button?: string;
}

function hintOf(demonstration: CodeFormProps["demonstration"]): string {
  if (!demonstration) return "Six digits from the app you set up.";
  if (demonstration.code) return "Filled in, because this is a person of the demonstration.";
  return `Each code works once and both present ones are used. Load this page again in ${demonstration.nextInS} seconds.`;
}

export function CodeForm({ to, demonstration, button = "Go on" }: CodeFormProps) {
  const [problem, setProblem] = useState<string>();
  const [isBusy, setBusy] = useState(false);

  const submit = async (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault();
    const code = String(new FormData(event.currentTarget).get("code") ?? "").replace(/\s/g, "");
    if (!/^\d{6}$/.test(code)) return setProblem("A code has six digits.");
    setBusy(true);
    const refused = await giveCode(code).catch(() => "The site could not be reached. Please try again.");
    if (refused === null) return window.location.assign(to);
    setBusy(false);
    setProblem(refused);
  };

  return (
    <form className="grid max-w-[22rem] gap-4" noValidate onSubmit={submit}>
      <TextField
        autoComplete="one-time-code"
        defaultValue={demonstration?.code ?? ""}
        error={problem}
        hint={hintOf(demonstration)}
        inputMode="numeric"
        key={demonstration?.code}
        label="Code"
        maxLength={8}
        name="code"
      />
      <Button busy={isBusy && "Checking"} kind="main" type="submit" wide>
        {button}
      </Button>
    </form>
  );
}
