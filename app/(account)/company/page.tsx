import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { ActButton } from "@/components/account/act-button";
import { CompanyForm } from "@/components/account/company-form";
import { InviteForm } from "@/components/account/invite-form";
import { OpenInvitations } from "@/components/account/open-invitations";
import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { AsideTitle, Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { listInvitations, listSeats } from "@/lib/accounts";
import { isSignedIn } from "@/lib/kernel/actor";
import { viewer } from "@/lib/web";
import { endRole } from "../actions";
import { countryOptions } from "./countries";

const COMPANY_HOLDS = [
  {
    name: "Seats",
    value: "People of the company, invited by you: some find and propose, some also approve and pay.",
  },
  {
    name: "Productions",
    value:
      "Programmes, films and adverts, each with its shortlist. Music is priced for one production and its use.",
  },
  { name: "Licences", value: "Signed records that anybody can check, in the company’s name." },
  {
    name: "Invoices",
    value: "To the name and address written here, with the tax that belongs to its country.",
  },
];

export const metadata: Metadata = { title: "Your company" };

export default async function CompanyPage() {
  const { actor, roles } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in?to=/company");
  if (actor.kind !== "buyer") {
    return (
      <Page
        aside={
          <>
            <AsideTitle below="You get its first seat and may approve and pay.">
              Register a company
            </AsideTitle>
            <CompanyForm countries={countryOptions()} />
          </>
        }
        asideLabel="Register a company"
      >
        <HeadSentence>
          Music is licensed to a company, which keeps its productions and licences when people leave.
        </HeadSentence>
        <div className="mt-8 max-w-measure">
          <FactList rows={COMPANY_HOLDS} />
        </div>
      </Page>
    );
  }
  const seats = await listSeats(actor, {});
  const invitations = actor.mayApprove ? await listInvitations(actor, {}) : [];
  const aside = actor.mayApprove && (
    <>
      <AsideTitle below="A seat finds and proposes; it approves and pays where you say so.">
        Give a seat
      </AsideTitle>
      <InviteForm roles={["buyer"]} />
      <OpenInvitations invitations={invitations} />
    </>
  );
  return (
    <Page {...(aside ? { aside, asideLabel: "Give a seat" } : {})}>
      <HeadSentence place={roles.find((role) => role.current)?.label}>
        Your company has {fmt.count(seats.length, "seat")};{" "}
        {fmt.count(seats.filter((seat) => seat.mayApprove).length, "person", "people")} may approve and pay.
      </HeadSentence>
      <Section className="mt-8" head="Seats">
        <ul>
          {seats.map((seat) => (
            <StatusSentence
              as="li"
              below={seat.email}
              className="border-b border-line py-2.5"
              end={
                actor.mayApprove && (
                  <ActButton
                    act={endRole}
                    busyWords="Ending"
                    input={{ membershipId: seat.membershipId }}
                    question={{
                      title: `End the seat of ${seat.name}?`,
                      consequence: "Productions, shortlists and licences stay with the company.",
                    }}
                    words="End seat"
                  />
                )
              }
              key={seat.membershipId}
              mark={seat.mayApprove ? "done" : "half"}
            >
              {seat.name}, {seat.mayApprove ? "may approve and pay" : "may propose"}
            </StatusSentence>
          ))}
        </ul>
      </Section>
    </Page>
  );
}
