import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { ActButton } from "@/components/account/act-button";
import { PasswordForm } from "@/components/account/password-form";
import { SecondFactorSetup } from "@/components/account/second-factor-setup";
import { TextLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { getAccount, pendingSecondFactor, type RoleChoice } from "@/lib/accounts";
import { PASSWORD_LENGTH_ALONE, PASSWORD_LENGTH_WITH_SECOND_FACTOR } from "@/lib/accounts/states";
import { isSignedIn } from "@/lib/kernel/actor";
import { viewer } from "@/lib/web";
import { chooseRole, endAllSessions } from "../actions";
import { squareOf } from "./square";

export const metadata: Metadata = { title: "Your account" };

const NEEDS = {
  code: "Waits for the code of your second factor",
  "set-up": "Waits for a second factor to be set up",
};

function Roles({ roles }: { roles: readonly RoleChoice[] }) {
  return (
    <ul>
      {roles.map((role) => (
        <StatusSentence
          as="li"
          below={role.needs ? NEEDS[role.needs] : role.current ? "In use" : undefined}
          className="border-b border-line py-2.5"
          end={
            !role.current &&
            !role.needs && (
              <ActButton
                act={chooseRole}
                busyWords="Changing"
                input={{ membershipId: role.membershipId }}
                words="Use"
              />
            )
          }
          key={role.membershipId}
          mark={role.current ? "pick" : role.needs ? "half" : "open"}
        >
          {role.label}
        </StatusSentence>
      ))}
    </ul>
  );
}

export default async function AccountPage() {
  const { actor, roles } = await viewer();
  if (!isSignedIn(actor)) redirect("/sign-in?to=/account");
  const account = await getAccount(actor, {});
  const pending = account.isSettingUp ? await pendingSecondFactor(actor, {}) : null;
  const hasFactor = account.secondFactorSince !== null;
  const current = roles.find((role) => role.current);
  return (
    <Page>
      <HeadSentence place={account.email}>
        {current
          ? `${account.name}, you act as ${current.label}.`
          : roles.length > 0
            ? `${account.name}, none of your roles is in use yet.`
            : `${account.name}, you have no role yet.`}
      </HeadSentence>
      <Section className="mt-8" head="Your roles">
        <Roles roles={roles} />
        {!roles.some((role) => role.kind === "buyer") && (
          <Sentence className="mt-3">
            To license music, <TextLink href="/company">register your company</TextLink>.
          </Sentence>
        )}
      </Section>
      <Section className="mt-10" head="Second factor" id="second-factor">
        <StatusSentence className="mt-1 mb-4" mark={hasFactor ? "tick" : "open"}>
          {account.secondFactorSince
            ? `In use since ${fmt.date(account.secondFactorSince)}`
            : "None is set up. Owners, moderators, accountants and admins need one."}
        </StatusSentence>
        <SecondFactorSetup
          isInUse={hasFactor}
          pending={pending && { secret: pending.secret, ...squareOf(pending.address) }}
        />
      </Section>
      <Section className="mt-10" head="Password">
        <PasswordForm
          asksCurrent={account.hasPassword && !account.mayReplacePassword}
          email={account.email}
          isFirst={!account.hasPassword}
          lengthMin={hasFactor ? PASSWORD_LENGTH_WITH_SECOND_FACTOR : PASSWORD_LENGTH_ALONE}
        />
      </Section>
      <Section className="mt-10" head="Sessions">
        <Sentence className="mb-3">A session ends by itself twelve hours after you signed in.</Sentence>
        <ActButton
          act={endAllSessions}
          busyWords="Signing out"
          input={{}}
          kind="plain"
          question={{
            title: "Sign out everywhere?",
            consequence: "Every session of yours ends at once, on every device, this one too.",
          }}
          to="/sign-in"
          words="Sign out everywhere"
        />
      </Section>
    </Page>
  );
}
