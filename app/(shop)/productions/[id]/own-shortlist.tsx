import { OrderButtons } from "@/components/productions/order-buttons";
import { PriceButton } from "@/components/productions/price-button";
import type { ShortlistLine } from "@/components/productions/shortlist-line";
import { PriceFooting, ShortlistTable } from "@/components/productions/shortlist-table";
import { ButtonLink } from "@/components/ui/button";
import { AsideTitle } from "@/components/ui/page";
import type { Use } from "@/lib/licensing/rate-card";
import type { ProductionPage } from "@/lib/productions";
import { orderFromShortlist, priceProduction, removeFromShortlist, setShortlistItem } from "../../actions";
import { standingWords } from "../shortlist-lines";

interface OwnShortlistProps {
  production: ProductionPage;
  lines: readonly ShortlistLine[];
  use: Use | null;
  words: string | null;
}

/** The shortlist with everything at hand: states, notes, versions, prices and the orders that come of it. */
export function OwnShortlist({ production, lines, use, words }: OwnShortlistProps) {
  return (
    <>
      <AsideTitle below={standingWords(lines)}>Its shortlist</AsideTitle>
      <ShortlistTable
        actions={{ setItem: setShortlistItem, removeItem: removeFromShortlist }}
        inFull
        lines={lines}
      />
      {lines.length > 0 && <PriceFooting lines={lines} useWords={words} />}
      <p className="mt-1 text-small">
        {use && <PriceButton lines={lines} priceProduction={priceProduction} productionId={production.id} />}
      </p>
      <OrderButtons lines={lines} placeOrder={orderFromShortlist} productionId={production.id} use={use} />
      <p className="mt-4">
        <ButtonLink href={`/find?production=${production.id}`} wide>
          Find a cue for it
        </ButtonLink>
      </p>
    </>
  );
}
