"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { useForm } from "react-hook-form";
import { inviteSomebody } from "@/app/(account)/actions";
import { Button } from "@/components/ui/button";
import { Fieldset } from "@/components/ui/choices";
import { CheckField, SelectField, TextField } from "@/components/ui/field";
import { StatusSentence } from "@/components/ui/status-sentence";
import { InvitePerson } from "@/lib/accounts/schemas";
import {
  INVITATION_DAYS,
  ROLE_WORDS,
  type Role,
  STAFF_GRANT_WORDS,
  STAFF_GRANTS,
} from "@/lib/accounts/states";
import { Refusal } from "./refusal";
import { useAct } from "./use-act";

const IN_A_LIBRARY: readonly Role[] = ["composer", "owner", "staff"];
const NOWHERE: readonly Role[] = ["admin", "buyer"];

interface InviteFormProps {
  roles: readonly Role[];
  /** For admins: the libraries a role may be held in. Others invite into their own place. */
  libraries?: readonly { id: string; name: string }[];
}

const SHOWN = ["email", "name", "role", "libraryId", "endsAt"];

export function InviteForm({ roles, libraries }: InviteFormProps) {
  const invite = useAct(inviteSomebody);
  const [invited, setInvited] = useState<string | null>(null);
  const first = roles[0] ?? "composer";
  const form = useForm({
    resolver: zodResolver(InvitePerson),
    defaultValues: {
      email: "",
      name: "",
      role: first,
      mayApprove: false,
      granted: [],
      libraryId: null,
      endsAt: null,
    },
  });
  const { errors } = form.formState;
  const role = form.watch("role");
  const errorAt = (name: "email" | "name" | "role" | "libraryId" | "endsAt") =>
    errors[name]?.message ?? invite.fieldError(name);

  const submit = form.handleSubmit((given) => {
    setInvited(null);
    invite.run(given, () => {
      setInvited(given.email);
      form.reset();
    });
  });

  return (
    <form className="grid gap-4" noValidate onSubmit={submit}>
      <TextField error={errorAt("name")} label="Name" {...form.register("name")} />
      <TextField
        error={errorAt("email")}
        inputMode="email"
        label="E-mail address"
        type="email"
        {...form.register("email")}
      />
      {roles.length > 1 && (
        <SelectField
          error={errorAt("role")}
          label="Role"
          options={roles.map((value) => ({ value, label: ROLE_WORDS[value] }))}
          {...form.register("role")}
        />
      )}
      {libraries && !NOWHERE.includes(role) && (
        <SelectField
          error={errorAt("libraryId")}
          label="Where"
          options={libraries.map(({ id, name }) => ({ value: id, label: name }))}
          placeholder={IN_A_LIBRARY.includes(role) ? "Choose a library" : "The marketplace"}
          {...form.register("libraryId", { setValueAs: (value: string | null) => value || null })}
        />
      )}
      {role === "auditor" && (
        <TextField
          error={errorAt("endsAt")}
          label="Access ends on"
          type="date"
          {...form.register("endsAt", { setValueAs: (value: string | null) => value || null })}
        />
      )}
      {role === "staff" && (
        <Fieldset hint="Preparing prices and quotes belongs to the role." legend="May also">
          {STAFF_GRANTS.map((grant) => (
            <CheckField key={grant} value={grant} {...form.register("granted")}>
              {STAFF_GRANT_WORDS[grant]}
            </CheckField>
          ))}
        </Fieldset>
      )}
      {role === "buyer" && (
        <CheckField
          hint="Without this the seat finds, shortlists and proposes."
          {...form.register("mayApprove")}
        >
          May also approve and pay
        </CheckField>
      )}
      <Refusal failure={invite.failure} shownAtFields={SHOWN} />
      <Button busy={invite.isRunning && "Inviting"} kind="main" type="submit" wide>
        Send the invitation
      </Button>
      {invited && (
        <div role="status">
          <StatusSentence below={`It can be accepted for ${INVITATION_DAYS} days.`} mark="half">
            An invitation is on its way to {invited}.
          </StatusSentence>
        </div>
      )}
    </form>
  );
}
