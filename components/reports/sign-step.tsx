import { CheckField, SelectField, TextAreaField, TextField } from "@/components/ui/field";
import { AsideTitle } from "@/components/ui/page";
import { ACCURACY_TEXT, CAPACITIES, GOOD_FAITH_TEXT } from "@/lib/reports/states";
import type { StepProps } from "./notice-form";

const CAPACITY_WORDS: Record<(typeof CAPACITIES)[number], string> = {
  owner: "as the owner",
  agent: "as an agent of the owner",
  licensee: "as a licensee",
  heir: "as an heir",
};

export function SignStep({
  form,
  errorAt,
  countries,
}: StepProps & { countries: readonly { value: string; label: string }[] }) {
  const { register } = form;
  return (
    <>
      <AsideTitle below="Only the marketplace’s moderators read this part; it is kept encrypted. Neither the library nor the composer is shown who you are.">
        4. You
      </AsideTitle>
      <div className="grid gap-4">
        <TextField autoComplete="name" error={errorAt("name")} label="Your name" {...register("name")} />
        <SelectField
          error={errorAt("capacity")}
          label="You write"
          options={CAPACITIES.map((value) => ({ value, label: CAPACITY_WORDS[value] }))}
          placeholder="Choose one"
          {...register("capacity")}
        />
        <TextField
          autoComplete="email"
          error={errorAt("email")}
          hint="The receipt and every answer go there."
          label="E-mail"
          type="email"
          {...register("email")}
        />
        <SelectField
          autoComplete="country"
          error={errorAt("countryCode")}
          label="Country"
          options={countries}
          placeholder="Choose a country"
          {...register("countryCode")}
        />
        <TextAreaField
          autoComplete="street-address"
          error={errorAt("postal")}
          label="Postal address"
          optional
          rows={2}
          {...register("postal")}
        />
        <CheckField error={errorAt("goodFaith")} {...register("goodFaith")}>
          {GOOD_FAITH_TEXT}
        </CheckField>
        <CheckField error={errorAt("accuracy")} {...register("accuracy")}>
          {ACCURACY_TEXT}
        </CheckField>
        <TextField
          error={errorAt("signedName")}
          hint="Written here, your name is your signature under both statements."
          label="Signed"
          {...register("signedName")}
        />
      </div>
    </>
  );
}
