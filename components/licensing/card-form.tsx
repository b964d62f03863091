"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useRouter } from "next/navigation";
import { useForm } from "react-hook-form";
import { Refusal } from "@/components/account/refusal";
import { type Act, useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { Fieldset } from "@/components/ui/choices";
import { TextField } from "@/components/ui/field";
import { notify } from "@/components/ui/toaster";
import type { RateCard } from "@/lib/licensing/rate-card";
import { SetRateCard } from "@/lib/licensing/schemas";

interface CardFormProps {
  startsFrom: RateCard;
  save: Act<{ card: RateCard }, { version: number }>;
}

/** The figures of the next version. What is sold already keeps its price. */
export function CardForm({ startsFrom, save }: CardFormProps) {
  const act = useAct(save);
  const router = useRouter();
  const form = useForm({ resolver: zodResolver(SetRateCard), defaultValues: { card: startsFrom } });
  const errors = form.formState.errors.card;
  const publish = form.handleSubmit((given) =>
    act.run(given, ({ version }) => {
      notify({ title: `Version ${version} is in force.` });
      router.refresh();
    }),
  );
  return (
    <form className="grid gap-5" noValidate onSubmit={publish}>
      <Fieldset legend={`Base prices, ${startsFrom.currency}`}>
        <div className="grid gap-2">
          {startsFrom.classes.map(({ code, words }, index) => (
            <TextField
              error={errors?.classes?.[index]?.base?.message}
              inputMode="decimal"
              key={code}
              label={words}
              {...form.register(`card.classes.${index}.base`)}
            />
          ))}
        </div>
      </Fieldset>
      <TextField
        error={errors?.minimumFee?.message}
        inputMode="decimal"
        label="Minimum fee"
        {...form.register("card.minimumFee")}
      />
      <Fieldset legend="Territory, as factors">
        <div className="grid grid-cols-3 gap-2">
          {(["country", "region", "world"] as const).map((kind) => (
            <TextField
              error={errors?.territory?.[kind]?.message}
              inputMode="decimal"
              key={kind}
              label={kind === "world" ? "World" : `One ${kind}`}
              {...form.register(`card.territory.${kind}`)}
            />
          ))}
        </div>
      </Fieldset>
      <Fieldset legend="Term, as factors">
        <div className="grid grid-cols-2 gap-2">
          {startsFrom.terms.map(({ words }, index) => (
            <TextField
              error={errors?.terms?.[index]?.factor?.message}
              inputMode="decimal"
              key={words}
              label={words}
              {...form.register(`card.terms.${index}.factor`)}
            />
          ))}
        </div>
      </Fieldset>
      <Fieldset legend="Episodes, as factors">
        <div className="grid grid-cols-3 gap-2">
          {startsFrom.episodes.map(({ upTo }, index) => (
            <TextField
              error={errors?.episodes?.[index]?.factor?.message}
              inputMode="decimal"
              key={upTo}
              label={`Up to ${upTo}`}
              {...form.register(`card.episodes.${index}.factor`)}
            />
          ))}
        </div>
      </Fieldset>
      <Refusal failure={act.failure} />
      <Button busy={act.isRunning && "Publishing"} kind="main" type="submit" wide>
        Publish as a new version
      </Button>
    </form>
  );
}
