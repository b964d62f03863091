import { Choices } from "@/components/ui/choices";
import { CheckField, TextAreaField, TextField } from "@/components/ui/field";
import { Section } from "@/components/ui/sentence";
import type { StepProps } from "./notice-form";

const CONCERNS = [
  {
    value: "work",
    sentence: "The work",
    below:
      "The composition: its melody, harmony and words, whoever plays it. People compare works by listening and reading; software here does not.",
  },
  {
    value: "recording",
    sentence: "The recording",
    below:
      "One performance of it, as it was fixed. Whoever copies it copies its very sound, and that can be found.",
  },
  { value: "both", sentence: "Both", below: "Your composition, in your recording." },
];

export function WorkStep({ form, errorAt }: StepProps) {
  const { register } = form;
  return (
    <Section head="1. Your work">
      <div className="grid max-w-measure gap-4 pt-1">
        <TextField error={errorAt("workTitle")} label="Its title" {...register("workTitle")} />
        <Choices
          error={errorAt("concerns")}
          legend="What of it is used?"
          options={CONCERNS}
          {...register("concerns")}
        />
        <TextField
          error={errorAt("writers")}
          hint="Composers and lyricists, with their numbers if you know them."
          label="Who wrote it"
          optional
          {...register("writers")}
        />
        <TextField
          error={errorAt("owner")}
          hint="A person, a label, a publisher, an estate."
          label="Who owns it"
          {...register("owner")}
        />
        <div className="grid gap-4 sm:grid-cols-2">
          <TextField
            error={errorAt("isrc")}
            hint="The number of a recording."
            label="ISRC"
            optional
            {...register("isrc")}
          />
          <TextField
            error={errorAt("iswc")}
            hint="The number of a work."
            label="ISWC"
            optional
            {...register("iswc")}
          />
        </div>
        <TextAreaField
          error={errorAt("release")}
          hint="Label, year, address of a page: whatever helps a person to find it."
          label="Where it came out"
          optional
          rows={2}
          {...register("release")}
        />
        <CheckField
          hint="You send it after you have confirmed your address; there is nothing to choose now. Only the marketplace’s moderators hear it, and each hearing is logged. If the report is supported, software compares it with every delivery. It stays with the report as its evidence; an entry of the list is looked at again after twelve months."
          {...register("hasRecording")}
        >
          I have a recording that I can send in confidence.
        </CheckField>
      </div>
    </Section>
  );
}
