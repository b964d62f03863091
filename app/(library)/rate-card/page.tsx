import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { CardForm } from "@/components/licensing/card-form";
import { CardTables } from "@/components/licensing/card-tables";
import { Disclosure } from "@/components/ui/disclosure";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { AsideTitle, Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { getRateCard } from "@/lib/licensing";
import { viewer } from "@/lib/web";
import { setRateCard } from "./actions";

export const metadata: Metadata = { title: "Rate card" };

export default async function RateCardPage() {
  const { actor, person, roles } = await viewer();
  if (!person) redirect("/sign-in?to=/rate-card");
  if (actor.kind !== "owner" && actor.kind !== "staff") notFound();
  const { libraryName, versions, startsFrom } = await getRateCard(actor, {});
  const [current, ...older] = versions;
  const aside = actor.kind === "owner" && (
    <>
      <AsideTitle below="It holds from the moment you publish it. What was proposed or sold keeps its price.">
        A new version
      </AsideTitle>
      <CardForm save={setRateCard} startsFrom={startsFrom} />
    </>
  );
  return (
    <Page {...(aside ? { aside, asideLabel: "A new version of the card" } : {})}>
      <HeadSentence place={`Rate card, as ${roles.find((role) => role.current)?.label}`}>
        {current
          ? `${libraryName} sells by version ${current.version} of its card, since ${fmt.date(current.validFrom)}.`
          : `${libraryName} has no rate card yet, so nothing of it can be licensed.`}
      </HeadSentence>
      {current ? (
        <Section className="mt-7" head={`Version ${current.version}`} note={`in ${current.card.currency}`}>
          <CardTables card={current.card} />
        </Section>
      ) : (
        <div className="mt-7">
          <Empty>
            Prices stand here: a base for each kind of media, and factors for territory, term, size and
            episodes. The form holds an example with invented figures to begin from.
          </Empty>
        </div>
      )}
      {older.length > 0 && (
        <Section className="mt-8" head="Before that">
          <ul>
            {older.map((version) => (
              <li className="border-b border-line py-2.5" key={version.id}>
                <Disclosure words={`Version ${version.version}, from ${fmt.date(version.validFrom)}`}>
                  <CardTables card={version.card} />
                </Disclosure>
              </li>
            ))}
          </ul>
        </Section>
      )}
    </Page>
  );
}
