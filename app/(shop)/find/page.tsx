import type { Metadata } from "next";
import { redirect } from "next/navigation";
import { createLoader, type SearchParams } from "nuqs/server";
import { briefOf, findParams, withSaid } from "@/components/search/brief-params";
import { briefQuery } from "@/components/search/brief-query";
import { FindCues } from "@/components/search/find-cues";
import { Page } from "@/components/ui/page";
import { listLibraries, readBrief } from "@/lib/catalogue";
import { NotFound } from "@/lib/kernel/errors";
import { getProduction, listProductions, type ProductionPage } from "@/lib/productions";
import { viewer } from "@/lib/web";
import { addToShortlist, priceProduction } from "../actions";
import { productionWords } from "../productions/shortlist-lines";
import { readProductionUse } from "../productions/use-of-production";
import { foundPage } from "./found";
import { ProductionAside } from "./production-aside";

export const metadata: Metadata = { title: "Find a cue" };

const load = createLoader(findParams);

export default async function FindPage({ searchParams }: { searchParams: Promise<SearchParams> }) {
  const { actor } = await viewer();
  const values = load(await searchParams);
  const brief = briefOf(values);
  const isBuyer = actor.kind === "buyer";
  if (values.say?.trim()) {
    const said = briefQuery(withSaid(brief, readBrief(values.say)));
    const production = values.production ? `production=${encodeURIComponent(values.production)}` : "";
    redirect(`/find?${[said, production].filter(Boolean).join("&")}`);
  }
  const production = isBuyer && values.production ? await productionOrNull(actor, values.production) : null;
  const [first, libraries, productions] = await Promise.all([
    foundPage(actor, brief, { page: 0, productionId: production?.id ?? null }),
    listLibraries(actor, {}),
    isBuyer ? listProductions(actor, {}) : [],
  ]);
  const use = production ? await readProductionUse(actor, production) : null;
  const firstQuery = briefQuery(brief);
  const find = (
    <FindCues
      first={first}
      firstQuery={firstQuery}
      key={production?.id ?? "none"}
      libraries={libraries.map(({ code, name }) => ({ code, name }))}
      production={
        production && {
          id: production.id,
          hasUse: production.use !== null,
          words: production.episode ?? production.title,
          families: production.shortlist.map((item) => item.cue.familyId),
        }
      }
      priceProduction={isBuyer ? priceProduction : undefined}
      shortlist={isBuyer ? addToShortlist : undefined}
    />
  );
  if (!isBuyer) return <Page>{find}</Page>;
  return (
    <Page
      aside={
        <ProductionAside production={production} productions={productions} query={firstQuery} use={use} />
      }
      asideLabel={production ? `Shortlist of ${productionWords(production)}` : "Your productions"}
    >
      {find}
    </Page>
  );
}

/** A production that is not this company's is no reason to lose the search. */
async function productionOrNull(
  actor: Parameters<typeof getProduction>[0],
  productionId: string,
): Promise<ProductionPage | null> {
  try {
    return await getProduction(actor, { productionId });
  } catch (error) {
    if (error instanceof NotFound) return null;
    throw error;
  }
}
