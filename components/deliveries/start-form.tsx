"use client";

import { useState } from "react";
import { startADelivery } from "@/app/(composer)/actions";
import { Refusal } from "@/components/account/refusal";
import { useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";

/** A title, which may still change; the draft is kept from then on. */
export function StartForm() {
  const start = useAct(startADelivery);
  const [title, setTitle] = useState("");
  const [operationId] = useState(() => crypto.randomUUID());
  return (
    <form
      className="max-w-[34rem] space-y-4"
      onSubmit={(event) => {
        event.preventDefault();
        start.run({ title }, undefined, operationId);
      }}
    >
      <TextField
        error={start.fieldError("title")}
        hint="It can change until you sign. No artists, brands or other works in it."
        label="Title"
        name="title"
        onChange={(event) => setTitle(event.target.value)}
        optional
        value={title}
      />
      <Refusal failure={start.failure} shownAtFields={["title"]} />
      <Button busy={start.isRunning && "Starting"} kind="main" type="submit">
        Start the delivery
      </Button>
    </form>
  );
}
