"use client";

import { useState } from "react";
import { Refusal } from "@/components/account/refusal";
import { type Act, useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { Fieldset } from "@/components/ui/choices";
import { CheckField } from "@/components/ui/field";
import { notify } from "@/components/ui/toaster";
import { WITHHOLDABLE, type Withholdable } from "@/lib/licensing/states";

interface WithheldFormProps {
  number: string;
  withheld: readonly string[];
  change: Act<{ number: string; withheld: Withholdable[] }, unknown>;
}

const FIELDS = Object.entries(WITHHOLDABLE) as [Withholdable, string][];

/** What the public page leaves out for now. The signed record stays the same and stays verifiable. */
export function WithheldForm({ number, withheld, change }: WithheldFormProps) {
  const [chosen, setChosen] = useState<readonly Withholdable[]>(
    FIELDS.flatMap(([field]) => (withheld.includes(field) ? [field] : [])),
  );
  const act = useAct(change);
  const toggle = (field: Withholdable) =>
    setChosen(chosen.includes(field) ? chosen.filter((one) => one !== field) : [...chosen, field]);
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        act.run({ number, withheld: [...chosen] }, () => notify({ title: "The public page is changed." }));
      }}
    >
      <Fieldset
        hint="For campaigns and clients that are confidential until a release. The fee, the address and who accepted are never shown."
        legend="Keep off the public page"
      >
        {FIELDS.map(([field, words]) => (
          <CheckField
            checked={chosen.includes(field)}
            className="py-1"
            key={field}
            onChange={() => toggle(field)}
          >
            {words}
          </CheckField>
        ))}
      </Fieldset>
      <Refusal failure={act.failure} />
      <Button busy={act.isRunning && "Changing"} className="mt-3" type="submit">
        Change the public page
      </Button>
    </form>
  );
}
