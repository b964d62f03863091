"use client";

import { type Control, useWatch } from "react-hook-form";
import { fmt } from "@/components/ui/format";
import {
  DraftForm,
  type DraftInput,
  type DraftOutput,
  type StepId,
  stepOfField,
  sumOf,
  WORDS_OF_FIELDS,
} from "./draft-form";
import type { DeliveryOnWire } from "./wire";

export interface Missing {
  step: StepId;
  words: string;
}

function missingFiles(delivery: DeliveryOnWire, onTheWay: number): Missing[] {
  const { versions } = delivery;
  const words: string[] = [];
  const heads = versions.filter((version) => version.versionRole === "full").length;
  if (versions.length === 0) words.push("at least one file");
  else if (heads !== 1 && !delivery.draft.linkedFamilyId)
    words.push(heads === 0 ? "one version must be the full mix" : "only one version can be the full mix");
  const waiting = versions.filter((version) => ["arrived", "measuring"].includes(version.state)).length;
  if (waiting > 0) words.push(`${fmt.countWord(waiting, "file")} still being measured`);
  if (onTheWay > 0) words.push(`${fmt.countWord(onTheWay, "file")} still on the way`);
  const repeated = versions.filter((version) => version.words.startsWith("You already delivered"));
  for (const version of [...versions.filter((row) => row.state === "unreadable"), ...repeated])
    words.push(`${version.fileName} must be replaced or taken out`);
  return words.map((entry) => ({ step: "files", words: entry }));
}

/** What a signature would still be refused for, by step. */
export function useMissing(
  control: Control<DraftInput, unknown, DraftOutput>,
  delivery: DeliveryOnWire,
  onTheWay: number,
): Missing[] {
  const values = useWatch({ control }) as DraftInput;
  const parsed = DraftForm.safeParse(values);
  const found = missingFiles(delivery, onTheWay);
  const seen = new Set<string>();
  const add = (step: StepId, words: string) => {
    if (!seen.has(words)) found.push({ step, words });
    seen.add(words);
  };
  for (const issue of parsed.error?.issues ?? []) {
    const step = stepOfField(issue.path);
    const field = String(issue.path[0] === "declaration" ? issue.path[1] : issue.path[0]);
    add(step, WORDS_OF_FIELDS[field] ?? field);
  }
  for (const side of ["writers", "publishers"] as const) {
    const rows = values[side] ?? [];
    const sum = sumOf(rows);
    if (rows.length > 0 && !sum.isWhole) add("writers", `the ${side}’ shares make ${sum.words}`);
  }
  return found;
}
