"use client";

import { useFormContext, useWatch } from "react-hook-form";
import { Choices } from "@/components/ui/choices";
import { CheckField, TextField } from "@/components/ui/field";
import { Section } from "@/components/ui/sentence";
import type { DraftInput, DraftOutput } from "./draft-form";
import { PaperField } from "./paper-field";
import { SamplesField } from "./samples-field";
import type { DeliveryOnWire } from "./wire";

interface DeclarationsStepProps {
  delivery: DeliveryOnWire;
  onPaper: () => void;
}

/** What is declared of this family, item by item. It is evidence for later, and says who answers for what. */
export function DeclarationsStep({ delivery, onPaper }: DeclarationsStepProps) {
  const { register, control, formState } = useFormContext<DraftInput, unknown, DraftOutput>();
  const errors = formState.errors.declaration;
  const preExisting = useWatch({ control, name: "declaration.preExisting" });
  const performers = useWatch({ control, name: "declaration.performers" });
  return (
    <div className="space-y-8">
      <Section head="Who wrote it" note="declaration 1">
        <CheckField error={errors?.authorship?.message} {...register("declaration.authorship")}>
          I wrote this music, alone or with the writers I named, and I named every one of them.
        </CheckField>
      </Section>
      <Section head="The recording" note="declaration 2">
        <div className="space-y-4">
          <TextField
            error={errors?.recordingOwner?.message}
            hint="A person or a company."
            label="Who owns the master"
            {...register("declaration.recordingOwner")}
          />
          <Choices
            error={errors?.performers?.message}
            legend="Who performed"
            options={[
              { value: "all performed by me", sentence: "I performed all of it." },
              {
                value: "all consented in writing",
                sentence: "Others performed, and all of them consented in writing.",
                ...(performers === "all consented in writing"
                  ? {
                      inside: (
                        <PaperField
                          deliveryId={delivery.id}
                          onPaper={onPaper}
                          paper={null}
                          words="Add the session form"
                        />
                      ),
                    }
                  : {}),
              },
            ]}
            {...register("declaration.performers")}
          />
          {delivery.papers.length > 0 && (
            <p className="text-small text-ink-soft">
              Kept with this delivery: {delivery.papers.map((paper) => paper.name).join(", ")}.
            </p>
          )}
        </div>
      </Section>
      <Section head="Samples and loops" note="declaration 3">
        <SamplesField deliveryId={delivery.id} onPaper={onPaper} papers={delivery.papers} />
      </Section>
      <Section head="Music that was there before" note="declaration 4">
        <Choices
          legend="Does it use an older tune or work?"
          options={[
            { value: "none", sentence: "No." },
            {
              value: "public-domain tune",
              sentence: "Yes, a tune that is in the public domain.",
              below: "Say which tune, from where, and why it is free in which countries.",
            },
            {
              value: "arrangement with permission",
              sentence: "Yes, an arrangement with permission.",
              below: "Say whose work it is and who gave the permission.",
            },
          ]}
          {...register("declaration.preExisting")}
        />
        {preExisting !== "none" && (
          <TextField
            className="mt-3"
            error={errors?.preExistingWords?.message}
            label="Which, and on what ground"
            {...register("declaration.preExistingWords")}
          />
        )}
      </Section>
      <Section head="The deal" note="declaration 7">
        <Choices
          legend="For this cue"
          options={[
            {
              value: "exclusive",
              sentence: `Only ${delivery.libraryName} licenses it.`,
              below: "This is said for each cue, not for you as a person.",
            },
            {
              value: "non-exclusive",
              sentence: "Others may license it too.",
              below: "Under the same title or another.",
            },
          ]}
          {...register("declaration.deal")}
        />
      </Section>
    </div>
  );
}
