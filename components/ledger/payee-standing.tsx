import { fmt } from "@/components/ui/format";
import { Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import type { OwnPayee } from "@/lib/ledger";
import { PayeeForm } from "./payee-form";

interface PayeeStandingProps {
  payee: OwnPayee | null;
  countries: readonly { value: string; label: string }[];
  suggestedName: string;
}

/** Not next/link: the address answers with a redirect to the payment service, and is not to be fetched beforehand. */
function ToPaymentService({ words }: { words: string }) {
  return (
    <a className="link target" href="/api/payees/onboarding">
      {words}
    </a>
  );
}

/** Where payouts go, or what is still wanted before anything can be paid. Bank and identity stay with the payment service. */
export function PayeeStanding({ payee, countries, suggestedName }: PayeeStandingProps) {
  if (!payee)
    return (
      <>
        <Sentence className="mb-3">
          Nothing can be paid out yet. Earnings are kept meanwhile; none are lost by waiting.
        </Sentence>
        <PayeeForm countries={countries} legalName={suggestedName} />
      </>
    );
  if (!payee.isOpen)
    return (
      <StatusSentence below="Load this page again in a moment." mark="half">
        An account is being opened with the payment service for {payee.legalName}.
      </StatusSentence>
    );
  if (payee.state !== "ready")
    return (
      <StatusSentence
        below={<ToPaymentService words="Give bank and identity to the payment service" />}
        mark="half"
      >
        {payee.legalName} can be paid once the payment service knows bank and identity.
      </StatusSentence>
    );
  return (
    <StatusSentence
      below={
        <>
          {payee.heldUntil &&
            `The bank account was changed: nothing is paid until ${fmt.dateTime(payee.heldUntil)}. `}
          <ToPaymentService words="Change it at the payment service" />
        </>
      }
      mark={payee.heldUntil ? "held" : "done"}
    >
      Payouts to {payee.legalName} go to the account ending {payee.bankLast4 ?? "as given"}.
    </StatusSentence>
  );
}
