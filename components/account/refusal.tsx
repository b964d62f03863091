"use client";

import { usePathname } from "next/navigation";
import { TextLink } from "@/components/ui/button";
import { Problem } from "@/components/ui/problem";
import type { ActionResult } from "@/lib/web";

interface RefusalProps {
  failure: Extract<ActionResult<unknown>, { ok: false }> | null;
  /** Fields that show their own message. */
  shownAtFields?: readonly string[];
  className?: string;
}

/** Why an action was refused. Where the second factor is asked for again, the way there and back. */
export function Refusal({ failure, shownAtFields = [], className }: RefusalProps) {
  const pathname = usePathname();
  if (!failure) return null;
  if (shownAtFields.some((name) => failure.fields[name] !== undefined)) return null;
  const needsCode = failure.fields.secondFactor === "again";
  const remedy = needsCode ? (
    <TextLink href={`/sign-in/second-factor?again=1&to=${encodeURIComponent(pathname)}`}>
      Give the code
    </TextLink>
  ) : undefined;
  return (
    <Problem className={className ?? "mt-3"} live remedy={remedy}>
      {failure.message}
    </Problem>
  );
}
