"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useState } from "react";
import { useForm } from "react-hook-form";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { Problem } from "@/components/ui/problem";
import { CreateProduction } from "@/lib/productions/schemas";
import { PRODUCTION_KINDS } from "@/lib/productions/states";

interface ProductionFormProps {
  create: (
    input: CreateProduction,
    operationId?: string,
  ) => Promise<{ ok: true } | { ok: false; message: string }>;
}

/** Begins a production of the buyer's company. */
export function ProductionForm({ create }: ProductionFormProps) {
  const [problem, setProblem] = useState<string | null>(null);
  const [operationId] = useState(() => crypto.randomUUID());
  const { register, handleSubmit, formState } = useForm({ resolver: zodResolver(CreateProduction) });
  const submit = handleSubmit(async (input) => {
    const answer = await create(input, operationId);
    if (answer && !answer.ok) setProblem(answer.message);
  });
  const { errors } = formState;
  return (
    <form className="grid gap-3" onSubmit={submit}>
      <TextField error={errors.title?.message} label="Title" {...register("title")} />
      <TextField
        error={errors.episode?.message}
        hint="What the music is licensed for; a series can have one production an episode."
        label="Episode or campaign"
        optional
        {...register("episode")}
      />
      <TextField
        error={errors.kind?.message}
        hint={`Such as ${PRODUCTION_KINDS.slice(0, 3).join(", ")}.`}
        label="What it is"
        list="production-kinds"
        {...register("kind")}
      />
      <datalist id="production-kinds">
        {PRODUCTION_KINDS.map((kind) => (
          <option key={kind} value={kind} />
        ))}
      </datalist>
      <TextField error={errors.client?.message} label="Client" optional {...register("client")} />
      <TextField
        error={errors.codeName?.message}
        hint="Shown to outsiders while the title is confidential."
        label="Code name"
        optional
        {...register("codeName")}
      />
      {problem && <Problem live>{problem}</Problem>}
      <Button busy={formState.isSubmitting && "Beginning it"} kind="main" type="submit" wide>
        Begin the production
      </Button>
    </form>
  );
}
