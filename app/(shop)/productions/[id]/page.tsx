import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { countryOptions } from "@/app/(account)/company/countries";
import { UseForm } from "@/components/productions/use-form";
import { TextLink } from "@/components/ui/button";
import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section, Sentence } from "@/components/ui/sentence";
import { NotFound } from "@/lib/kernel/errors";
import { getProduction, type ProductionPage } from "@/lib/productions";
import { viewer } from "@/lib/web";
import { priceProduction, setProductionUse } from "../../actions";
import { productionWords, shortlistLines } from "../shortlist-lines";
import { readProductionUse } from "../use-of-production";
import { OwnShortlist } from "./own-shortlist";

type Props = { params: Promise<{ id: string }> };

async function read(params: Props["params"]) {
  const { actor, person } = await viewer();
  const { id } = await params;
  if (!person) redirect(`/sign-in?next=/productions/${id}`);
  try {
    const production = await getProduction(actor, { productionId: id });
    return { actor, production };
  } catch (error) {
    if (error instanceof NotFound) notFound();
    throw error;
  }
}

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const { production } = await read(params);
  return { title: productionWords(production) };
}

export default async function ProductionScreen({ params }: Props) {
  const { actor, production } = await read(params);
  const lines = shortlistLines(production);
  const { use, card, words } = await readProductionUse(actor, production);
  return (
    <Page
      aside={<OwnShortlist lines={lines} production={production} use={use} words={words} />}
      asideLabel={`Shortlist of ${productionWords(production)}`}
    >
      <HeadSentence place={<TextLink href="/productions">Productions</TextLink>}>
        {headWords(production)}
      </HeadSentence>
      <Section className="mt-7" head="What its music is licensed for" id="use">
        <Sentence className="mb-4">
          {words
            ? `${words.charAt(0).toUpperCase()}${words.slice(1)}. Every price beside a cue is the exact one for this use.`
            : "Not said yet. Once it is, every price beside a cue is the exact one for this use."}
        </Sentence>
        {card && (
          <UseForm
            card={card}
            countries={countryOptions().map(({ value, label }) => ({ code: value, name: label }))}
            priceProduction={priceProduction}
            productionId={production.id}
            setUse={setProductionUse}
            use={use}
          />
        )}
      </Section>
      <Section className="mt-8" head="The production">
        <FactList
          rows={[
            { name: "What it is", value: production.kind },
            ...(production.client ? [{ name: "Client", value: production.client }] : []),
            ...(production.codeName ? [{ name: "Code name", value: production.codeName }] : []),
            { name: "Begun", value: fmt.date(production.createdAt) },
          ]}
        />
      </Section>
    </Page>
  );
}

function headWords(production: ProductionPage): string {
  const cues = production.shortlist.length;
  const name = productionWords(production);
  return cues === 0
    ? `${name} has nothing on its shortlist yet.`
    : `${name} has ${fmt.countWord(cues, "cue")} on its shortlist.`;
}
