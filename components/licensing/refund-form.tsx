"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { useForm } from "react-hook-form";
import { Refusal } from "@/components/account/refusal";
import { type Act, useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { Fieldset } from "@/components/ui/choices";
import { CheckField, TextAreaField } from "@/components/ui/field";
import { RefundLines } from "@/lib/licensing/schemas";

interface RefundFormProps {
  orderId: string;
  lines: readonly { id: string; words: string }[];
  refund: Act<{ orderId: string; lineIds: string[]; words: string }, unknown>;
}

/** Gives whole licences back, with the reason that the buyer reads. */
export function RefundForm({ orderId, lines, refund }: RefundFormProps) {
  const act = useAct(refund);
  const form = useForm({
    resolver: zodResolver(RefundLines),
    defaultValues: { orderId, lineIds: [] as string[], words: "" },
  });
  const { errors } = form.formState;
  return (
    <form
      className="grid gap-4"
      noValidate
      onSubmit={form.handleSubmit((given) => act.run(given, () => form.reset()))}
    >
      <Fieldset error={errors.lineIds?.message} legend="Which licences">
        {lines.map(({ id, words }) => (
          <CheckField className="py-1" key={id} value={id} {...form.register("lineIds")}>
            {words}
          </CheckField>
        ))}
      </Fieldset>
      <TextAreaField
        error={errors.words?.message}
        hint="The buyer reads it. A refunded licence ends at once and its record says so."
        label="Why"
        rows={3}
        {...form.register("words")}
      />
      <Refusal failure={act.failure} />
      <Button busy={act.isRunning && "Refunding"} type="submit" wide>
        Refund in full
      </Button>
    </form>
  );
}
