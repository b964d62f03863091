"use client";

import { useState, useTransition } from "react";
import { Button } from "@/components/ui/button";
import { Disclosure } from "@/components/ui/disclosure";
import { CheckField } from "@/components/ui/field";
import { Problem } from "@/components/ui/problem";
import { AUTHORITY_STATEMENT } from "@/lib/licensing/states";

type Answer = { ok: true } | { ok: false; message: string };

/** Sends the browser to the payment service's page of an approved order. */
export async function goToPayment(orderId: string): Promise<string | null> {
  const answer = await fetch(`/api/orders/${orderId}/checkout`, { method: "POST" }).catch(() => null);
  const body = answer ? await answer.json().catch(() => null) : null;
  if (answer?.ok && body?.state === "open") {
    window.location.assign(body.url);
    return null;
  }
  if (answer?.ok && body?.state === "paid") {
    window.location.assign(`/orders/${orderId}?paid=1`);
    return null;
  }
  return (
    body?.error?.message ??
    "The payment service could not be reached. The order is kept; try again in a moment."
  );
}

interface ApprovePanelProps {
  orderId: string;
  gross: string;
  terms: { version: string; text: string };
  approve: (input: { orderId: string; termsVersion: string; mayAccept: true }) => Promise<Answer>;
}

/** The terms, the sentence about authority, and the one way on. */
export function ApprovePanel({ orderId, gross, terms, approve }: ApprovePanelProps) {
  const [mayAccept, setMayAccept] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);
  const [pending, start] = useTransition();
  const go = () =>
    start(async () => {
      if (!mayAccept) {
        setProblem("Tick the sentence about your authority first; without it there is no licence.");
        return;
      }
      const answer = await approve({ orderId, termsVersion: terms.version, mayAccept: true });
      setProblem(answer.ok ? await goToPayment(orderId) : answer.message);
    });
  return (
    <div className="grid gap-4">
      <Disclosure words={`Read the terms in full, version ${terms.version}`}>
        <div
          className="max-h-80 overflow-y-auto rounded-plain border border-ink-soft bg-page p-3 text-small whitespace-pre-line"
          // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reached by the keyboard
          tabIndex={0}
        >
          {terms.text}
        </div>
      </Disclosure>
      <CheckField checked={mayAccept} onChange={(event) => setMayAccept(event.target.checked)}>
        {AUTHORITY_STATEMENT}
      </CheckField>
      {problem && <Problem live>{problem}</Problem>}
      <Button busy={pending && "Going to payment"} kind="main" onClick={go} wide>
        Accept and pay {gross}
      </Button>
      <p className="text-small text-ink-soft">
        You pay on the payment service’s own page. Your name, the time and the version of the terms are kept
        in the record.
      </p>
    </div>
  );
}

export function PayButton({ orderId, gross }: { orderId: string; gross: string }) {
  const [problem, setProblem] = useState<string | null>(null);
  const [pending, start] = useTransition();
  return (
    <>
      {problem && (
        <Problem className="mb-3" live>
          {problem}
        </Problem>
      )}
      <Button
        busy={pending && "Going to payment"}
        kind="main"
        onClick={() => start(async () => setProblem(await goToPayment(orderId)))}
        wide
      >
        Pay {gross}
      </Button>
    </>
  );
}
