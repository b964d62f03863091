import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { chooseRole } from "@/app/(account)/actions";
import { ActButton } from "@/components/account/act-button";
import { DeliveryRows } from "@/components/deliveries/delivery-rows";
import { StartForm } from "@/components/deliveries/start-form";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { getAccount } from "@/lib/accounts";
import { listDeliveries } from "@/lib/deliveries";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Deliver" };

const DELIVERERS = ["composer", "owner", "staff"];

export default async function DeliverPage() {
  const { actor, person, roles } = await viewer();
  if (!person) redirect("/sign-in?to=%2Fdeliver");
  if (actor.kind !== "composer" && actor.kind !== "owner" && actor.kind !== "staff") notFound();
  const current = roles.find((role) => role.current);
  const others = roles.filter((role) => !role.current && DELIVERERS.includes(role.kind));
  const { timeZone } = await getAccount(actor, {});
  const drafts = (await listDeliveries(actor, {})).filter((row) => row.state === "draft");
  return (
    <Page>
      <HeadSentence place={`Deliver, as ${current?.label ?? actor.kind}`}>
        A family is one work with all its versions, its papers and its writers’ shares.
      </HeadSentence>
      <Sentence className="mt-3" soft>
        Files are measured as they arrive. Screening begins when you sign; until then everything is a draft
        that is kept for you.
      </Sentence>
      <div className="mt-6">
        <StartForm />
      </div>
      {drafts.length > 0 && (
        <Section className="mt-9" head="Drafts to go on with">
          <DeliveryRows deliveries={drafts} withDeliverer={false} zone={timeZone} />
        </Section>
      )}
      {others.length > 0 && (
        <Section className="mt-9" head="For another library">
          <ul>
            {others.map((role) => (
              <StatusSentence
                as="li"
                className="border-b border-line py-2.5"
                end={
                  <ActButton
                    act={chooseRole}
                    busyWords="Changing"
                    input={{ membershipId: role.membershipId }}
                    to="/deliver"
                    words="Deliver there"
                  />
                }
                key={role.membershipId}
                mark="open"
              >
                {role.label}
              </StatusSentence>
            ))}
          </ul>
        </Section>
      )}
    </Page>
  );
}
