import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { ActButton } from "@/components/account/act-button";
import { InviteForm } from "@/components/account/invite-form";
import { OpenInvitations } from "@/components/account/open-invitations";
import { RosterWriters } from "@/components/account/roster-writers";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { AsideTitle, Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { listInvitations, listRoster, type RosterMember } from "@/lib/accounts";
import { OWNER_GIVES, ROLE_WORDS, STAFF_GRANT_WORDS, STAFF_GRANTS } from "@/lib/accounts/states";
import { isSignedIn } from "@/lib/kernel/actor";
import { viewer } from "@/lib/web";
import { endRole } from "../actions";

export const metadata: Metadata = { title: "Roster" };

function headFor(writers: readonly { confirmed: unknown }[]): string {
  const open = writers.filter((writer) => !writer.confirmed).length;
  if (writers.length === 0) return "Nobody writes for this library yet.";
  if (open === 0) return `${fmt.count(writers.length, "writer")}, each with name and IPI confirmed.`;
  return `${fmt.count(writers.length, "writer")}; ${open} still without a confirmed name and IPI.`;
}

function grantsOf(member: RosterMember): string | undefined {
  if (member.endsAt) return `Until ${fmt.date(member.endsAt)}`;
  const words = STAFF_GRANTS.filter((grant) => member.granted.includes(grant)).map(
    (grant) => STAFF_GRANT_WORDS[grant],
  );
  return words.length > 0 ? `May also ${new Intl.ListFormat("en-GB").format(words)}` : undefined;
}

export default async function RosterPage() {
  const { actor, roles } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in?to=/roster");
  const isOfLibrary = ["owner", "staff", "moderator", "accountant", "auditor"].includes(actor.kind);
  if (!isOfLibrary || ("libraryId" in actor && actor.libraryId === null)) notFound();
  const isOwner = actor.kind === "owner";
  const roster = await listRoster(actor, {});
  const invitations = isOwner ? await listInvitations(actor, {}) : [];
  const aside = isOwner && (
    <>
      <AsideTitle below="They get a mail with a link and choose a password themselves.">
        Invite somebody
      </AsideTitle>
      <InviteForm roles={OWNER_GIVES} />
      <OpenInvitations invitations={invitations} />
    </>
  );
  return (
    <Page {...(aside ? { aside, asideLabel: "Invite somebody" } : {})}>
      <HeadSentence place={`Roster, as ${roles.find((role) => role.current)?.label}`}>
        {headFor(roster.writers)}
      </HeadSentence>
      <Section className="mt-8" head="Writers">
        {roster.writers.length > 0 ? (
          <RosterWriters
            mayConfirm={isOwner || actor.kind === "staff"}
            mayEnd={isOwner}
            writers={roster.writers}
          />
        ) : (
          <Empty>
            Writers stand here with the names and numbers that go on cue sheets. Invite one as composer.
          </Empty>
        )}
      </Section>
      <Section className="mt-10" head="Other people of the library">
        <ul>
          {roster.members.map((member) => (
            <StatusSentence
              as="li"
              below={grantsOf(member)}
              className="border-b border-line py-2.5"
              end={
                isOwner &&
                member.role !== "owner" &&
                member.role !== "auditor" && (
                  <ActButton
                    act={endRole}
                    busyWords="Ending"
                    input={{ membershipId: member.membershipId }}
                    question={{
                      title: `End the role of ${member.name}?`,
                      consequence: `${member.name} is then no longer ${ROLE_WORDS[member.role]} here. What was decided or paid stays.`,
                    }}
                    words="End role"
                  />
                )
              }
              key={member.membershipId}
              mark="done"
            >
              {member.name}, {ROLE_WORDS[member.role]}
            </StatusSentence>
          ))}
        </ul>
      </Section>
    </Page>
  );
}
