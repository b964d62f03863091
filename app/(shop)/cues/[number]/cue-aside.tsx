import { LicenceAside } from "@/components/cues/licence-aside";
import { ShortlistForm } from "@/components/cues/shortlist-form";
import { TextLink } from "@/components/ui/button";
import { Section } from "@/components/ui/sentence";
import type { CuePage } from "@/lib/catalogue";
import { listFromPrices, priceUse } from "@/lib/licensing";
import { Use } from "@/lib/licensing/rate-card";
import { getProduction, listProductions } from "@/lib/productions";
import { viewer } from "@/lib/web";
import { addToShortlist } from "../../actions";
import { productionWords } from "../../productions/shortlist-lines";

/** The working table of a cue: its price, its licence, and a place on a shortlist. */
export async function CueAside({ cue, productionId }: { cue: CuePage; productionId: string | null }) {
  const { actor } = await viewer();
  const from = (await listFromPrices(actor, {}))[cue.library.id] ?? null;
  const productions = actor.kind === "buyer" ? await listProductions(actor, {}) : [];
  const inUse = productions.find(({ id }) => id === productionId) ?? null;
  const production = inUse && (await getProduction(actor, { productionId: inUse.id }));
  const use = Use.safeParse(production?.use);
  const answer = use.success ? await priceUse(actor, { familyId: cue.familyId, use: use.data }) : null;
  return (
    <>
      <LicenceAside
        exact={
          answer &&
          production && {
            text: answer.text,
            sentence: answer.sentence,
            production: production.episode ?? production.title,
          }
        }
        from={from}
        libraryName={cue.library.name}
        number={cue.number}
        productionId={inUse?.id ?? null}
      />
      {actor.kind === "buyer" && (
        <Section className="mt-8" head="Shortlist it">
          {productions.length === 0 ? (
            <p>
              <TextLink href="/productions">Begin a production</TextLink>, and this cue can be put on its
              shortlist.
            </p>
          ) : (
            <ShortlistForm
              add={addToShortlist}
              chosenProductionId={inUse?.id ?? null}
              productions={productions.map((entry) => ({ id: entry.id, words: productionWords(entry) }))}
              versions={cue.versions.map(({ recordingId, label }) => ({ recordingId, label }))}
            />
          )}
        </Section>
      )}
    </>
  );
}
