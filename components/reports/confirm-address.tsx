"use client";

import { useEffect, useState } from "react";
import { confirmAddress } from "@/app/(shop)/report/actions";
import { Refusal } from "@/components/account/refusal";
import { useAct } from "@/components/account/use-act";
import { Button } from "@/components/ui/button";
import { AsideTitle } from "@/components/ui/page";
import { Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { ConfidentialUpload } from "./confidential-upload";

const placeOf = (receiptNumber: string) => `sedgewren.ticket:${receiptNumber}`;

interface ConfirmAddressProps {
  receiptNumber: string;
  /** From the link in the mail. */
  secret: string | null;
  isConfirmed: boolean;
  expectsRecording: boolean;
}

/** One button confirms the address; then, where a recording was announced, one upload in confidence. */
export function ConfirmAddress(props: ConfirmAddressProps) {
  const { receiptNumber, secret, expectsRecording } = props;
  const [ticket, setTicket] = useState<string | null>(null);
  const [isConfirmed, setConfirmed] = useState(props.isConfirmed);
  const confirm = useAct(confirmAddress);
  useEffect(() => setTicket(localStorage.getItem(placeOf(receiptNumber))), [receiptNumber]);

  if (ticket && expectsRecording)
    return (
      <ConfidentialUpload onDone={() => localStorage.removeItem(placeOf(receiptNumber))} ticket={ticket} />
    );
  if (isConfirmed)
    return (
      <StatusSentence
        below={
          expectsRecording
            ? "The recording can be sent from the browser in which the link was opened, within 48 hours."
            : undefined
        }
        mark="done"
      >
        Your address is confirmed; answers reach you there.
      </StatusSentence>
    );
  if (!secret)
    return (
      <>
        <AsideTitle>Confirm your address</AsideTitle>
        <Sentence>
          A mail with a link is on its way to the address you gave. The report is read either way; after you
          have confirmed the address, answers reach you
          {expectsRecording && " and you can send your recording in confidence"}.
        </Sentence>
      </>
    );
  const press = () =>
    confirm.run({ secret }, ({ uploadTicket }) => {
      if (uploadTicket) localStorage.setItem(placeOf(receiptNumber), uploadTicket);
      setTicket(uploadTicket);
      setConfirmed(true);
      window.history.replaceState(null, "", `/report/${receiptNumber}`);
    });
  return (
    <>
      <AsideTitle below="One press, and answers about this report reach you there.">
        Is this address yours?
      </AsideTitle>
      <Button busy={confirm.isRunning && "Confirming"} kind="main" onClick={press} wide>
        Confirm this address
      </Button>
      <Refusal failure={confirm.failure} />
    </>
  );
}
