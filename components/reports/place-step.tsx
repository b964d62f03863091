import { Controller } from "react-hook-form";
import { Fieldset } from "@/components/ui/choices";
import { CheckField, TextAreaField, TextField } from "@/components/ui/field";
import { Section } from "@/components/ui/sentence";
import { GROUNDS } from "@/lib/reports/states";
import type { StepProps } from "./notice-form";
import { TimeField } from "./time-field";

/** Where it is used, and why the reporter thinks that it should not be. */
export function PlaceStep({ form, errorAt }: StepProps) {
  const { register, control } = form;
  return (
    <>
      <Section className="mt-9" head="2. Where it is used">
        <div className="grid max-w-measure gap-4 pt-1">
          <TextField
            error={errorAt("where")}
            hint="A catalogue number such as SM0009, or the address of the page."
            label="Which cue"
            {...register("where")}
          />
          <Fieldset hint="Where in the cue your work is heard." legend="From where to where">
            <div className="flex flex-wrap gap-4">
              <Controller
                control={control}
                name="fromS"
                render={({ field }) => (
                  <TimeField
                    error={errorAt("fromS")}
                    label="From"
                    onBlur={field.onBlur}
                    onChange={field.onChange}
                    placeholder="0:20"
                    value={field.value}
                  />
                )}
              />
              <Controller
                control={control}
                name="toS"
                render={({ field }) => (
                  <TimeField
                    error={errorAt("toS")}
                    label="To"
                    onBlur={field.onBlur}
                    onChange={field.onChange}
                    placeholder="1:05"
                    value={field.value}
                  />
                )}
              />
            </div>
          </Fieldset>
        </div>
      </Section>
      <Section className="mt-9" head="3. Why">
        <div className="grid max-w-measure gap-4 pt-1">
          <Fieldset error={errorAt("grounds")} legend="What is wrong with the use?">
            <div className="grid gap-1.5">
              {Object.entries(GROUNDS).map(([value, words]) => (
                <CheckField key={value} value={value} {...register("grounds")}>
                  {words}
                </CheckField>
              ))}
            </div>
          </Fieldset>
          <TextAreaField
            error={errorAt("why")}
            hint="In your own words. What do the two share, and how do you know that yours was first?"
            label="Why you think this is yours"
            rows={6}
            {...register("why")}
          />
        </div>
      </Section>
    </>
  );
}
