import type { Metadata } from "next";
import { InvitationForm } from "@/components/account/invitation-form";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { Problem } from "@/components/ui/problem";
import { HeadSentence, Sentence } from "@/components/ui/sentence";
import { getInvitation } from "@/lib/accounts";
import { ROLE_DUTIES, SECOND_FACTOR_ROLES } from "@/lib/accounts/states";
import { NotFound } from "@/lib/kernel/errors";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "An invitation", referrer: "no-referrer" };

async function findInvitation(token: string) {
  const { actor } = await viewer();
  try {
    return await getInvitation(actor, { token });
  } catch (error) {
    if (error instanceof NotFound) return null;
    throw error;
  }
}

export default async function InvitationPage({ params }: { params: Promise<{ token: string }> }) {
  const { token } = await params;
  const invitation = token.length <= 100 ? await findInvitation(token) : null;
  if (!invitation) {
    return (
      <Page>
        <HeadSentence>This invitation is not open.</HeadSentence>
        <Problem className="mt-4" remedy="Ask whoever invited you for another one.">
          It was accepted already, was withdrawn, or is too old.
        </Problem>
      </Page>
    );
  }
  return (
    <Page>
      <HeadSentence place={`For ${invitation.email}, until ${fmt.date(invitation.expiresAt)}`}>
        {invitation.invitedBy} invites you to act as {invitation.label}.
      </HeadSentence>
      <Sentence className="mt-3">
        {ROLE_DUTIES[invitation.role]}
        {SECOND_FACTOR_ROLES.includes(invitation.role) &&
          " The role asks for a second factor, which you set up after you have signed in."}
      </Sentence>
      {invitation.hasAccount && (
        <Sentence className="mt-3">
          You have an account with this address; the role is added to it. Accept, then sign in as usual.
        </Sentence>
      )}
      <InvitationForm hasAccount={invitation.hasAccount} name={invitation.name} token={token} />
    </Page>
  );
}
