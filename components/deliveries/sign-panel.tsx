"use client";

import { useId, useState } from "react";
import { useFormContext } from "react-hook-form";
import { sign } from "@/app/(composer)/actions";
import { Refusal } from "@/components/account/refusal";
import { useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { CheckField, TextField } from "@/components/ui/field";
import { AsideTitle } from "@/components/ui/page";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Declaration } from "@/lib/deliveries/schemas";
import { type DraftInput, type DraftOutput, STEPS, type StepId } from "./draft-form";
import type { Missing } from "./use-missing";

interface SignPanelProps {
  deliveryId: string;
  libraryName: string;
  missing: readonly Missing[];
  goTo: (step: StepId) => void;
  flush: () => Promise<boolean>;
  onSigned: () => Promise<void>;
  isMain: boolean;
}

/** What is still missing, in words, each a step away; then the signature. */
export function SignPanel(props: SignPanelProps) {
  const { deliveryId, libraryName, missing, goTo, flush, onSigned, isMain } = props;
  const { register, formState, getValues, trigger } = useFormContext<DraftInput, unknown, DraftOutput>();
  const signing = useAct(sign);
  const [isFlushing, setFlushing] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const [operationId] = useState(() => crypto.randomUUID());
  const errors = formState.errors.declaration;
  const listId = useId();
  const open = missing.filter((item) => item.step !== "sign");
  const submit = async () => {
    setProblem(null);
    if (open.length > 0) {
      setProblem("Before it can be signed, the points above are needed. What you wrote is kept.");
      return;
    }
    if (!(await trigger(["declaration.truth", "declaration.signedName"]))) return;
    const declaration = Declaration.safeParse(getValues("declaration"));
    if (!declaration.success) {
      setProblem(declaration.error.issues[0]?.message ?? "A declaration is missing.");
      return;
    }
    setFlushing(true);
    const kept = await flush();
    setFlushing(false);
    if (!kept) {
      setProblem("What you wrote has not reached the site yet, so it was not signed. Try again in a moment.");
      return;
    }
    signing.run({ deliveryId, declaration: getValues("declaration") }, () => void onSigned(), operationId);
  };
  return (
    <>
      <AsideTitle below={`It then goes to ${libraryName}, is screened, and its co-writers are asked.`}>
        Sign and deliver
      </AsideTitle>
      {open.length > 0 ? (
        <div>
          <h3 className="font-strong" id={listId}>
            Still needed
          </h3>
          <ul aria-labelledby={listId} className="mt-1 border-t-[1.5px] border-buff-2">
            {STEPS.filter((step) => open.some((item) => item.step === step.id)).map((step) => (
              <StatusSentence
                as="li"
                className="border-b border-buff-2 py-2"
                end={
                  <Button aria-label={`Go there: ${step.words}`} kind="quiet" onClick={() => goTo(step.id)}>
                    Go there
                  </Button>
                }
                key={step.id}
                mark="open"
              >
                {step.words}:{" "}
                {open
                  .filter((item) => item.step === step.id)
                  .map((item) => item.words)
                  .join("; ")}
              </StatusSentence>
            ))}
          </ul>
        </div>
      ) : (
        <StatusSentence mark="done">Everything that is needed is here.</StatusSentence>
      )}
      <div className="mt-5 space-y-4" hidden={open.length > 0}>
        <CheckField error={errors?.truth?.message} {...register("declaration.truth")}>
          All of this is true. I know that a false declaration can lead to refusal, reversed payments and
          removal.
        </CheckField>
        <TextField
          autoComplete="name"
          error={errors?.signedName?.message}
          hint="It is kept with the time, the wording and a hash of your answers."
          label="Your name, as signature"
          {...register("declaration.signedName")}
        />
        <div aria-live="polite">{problem && <StatusSentence mark="warn">{problem}</StatusSentence>}</div>
        <Refusal failure={signing.failure} />
        <Button
          busy={(isFlushing || signing.isRunning) && "Delivering"}
          kind={isMain ? "main" : "plain"}
          onClick={() => void submit()}
          wide
        >
          Sign and deliver
        </Button>
      </div>
    </>
  );
}
