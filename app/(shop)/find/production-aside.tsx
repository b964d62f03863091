import { OrderButtons } from "@/components/productions/order-buttons";
import { PriceButton } from "@/components/productions/price-button";
import { PriceFooting, ShortlistTable } from "@/components/productions/shortlist-table";
import { ButtonLink, TextLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { AsideTitle } from "@/components/ui/page";
import type { ProductionEntry, ProductionPage } from "@/lib/productions";
import { orderFromShortlist, priceProduction, removeFromShortlist, setShortlistItem } from "../actions";
import { productionWords, shortlistLines, standingWords } from "../productions/shortlist-lines";
import type { ProductionUse } from "../productions/use-of-production";

interface ProductionAsideProps {
  production: ProductionPage | null;
  productions: readonly ProductionEntry[];
  /** What it is licensed for. */
  use: ProductionUse | null;
  /** The brief, kept while a production is chosen. */
  query: string;
}

/** The working table beside the search: the shortlist of the production in use, or which to choose. */
export function ProductionAside({ production, productions, use, query }: ProductionAsideProps) {
  if (!production) return <ChooseProduction productions={productions} query={query} />;
  const lines = shortlistLines(production);
  return (
    <>
      <AsideTitle below={standingWords(lines)}>{productionWords(production)}</AsideTitle>
      <ShortlistTable
        actions={{ setItem: setShortlistItem, removeItem: removeFromShortlist }}
        lines={lines}
      />
      {!use?.use ? (
        <p>
          <TextLink href={`/productions/${production.id}#use`}>Say what it is for</TextLink> to see exact
          prices here and beside each cue.
        </p>
      ) : (
        <div className="grid gap-1">
          <PriceFooting lines={lines} useWords={use.words} />
          <p className="flex flex-wrap gap-x-4 text-small">
            <TextLink href={`/productions/${production.id}#use`}>Change the use</TextLink>
            <PriceButton lines={lines} priceProduction={priceProduction} productionId={production.id} />
          </p>
        </div>
      )}
      <OrderButtons
        lines={lines}
        placeOrder={orderFromShortlist}
        productionId={production.id}
        use={use?.use ?? null}
      />
      <p className="mt-4 flex flex-wrap gap-x-4 text-small">
        <TextLink href={`/productions/${production.id}`}>Notes, versions and order</TextLink>
        <TextLink href={query ? `/find?${query}` : "/find"}>Another production</TextLink>
      </p>
    </>
  );
}

function ChooseProduction({ productions, query }: Omit<ProductionAsideProps, "production" | "use">) {
  if (productions.length === 0)
    return (
      <>
        <AsideTitle below="With one, cues can be put on its shortlist and every price is exact.">
          Begin a production
        </AsideTitle>
        <ButtonLink href="/productions" kind="main" wide>
          Begin a production
        </ButtonLink>
      </>
    );
  return (
    <>
      <AsideTitle below="Its shortlist comes here, and every price is the exact one of its use.">
        Which production is this for?
      </AsideTitle>
      <ul className="border-t border-buff-2">
        {productions.map((entry) => (
          <li className="border-b border-buff-2 py-2" key={entry.id}>
            <TextLink
              className="font-label"
              href={`/find?${[query, `production=${entry.id}`].filter(Boolean).join("&")}`}
            >
              {productionWords(entry)}
            </TextLink>
            <span className="block text-small text-ink-soft">
              {entry.kind};{" "}
              {entry.cues === 0
                ? "nothing shortlisted yet"
                : `${fmt.countWord(entry.cues, "cue")} shortlisted`}
              .
            </span>
          </li>
        ))}
      </ul>
      <p className="mt-3 text-small">
        <TextLink href="/productions">Begin another</TextLink>
      </p>
    </>
  );
}
