"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import { addCompany } from "@/app/(account)/actions";
import { Button } from "@/components/ui/button";
import { SelectField, TextAreaField, TextField } from "@/components/ui/field";
import { RegisterCompany } from "@/lib/accounts/schemas";
import { Refusal } from "./refusal";
import { useAct } from "./use-act";

const FIELDS = ["name", "address", "countryCode", "taxNumber"] as const;

export function CompanyForm({ countries }: { countries: readonly { value: string; label: string }[] }) {
  const register = useAct(addCompany);
  const form = useForm({
    resolver: zodResolver(RegisterCompany),
    defaultValues: { name: "", address: "", countryCode: "", taxNumber: "" },
  });
  const { errors } = form.formState;
  const errorAt = (name: (typeof FIELDS)[number]) => errors[name]?.message ?? register.fieldError(name);
  const submit = form.handleSubmit((given) => register.run(given, () => window.location.assign("/company")));
  return (
    <form className="grid gap-4" noValidate onSubmit={submit}>
      <TextField
        autoComplete="organization"
        error={errorAt("name")}
        label="Company"
        {...form.register("name")}
      />
      <TextAreaField
        error={errorAt("address")}
        hint="As it belongs on an invoice."
        label="Address"
        rows={3}
        {...form.register("address")}
      />
      <SelectField
        error={errorAt("countryCode")}
        label="Country"
        options={countries}
        placeholder="Choose a country"
        {...form.register("countryCode")}
      />
      <TextField
        error={errorAt("taxNumber")}
        label="VAT or tax number"
        optional
        {...form.register("taxNumber")}
      />
      <Refusal failure={register.failure} shownAtFields={FIELDS} />
      <Button busy={register.isRunning && "Registering"} kind="main" type="submit" wide>
        Register the company
      </Button>
    </form>
  );
}
