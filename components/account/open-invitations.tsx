"use client";

import { takeInvitationBack } from "@/app/(account)/actions";
import { fmt } from "@/components/ui/format";
import { Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import type { OpenInvitationEntry } from "@/lib/accounts";
import { ActButton } from "./act-button";

export function OpenInvitations({ invitations }: { invitations: readonly OpenInvitationEntry[] }) {
  if (invitations.length === 0) return null;
  return (
    <Section className="mt-8" head="Invitations not yet accepted">
      <ul>
        {invitations.map((invitation) => (
          <StatusSentence
            as="li"
            below={`${invitation.email}; until ${fmt.date(invitation.expiresAt)}`}
            className="border-b border-line py-2.5 in-[.buff]:border-buff-2"
            end={
              <ActButton
                act={takeInvitationBack}
                busyWords="Withdrawing"
                input={{ invitationId: invitation.id }}
                words="Withdraw"
              />
            }
            key={invitation.id}
            mark="open"
          >
            {invitation.name}, {invitation.label}
          </StatusSentence>
        ))}
      </ul>
    </Section>
  );
}
