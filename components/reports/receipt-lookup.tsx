"use client";

import { useRef, useState } from "react";
import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { MISTYPED, receiptNumberOf } from "@/lib/reports/schemas";

/** A number that was mistyped is told apart before anything is looked up. No form of its own: it may stand inside one. */
export function ReceiptLookup({ typed = "" }: { typed?: string }) {
  const input = useRef<HTMLInputElement>(null);
  const [error, setError] = useState<string | undefined>(undefined);
  const look = () => {
    const number = receiptNumberOf(input.current?.value ?? "");
    if (number) return window.location.assign(`/report/${number}`);
    setError(MISTYPED);
    input.current?.focus();
  };
  return (
    <div className="grid max-w-md gap-3">
      <TextField
        autoComplete="off"
        defaultValue={typed}
        error={error}
        hint="It stands in the mail we sent: RN, the year, eight characters and a check character."
        label="Number of your report"
        onKeyDown={(event) => {
          if (event.key !== "Enter") return;
          event.preventDefault();
          look();
        }}
        ref={input}
        spellCheck={false}
      />
      <Button className="justify-self-start" onClick={look}>
        Show its state
      </Button>
    </div>
  );
}
