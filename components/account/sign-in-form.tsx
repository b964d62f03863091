"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { signIn } from "next-auth/react";
import { useState } from "react";
import { useForm } from "react-hook-form";
import { askForLink } from "@/app/(account)/actions";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { Problem } from "@/components/ui/problem";
import { StatusSentence } from "@/components/ui/status-sentence";
import { SignInByPassword } from "@/lib/accounts/schemas";
import { LINK_MINUTES } from "@/lib/accounts/states";
import { Refusal } from "./refusal";
import { useAct } from "./use-act";

export interface DemonstrationPerson {
  name: string;
  email: string;
  label: string;
}

interface SignInFormProps {
  /** Where to go afterwards, on this site. */
  to: string | null;
  demonstration: { people: readonly DemonstrationPerson[]; password: string } | null;
}

const WRONG = "This address and this password do not belong together.";

export function SignInForm({ to, demonstration }: SignInFormProps) {
  const form = useForm({
    resolver: zodResolver(SignInByPassword),
    defaultValues: { email: "", password: "" },
  });
  const [problem, setProblem] = useState<string | null>(null);
  const [sentTo, setSentTo] = useState<string | null>(null);
  const link = useAct(askForLink);
  const { errors, isSubmitting } = form.formState;

  const submit = form.handleSubmit(async ({ email, password }) => {
    setProblem(null);
    const answer = await signIn("password", { redirect: false, email, password });
    if (answer?.ok && !answer.error) {
      window.location.assign(`/sign-in/second-factor${to ? `?to=${encodeURIComponent(to)}` : ""}`);
      return;
    }
    setProblem(answer?.error && answer.error !== "CredentialsSignin" ? answer.error : WRONG);
  });

  const sendLink = async () => {
    setProblem(null);
    if (!(await form.trigger("email"))) return form.setFocus("email");
    const email = form.getValues("email");
    link.run({ email }, () => setSentTo(email));
  };

  const fill = (person: DemonstrationPerson) => {
    form.setValue("email", person.email, { shouldValidate: true });
    form.setValue("password", demonstration?.password ?? "", { shouldValidate: true });
    setProblem(null);
  };

  return (
    <div className="mt-6 grid gap-x-12 gap-y-10 md:grid-cols-[minmax(0,22rem)_minmax(0,1fr)]">
      <form className="grid content-start gap-4" noValidate onSubmit={submit}>
        <TextField
          autoComplete="username"
          error={errors.email?.message ?? link.fieldError("email")}
          inputMode="email"
          label="E-mail address"
          type="email"
          {...form.register("email")}
        />
        <TextField
          autoComplete="current-password"
          error={errors.password?.message}
          label="Password"
          type="password"
          {...form.register("password")}
        />
        {problem && (
          <Problem
            live
            remedy={problem === WRONG ? "Try again, or have a link sent to the address." : undefined}
          >
            {problem}
          </Problem>
        )}
        <Button busy={isSubmitting && "Signing in"} kind="main" type="submit" wide>
          Sign in
        </Button>
        <div>
          <Button busy={link.isRunning && "Sending"} kind="quiet" onClick={sendLink}>
            Send me a link instead
          </Button>
          <p className="mt-1 text-small text-ink-soft">
            It signs you in without a password, and opens an account if you have none.
          </p>
          <Refusal failure={link.failure} shownAtFields={["email"]} />
          {sentTo && (
            <div className="mt-2" role="status">
              <StatusSentence below={`It works once, for ${LINK_MINUTES} minutes.`} mark="half">
                A link is on its way to {sentTo}.
              </StatusSentence>
            </div>
          )}
        </div>
      </form>
      {demonstration && demonstration.people.length > 0 && (
        <section aria-labelledby="demonstration-people">
          <h2 className="mb-1 border-b border-ink pb-1 font-strong" id="demonstration-people">
            People of the demonstration
          </h2>
          <p className="mb-2 max-w-measure text-small text-ink-soft">
            All are invented. Choosing one fills the form in; then press Sign in.
          </p>
          <ul>
            {demonstration.people.map((person) => (
              <li className="border-b border-line" key={`${person.email} ${person.label}`}>
                <button
                  className="w-full cursor-pointer py-2 text-left hover:bg-shoal-1"
                  onClick={() => fill(person)}
                  type="button"
                >
                  <span className="link">{person.name}</span>
                  <span className="text-ink-soft">, {person.label}</span>
                </button>
              </li>
            ))}
          </ul>
        </section>
      )}
    </div>
  );
}
