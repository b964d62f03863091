"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import type { z } from "zod";
import { confirmWriter } from "@/app/(account)/actions";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { ConfirmName } from "@/lib/accounts/schemas";
import { Refusal } from "./refusal";
import { useAct } from "./use-act";

interface ConfirmNameFormProps {
  writer: { personId: string; legalName: string; creditName: string; ipi: string; society: string };
  isConfirmed: boolean;
  onDone: () => void;
}

export function ConfirmNameForm({ writer, isConfirmed, onDone }: ConfirmNameFormProps) {
  const confirm = useAct(confirmWriter);
  const form = useForm<z.input<typeof ConfirmName>, unknown, z.output<typeof ConfirmName>>({
    resolver: zodResolver(ConfirmName),
    defaultValues: writer,
  });
  const { errors } = form.formState;
  const errorAt = (name: "legalName" | "creditName" | "ipi" | "society") =>
    errors[name]?.message ?? confirm.fieldError(name);
  // The verb parses what was typed itself, so the raw values go there and not the parsed ones.
  const submit = form.handleSubmit(() => confirm.run(form.getValues(), onDone));
  return (
    <form className="grid gap-4 py-3 sm:grid-cols-2" noValidate onSubmit={submit}>
      <TextField
        error={errorAt("legalName")}
        hint="As it stands in the contract."
        label="Legal name"
        {...form.register("legalName")}
      />
      <TextField
        error={errorAt("creditName")}
        hint="As it stands in credits and cue sheets."
        label="Credit name"
        {...form.register("creditName")}
      />
      <TextField
        error={errorAt("ipi")}
        hint="Eleven digits; the last two check the others."
        inputMode="numeric"
        label="IPI name number"
        optional
        {...form.register("ipi")}
      />
      <TextField
        error={errorAt("society")}
        hint="Where the writer is registered."
        label="Society"
        optional
        {...form.register("society")}
      />
      <div className="sm:col-span-2">
        <Refusal
          className="mb-3"
          failure={confirm.failure}
          shownAtFields={["legalName", "creditName", "ipi", "society"]}
        />
        <Button busy={confirm.isRunning && "Confirming"} type="submit">
          {isConfirmed ? "Confirm these instead" : "Confirm name and IPI"}
        </Button>
      </div>
    </form>
  );
}
