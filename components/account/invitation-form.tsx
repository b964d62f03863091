"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { signIn } from "next-auth/react";
import { useForm } from "react-hook-form";
import { acceptAnInvitation } from "@/app/(account)/actions";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { AcceptInvitation } from "@/lib/accounts/schemas";
import { PASSWORD_LENGTH_ALONE } from "@/lib/accounts/states";
import { Refusal } from "./refusal";
import { useAct } from "./use-act";

interface InvitationFormProps {
  token: string;
  name: string;
  /** The address has an account: the role is added to it. */
  hasAccount: boolean;
}

export function InvitationForm({ token, name, hasAccount }: InvitationFormProps) {
  const accept = useAct(acceptAnInvitation);
  const form = useForm({
    resolver: zodResolver(AcceptInvitation),
    defaultValues: { token, name, password: hasAccount ? undefined : "" },
  });
  const { errors } = form.formState;

  const submit = form.handleSubmit((given) => {
    accept.run(given, async ({ email }) => {
      if (given.password === undefined) return window.location.assign("/sign-in");
      await signIn("password", { redirect: false, email, password: given.password });
      window.location.assign("/sign-in/second-factor");
    });
  });

  return (
    <form className="mt-6 grid max-w-[26rem] gap-4" noValidate onSubmit={submit}>
      {!hasAccount && (
        <>
          <TextField
            autoComplete="name"
            error={errors.name?.message ?? accept.fieldError("name")}
            label="Your name"
            {...form.register("name")}
          />
          <TextField
            autoComplete="new-password"
            error={errors.password?.message ?? accept.fieldError("password")}
            hint={`At least ${PASSWORD_LENGTH_ALONE} characters, of any kind. Four or five unrelated words are easy to keep.`}
            label="A password"
            type="password"
            {...form.register("password")}
          />
        </>
      )}
      <Refusal failure={accept.failure} shownAtFields={hasAccount ? [] : ["name", "password"]} />
      <Button busy={accept.isRunning && "Accepting"} kind="main" type="submit" wide>
        Accept the invitation
      </Button>
    </form>
  );
}
