"use client";

import { useFormContext, useWatch } from "react-hook-form";
import { SelectField, TextAreaField, TextField } from "@/components/ui/field";
import { fmt } from "@/components/ui/format";
import {
  densities,
  endings,
  genres,
  instruments,
  moods,
  shapes,
  type Term,
  uses,
  voiceKinds,
} from "@/lib/catalogue/vocabularies";
import type { DraftInput, DraftOutput } from "./draft-form";
import { ListField, TermPicks } from "./term-picks";
import { type DeliveryOnWire, measuresOf } from "./wire";

const options = (terms: readonly Term[]) => terms.map(({ id, label }) => ({ value: id, label }));
const PITCHES = ["C", "C sharp", "D", "E flat", "E", "F", "F sharp", "G", "A flat", "A", "B flat", "B"];
const KEYS = [
  ...PITCHES.flatMap((pitch) => [`${pitch} major`, `${pitch} minor`]),
  "ambiguous",
  "modal",
  "unpitched",
].map((value) => ({ value, label: value }));
const EXPLICIT = [
  { value: "none", label: "nothing explicit" },
  { value: "mild", label: "mild" },
  { value: "strong", label: "strong" },
];

const orNull = (value: unknown) => (value === "" || value === undefined ? null : value);
const numberOrNull = (value: unknown) => (value === "" || value == null ? null : Number(value));

/** What the machine measured of the full mix, beside what the composer says. */
function measuredWords(delivery: DeliveryOnWire): { bpm: string; key: string } {
  const head = delivery.versions.find((version) => version.versionRole === "full");
  const measures = head ? measuresOf(head) : null;
  return {
    bpm: measures?.tempo?.bpm
      ? `The machine heard ${fmt.bpm(Math.round(measures.tempo.bpm * 10) / 10)}.`
      : "",
    key: measures?.key?.key ? `The machine heard ${measures.key.key} ${measures.key.mode ?? ""}.` : "",
  };
}

/** What the music is: title, tempo, key, and the words that people search by. */
export function MusicStep({ delivery }: { delivery: DeliveryOnWire }) {
  const form = useFormContext<DraftInput, unknown, DraftOutput>();
  const { register, control, formState } = form;
  const { errors } = formState;
  const measured = measuredWords(delivery);
  const voice = useWatch({ control, name: "voice" });
  const description = useWatch({ control, name: "description" }) ?? "";
  const need = (message: string | undefined, words: string) => (message ? words : undefined);
  return (
    <div className="grid gap-x-5 gap-y-5 @wide:grid-cols-2">
      <TextField
        className="@wide:col-span-2"
        error={errors.title && "Give it a title."}
        hint="No artists, brands or other works in it."
        label="Title"
        {...register("title")}
      />
      <TextField
        error={errors.bpm && "A tempo from 20 to 400, or nothing where it is free."}
        hint={`One decimal. Leave it empty where the time is free. ${measured.bpm}`}
        inputMode="decimal"
        label="Tempo in beats a minute"
        optional
        {...register("bpm", { setValueAs: numberOrNull })}
      />
      <SelectField
        error={errors.musicalKey?.message}
        hint={measured.key || "As you hear it."}
        label="Key"
        optional
        options={KEYS}
        placeholder="Not said"
        {...register("musicalKey", { setValueAs: orNull })}
      />
      <SelectField
        error={need(errors.genre?.message, "Choose the genre that fits best.")}
        label="Genre"
        options={options(genres)}
        placeholder="Choose a genre"
        {...register("genre")}
      />
      <SelectField
        error={need(errors.ending?.message, "Say how it ends.")}
        hint="Some checks of the files depend on it."
        label="How it ends"
        options={options(endings)}
        placeholder="Choose an ending"
        {...register("ending")}
      />
      <SelectField
        error={need(errors.shape?.message, "Say how it goes.")}
        label="Shape"
        options={options(shapes)}
        placeholder="Choose a shape"
        {...register("shape")}
      />
      <SelectField
        error={need(errors.density?.message, "Say how full it is.")}
        label="How full it is"
        options={options(densities)}
        placeholder="Choose"
        {...register("density")}
      />
      <SelectField
        error={errors.voice?.message}
        label="Voice"
        options={options(voiceKinds)}
        {...register("voice")}
      />
      {voice !== "none" ? (
        <TextField
          error={errors.voiceLanguage?.message}
          hint="As a short code: en, fr, cy."
          label="Language of the words"
          optional
          {...register("voiceLanguage", { setValueAs: orNull })}
        />
      ) : (
        <SelectField label="Content" options={EXPLICIT} {...register("explicitContent")} />
      )}
      {voice !== "none" && (
        <SelectField label="Content" options={EXPLICIT} {...register("explicitContent")} />
      )}
      <TextAreaField
        className="@wide:col-span-2"
        error={
          errors.description && `Between 40 and 300 characters; this one has ${description.trim().length}.`
        }
        hint={`For somebody with a scene to fill: what is heard, and when it changes. ${description.trim().length} of 40 to 300 characters.`}
        label="Description"
        rows={3}
        {...register("description")}
      />
      <div className="space-y-5 @wide:col-span-2">
        <TermPicks control={control} hint="One to four." legend="Moods" most={4} name="moods" terms={moods} />
        <TermPicks
          control={control}
          hint="The ones that lead, one to eight."
          legend="Instruments"
          most={8}
          name="instruments"
          terms={instruments}
        />
        <TermPicks
          control={control}
          hint="Up to five scenes it was made for, if you like."
          legend="Uses"
          most={5}
          name="uses"
          terms={uses}
        />
      </div>
      <ListField
        control={control}
        hint="Up to fifteen of your own, with commas between."
        label="Keywords"
        name="keywords"
      />
      <ListField
        control={control}
        hint="Societies know a work by all its titles. Commas between."
        label="Other titles of this work"
        name="otherTitles"
      />
      <TextField
        error={errors.iswc?.message}
        hint="The number of the work, where a society has given one."
        label="ISWC"
        optional
        {...register("iswc")}
      />
      <TextField
        error={errors.yearRecorded && "A year with four digits."}
        inputMode="numeric"
        label="Year of the recording"
        optional
        {...register("yearRecorded", { setValueAs: numberOrNull })}
      />
      <ListField
        control={control}
        hint="Countries where a society holds the mandate: two letters each, with commas."
        label="Where the library may not license it"
        name="restrictedTerritories"
      />
      <ListField
        control={control}
        hint="For instance politics, religion, weapons. Commas between."
        label="Uses you refuse"
        name="refusedUses"
      />
    </div>
  );
}
