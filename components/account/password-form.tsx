"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import { changePassword } from "@/app/(account)/actions";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { SetPassword } from "@/lib/accounts/schemas";
import { Refusal } from "./refusal";
import { useAct } from "./use-act";

interface PasswordFormProps {
  email: string;
  asksCurrent: boolean;
  lengthMin: number;
  isFirst: boolean;
}

export function PasswordForm({ email, asksCurrent, lengthMin, isFirst }: PasswordFormProps) {
  const change = useAct(changePassword);
  const form = useForm({
    resolver: zodResolver(SetPassword),
    defaultValues: { current: asksCurrent ? "" : undefined, password: "" },
  });
  const { errors } = form.formState;
  const submit = form.handleSubmit((given) => {
    change.run(given, () => window.location.assign("/sign-in?after=password"));
  });
  return (
    <form className="grid max-w-[26rem] gap-4" noValidate onSubmit={submit}>
      <input autoComplete="username" defaultValue={email} hidden readOnly type="email" />
      {asksCurrent && (
        <TextField
          autoComplete="current-password"
          error={errors.current?.message ?? change.fieldError("current")}
          label="The password in use"
          type="password"
          {...form.register("current")}
        />
      )}
      <TextField
        autoComplete="new-password"
        error={errors.password?.message ?? change.fieldError("password")}
        hint={`At least ${lengthMin} characters, of any kind. You are then signed out everywhere and sign in with it.`}
        label={isFirst ? "A password" : "The new password"}
        type="password"
        {...form.register("password")}
      />
      <Refusal failure={change.failure} shownAtFields={["password", "current"]} />
      <div>
        <Button busy={change.isRunning && "Keeping"} type="submit">
          {isFirst ? "Set the password" : "Change the password"}
        </Button>
      </div>
    </form>
  );
}
