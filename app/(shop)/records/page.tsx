import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { ButtonLink, TextLink } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import { type LicenceEntry, listLicences, listOpenOrders } from "@/lib/licensing";
import { viewer } from "@/lib/web";

export const metadata: Metadata = { title: "Licences" };

const MARKS = { "in force": "tick", "in force for part of the day": "half", "not in force": "open" } as const;

function termOf(entry: LicenceEntry): string {
  const from = `from ${fmt.date(`${entry.startsOn}T12:00:00Z`)}`;
  return entry.lastUseAt ? `${from} to ${fmt.date(entry.lastUseAt, entry.zone)}` : `${from}, without end`;
}

export default async function LicencesPage() {
  const { actor, person } = await viewer();
  if (!person) redirect("/sign-in?to=/records");
  if (actor.kind !== "buyer") notFound();
  const [licences, openOrders] = await Promise.all([listLicences(actor, {}), listOpenOrders(actor, {})]);
  const inForce = licences.filter(({ today }) => today !== "not in force").length;
  return (
    <Page>
      <HeadSentence>
        {licences.length === 0
          ? "Your company holds no licence yet."
          : `Your company holds ${fmt.countWord(licences.length, "licence")}, ${inForce === licences.length ? "all" : fmt.countWord(inForce, "of them", "of them")} in force today.`}
      </HeadSentence>
      {openOrders.length > 0 && (
        <Section className="mt-7" head="Orders under way">
          <ul>
            {openOrders.map((order) => (
              <StatusSentence
                as="li"
                below={order.words}
                className="border-b border-line py-2.5"
                end={order.gross}
                key={order.id}
                mark="half"
              >
                <TextLink href={`/orders/${order.id}`}>{order.number}</TextLink> for {order.productionTitle}
              </StatusSentence>
            ))}
          </ul>
        </Section>
      )}
      <Section className="mt-7" head="Licences">
        {licences.length === 0 ? (
          <Empty action={<ButtonLink href="/find">Find a cue</ButtonLink>}>
            Every licence stands here with its term and its signed record, also when the people who bought it
            have left.
          </Empty>
        ) : (
          <ul>
            {licences.map((entry) => (
              <StatusSentence
                as="li"
                below={
                  <>
                    {entry.useWords}, {termOf(entry)}. {entry.todaySentence}
                    {entry.isBroughtIn && " Brought in by its library; paid outside this service."}
                  </>
                }
                className="border-b border-line py-2.5"
                end={`${entry.currency} ${entry.fee}`}
                key={entry.number}
                mark={MARKS[entry.today]}
              >
                <TextLink href={`/records/${entry.number}`}>{entry.number}</TextLink>:{" "}
                <Title>{entry.title}</Title> in {entry.production}
              </StatusSentence>
            ))}
          </ul>
        )}
      </Section>
    </Page>
  );
}
