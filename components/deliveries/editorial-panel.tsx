"use client";

import { useState } from "react";
import { acceptIntoCatalogue, handIn, sendBack } from "@/app/(composer)/actions";
import { Refusal } from "@/components/account/refusal";
import { useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { Fieldset } from "@/components/ui/choices";
import { CheckField, TextAreaField } from "@/components/ui/field";
import { AsideTitle } from "@/components/ui/page";
import { EDITORIAL_CODES, type EditorialCode } from "@/lib/deliveries/states";
import type { DeliveryOnWire } from "./wire";

interface PanelProps {
  delivery: DeliveryOnWire;
  onDone: () => void;
}

const CODES = Object.entries(EDITORIAL_CODES) as [EditorialCode, string][];

/** The library listens and takes it in, or sends it back with reasons that somebody can act on. */
export function EditorialPanel({ delivery, onDone, isMain }: PanelProps & { isMain: boolean }) {
  const accept = useAct(acceptIntoCatalogue);
  const back = useAct(sendBack);
  const [isOpen, setOpen] = useState(false);
  const [codes, setCodes] = useState<EditorialCode[]>([]);
  const [notes, setNotes] = useState("");
  const lines = notes
    .split("\n")
    .map((line) => line.trim())
    .filter(Boolean);
  return (
    <section className="mb-8">
      <AsideTitle below="It lists by itself once it is screened clear and every writer has accepted.">
        Take it into the catalogue?
      </AsideTitle>
      <div className="space-y-3">
        <Button
          busy={accept.isRunning && "Accepting"}
          kind={isMain && !isOpen ? "main" : "plain"}
          onClick={() => accept.run({ deliveryId: delivery.id }, onDone)}
          wide
        >
          Accept into the catalogue
        </Button>
        <Refusal failure={accept.failure} />
        <Button aria-expanded={isOpen} kind="quiet" onClick={() => setOpen(!isOpen)}>
          Send it back instead
        </Button>
        {isOpen && (
          <form
            className="space-y-4"
            onSubmit={(event) => {
              event.preventDefault();
              back.run({ deliveryId: delivery.id, codes, notes: lines }, onDone);
            }}
          >
            <Fieldset error={back.fieldError("codes")} legend="For which reasons">
              {CODES.map(([code, words]) => (
                <CheckField
                  checked={codes.includes(code)}
                  key={code}
                  onChange={(event) =>
                    setCodes(
                      event.target.checked ? [...codes, code] : codes.filter((other) => other !== code),
                    )
                  }
                >
                  {code}: {words}
                </CheckField>
              ))}
            </Fieldset>
            <TextAreaField
              error={back.fieldError("notes") ?? back.fieldError("notes.0")}
              hint="One concrete thing a line; for quality, two of them."
              label="What to change"
              onChange={(event) => setNotes(event.target.value)}
              rows={4}
              value={notes}
            />
            <Refusal failure={back.failure} shownAtFields={["codes", "notes", "notes.0"]} />
            <Button
              busy={back.isRunning && "Sending back"}
              kind={isMain ? "main" : "plain"}
              type="submit"
              wide
            >
              Send it back
            </Button>
          </form>
        )}
      </div>
    </section>
  );
}

/** A delivery that was sent back goes in again; everything that was right is kept. */
export function HandInPanel({ delivery, onDone }: PanelProps) {
  const again = useAct(handIn);
  const [words, setWords] = useState("");
  const returned = delivery.events.findLast((event) => event.codes.length > 0);
  return (
    <section className="mb-8">
      <AsideTitle below="Replace files in their rows first, if that is what was asked. Everything else is kept.">
        Hand it in again
      </AsideTitle>
      {returned && (
        <blockquote className="border-y-[1.5px] border-buff-2 py-3 whitespace-pre-line">
          {returned.words}
        </blockquote>
      )}
      <form
        className="mt-4 space-y-4"
        onSubmit={(event) => {
          event.preventDefault();
          again.run({ deliveryId: delivery.id, words }, onDone);
        }}
      >
        <TextAreaField
          error={again.fieldError("words")}
          label="What you changed"
          onChange={(event) => setWords(event.target.value)}
          rows={3}
          value={words}
        />
        <Refusal failure={again.failure} shownAtFields={["words"]} />
        <Button busy={again.isRunning && "Handing in"} kind="main" type="submit" wide>
          Hand it in again
        </Button>
      </form>
    </section>
  );
}
