"use client";

import { signIn } from "next-auth/react";
import { type FormEvent, useState } from "react";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { Problem } from "@/components/ui/problem";

interface LinkFormProps {
  token: string;
  /** A new address says its name first. */
  asksName: boolean;
}

/** The one button behind a link by mail: opening the page uses nothing up, pressing this does. */
export function LinkForm({ token, asksName }: LinkFormProps) {
  const [problem, setProblem] = useState<string | null>(null);
  const [nameError, setNameError] = useState<string>();
  const [isBusy, setBusy] = useState(false);

  const submit = async (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault();
    const name = String(new FormData(event.currentTarget).get("name") ?? "").trim();
    if (asksName && name.length < 2) return setNameError("Write the name as it should be read.");
    setNameError(undefined);
    setProblem(null);
    setBusy(true);
    const answer = await signIn("link", { redirect: false, token, name });
    if (answer?.ok && !answer.error) return window.location.assign("/sign-in/second-factor");
    setBusy(false);
    setProblem(answer?.error ?? "You are not signed in. Please try again.");
  };

  return (
    <form className="mt-6 grid max-w-[22rem] gap-4" noValidate onSubmit={submit}>
      {asksName && <TextField autoComplete="name" error={nameError} label="Your name" name="name" />}
      {problem && (
        <Problem live remedy="Have another link sent from the sign-in page.">
          {problem}
        </Problem>
      )}
      <Button busy={isBusy && "Signing in"} kind="main" type="submit" wide>
        {asksName ? "Open my account and sign in" : "Sign in"}
      </Button>
    </form>
  );
}
