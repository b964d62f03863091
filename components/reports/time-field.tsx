"use client";

import { useState } from "react";
import { TextField } from "@/components/ui/field";
import { clockOf, secondsOf } from "./notice-form";

interface TimeFieldProps {
  label: string;
  value: number | null | undefined;
  onChange: (seconds: number | null) => void;
  onBlur: () => void;
  error?: string | undefined;
  placeholder: string;
}

/** A place in a recording as minutes and seconds. */
export function TimeField({ label, value, onChange, onBlur, error, placeholder }: TimeFieldProps) {
  const [typed, setTyped] = useState("");
  const isTheirs = Object.is(secondsOf(typed), value ?? null);
  return (
    <TextField
      className="w-28"
      error={error}
      inputMode="numeric"
      label={label}
      onBlur={onBlur}
      onChange={(event) => {
        setTyped(event.target.value);
        onChange(secondsOf(event.target.value));
      }}
      optional
      placeholder={placeholder}
      value={isTheirs || value === null || value === undefined ? typed : clockOf(value)}
    />
  );
}
