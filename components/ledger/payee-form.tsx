"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import { beginPayee } from "@/app/(library)/payouts/actions";
import { Refusal } from "@/components/account/refusal";
import { useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { SelectField, TextField } from "@/components/ui/field";
import { StartPayee } from "@/lib/ledger/schemas";

const FIELDS = ["legalName", "countryCode"] as const;

interface PayeeFormProps {
  countries: readonly { value: string; label: string }[];
  legalName: string;
}

/** The two facts the payment service needs before it asks for the rest itself. */
export function PayeeForm({ countries, legalName }: PayeeFormProps) {
  const begin = useAct(beginPayee);
  const form = useForm({
    resolver: zodResolver(StartPayee),
    defaultValues: { legalName, countryCode: "" },
  });
  const { errors } = form.formState;
  const errorAt = (name: (typeof FIELDS)[number]) => errors[name]?.message ?? begin.fieldError(name);
  return (
    <form className="grid gap-4" noValidate onSubmit={form.handleSubmit((given) => begin.run(given))}>
      <TextField
        error={errorAt("legalName")}
        hint="As the bank account is named."
        label="Name"
        {...form.register("legalName")}
      />
      <SelectField
        error={errorAt("countryCode")}
        label="Country"
        options={countries}
        placeholder="Choose a country"
        {...form.register("countryCode")}
      />
      <Refusal failure={begin.failure} shownAtFields={FIELDS} />
      <Button busy={begin.isRunning && "Asking"} type="submit" wide>
        Set up where payouts go
      </Button>
    </form>
  );
}
