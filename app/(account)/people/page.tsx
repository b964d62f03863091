import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { ActButton } from "@/components/account/act-button";
import { InviteForm } from "@/components/account/invite-form";
import { OpenInvitations } from "@/components/account/open-invitations";
import { PeopleSearch } from "@/components/account/people-search";
import { Disclosure } from "@/components/ui/disclosure";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { AsideTitle, Page } from "@/components/ui/page";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { listInvitations, listPeople, type PersonEntry } from "@/lib/accounts";
import { ROLES } from "@/lib/accounts/states";
import { isSignedIn } from "@/lib/kernel/actor";
import { viewer } from "@/lib/web";
import { disableAccount, enableAccount, endRole, resetFactor } from "../actions";
import { type SearchParams, wordOf } from "../where-to";

export const metadata: Metadata = { title: "People" };

const INVITED = ROLES.filter((role) => role !== "buyer");

function Entry({ person, isSelf }: { person: PersonEntry; isSelf: boolean }) {
  const roles = person.roles.map((role) => role.label);
  const facts = [
    person.email,
    roles.length > 0 ? roles.join(", ") : "no role",
    person.hasSecondFactor ? "second factor in use" : "no second factor",
  ];
  const input = { personId: person.id };
  return (
    <li className="border-b border-line py-2.5">
      <StatusSentence as="div" below={facts.join("; ")} mark={person.disabledAt ? "held" : "done"}>
        {person.name}
        {person.disabledAt && `, disabled since ${fmt.date(person.disabledAt)}`}
      </StatusSentence>
      <Disclosure className="mt-1 ml-[1.4375rem]" words={`Change something for ${person.name}`}>
        <div className="flex flex-wrap gap-x-5 gap-y-2">
          {person.roles.map((role) => (
            <ActButton
              act={endRole}
              busyWords="Ending"
              input={{ membershipId: role.membershipId }}
              key={role.membershipId}
              question={{
                title: `End a role of ${person.name}?`,
                consequence: `${person.name} is then no longer ${role.label}.`,
              }}
              words={`End ${role.label}`}
            />
          ))}
          {person.hasSecondFactor && (
            <ActButton
              act={resetFactor}
              busyWords="Resetting"
              input={input}
              question={{
                title: `Reset the second factor of ${person.name}?`,
                consequence:
                  "Factor, password and sessions are taken away together; the person comes in by a link and sets both again. Be sure who asked.",
              }}
              words="Reset second factor"
            />
          )}
          {person.disabledAt && (
            <ActButton act={enableAccount} busyWords="Enabling" input={input} words="Enable again" />
          )}
          {!person.disabledAt && !isSelf && (
            <ActButton
              act={disableAccount}
              busyWords="Disabling"
              input={input}
              question={{
                title: `Disable the account of ${person.name}?`,
                consequence: "Every session ends at once. What the person made stays.",
              }}
              words="Disable"
            />
          )}
        </div>
      </Disclosure>
    </li>
  );
}

export default async function PeoplePage({ searchParams }: { searchParams: SearchParams }) {
  const { actor } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in?to=/people");
  if (actor.kind !== "admin") notFound();
  const text = (wordOf((await searchParams).text) ?? "").slice(0, 100);
  const { people, isCut, libraries } = await listPeople(actor, { text });
  return (
    <Page
      aside={
        <>
          <AsideTitle below="Every role given or ended stands in the log.">Give a role</AsideTitle>
          <InviteForm libraries={libraries} roles={INVITED} />
          <OpenInvitations invitations={await listInvitations(actor, {})} />
        </>
      }
      asideLabel="Give a role"
    >
      <HeadSentence place="People">
        {isCut ? `More than ${people.length} people` : fmt.count(people.length, "person", "people")}
        {text ? ` with “${text}” in name or address.` : " with an account."}
      </HeadSentence>
      <PeopleSearch text={text} />
      <Section className="mt-6" head="Accounts">
        <ul>
          {people.map((person) => (
            <Entry isSelf={person.id === actor.personId} key={person.id} person={person} />
          ))}
        </ul>
        {people.length === 0 && <Empty>Nobody has this in name or address.</Empty>}
        {isCut && <Sentence soft>Write a part of the name to see the others.</Sentence>}
      </Section>
    </Page>
  );
}
