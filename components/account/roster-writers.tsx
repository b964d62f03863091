"use client";

import { useState } from "react";
import { endRole } from "@/app/(account)/actions";
import { Button } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { StatusSentence } from "@/components/ui/status-sentence";
import type { RosterWriter } from "@/lib/accounts";
import { ActButton } from "./act-button";
import { ConfirmNameForm } from "./confirm-name-form";

interface RosterWritersProps {
  writers: readonly RosterWriter[];
  mayConfirm: boolean;
  mayEnd: boolean;
}

function belowFor({ confirmed, email }: RosterWriter): string {
  if (!confirmed)
    return [email, "no name and IPI confirmed: shown as unconfirmed in deliveries"]
      .filter(Boolean)
      .join("; ");
  const ipi = confirmed.ipi ? `IPI ${confirmed.ipi}` : "no IPI";
  const legal = `legal name ${confirmed.legalName}`;
  return [email, ipi, confirmed.society, legal, `confirmed ${fmt.date(confirmed.confirmedAt)}`]
    .filter(Boolean)
    .join("; ");
}

export function RosterWriters({ writers, mayConfirm, mayEnd }: RosterWritersProps) {
  const [opened, setOpened] = useState<string | null>(null);
  return (
    <ul>
      {writers.map((writer) => {
        const isOpen = opened === writer.personId;
        const name = writer.confirmed?.creditName ?? writer.name;
        return (
          <li className="border-b border-line py-2.5" key={writer.personId}>
            <StatusSentence
              as="div"
              below={belowFor(writer)}
              end={
                <span className="flex flex-wrap justify-end gap-x-4">
                  {mayConfirm && (
                    <Button
                      aria-expanded={isOpen}
                      aria-label={`${writer.confirmed ? "Correct" : "Confirm"} ${name}`}
                      kind="quiet"
                      onClick={() => setOpened(isOpen ? null : writer.personId)}
                    >
                      {writer.confirmed ? "Correct" : "Confirm"}
                    </Button>
                  )}
                  {mayEnd && (
                    <ActButton
                      act={endRole}
                      busyWords="Ending"
                      input={{ membershipId: writer.membershipId }}
                      question={{
                        title: `End the role of ${name}?`,
                        consequence:
                          "No further cue can be delivered. Listed cues, shares and statements stay as they are.",
                      }}
                      words="End role"
                    />
                  )}
                </span>
              }
              mark={writer.confirmed ? "tick" : "half"}
            >
              {name}
            </StatusSentence>
            {isOpen && (
              <ConfirmNameForm
                isConfirmed={writer.confirmed !== null}
                onDone={() => setOpened(null)}
                writer={{
                  personId: writer.personId,
                  legalName: writer.confirmed?.legalName ?? writer.name,
                  creditName: writer.confirmed?.creditName ?? writer.name,
                  ipi: writer.confirmed?.ipi ?? "",
                  society: writer.confirmed?.society ?? "",
                }}
              />
            )}
          </li>
        );
      })}
    </ul>
  );
}
