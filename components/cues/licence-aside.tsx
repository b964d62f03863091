import { ButtonLink, TextLink } from "@/components/ui/button";
import { AsideTitle } from "@/components/ui/page";

interface LicenceAsideProps {
  number: string;
  libraryName: string;
  /** "£40.00", or null where its library has no card. */
  from: string | null;
  /** The exact price inside the production in use. */
  exact: { text: string | null; sentence: string; production: string } | null;
  productionId: string | null;
}

/** What a licence costs and where one is made. */
export function LicenceAside({ number, libraryName, from, exact, productionId }: LicenceAsideProps) {
  const query = productionId ? `?production=${productionId}` : "";
  const head = exact?.text
    ? `${exact.text} for ${exact.production}`
    : from
      ? `From ${from}`
      : "Priced by its library";
  return (
    <>
      <AsideTitle
        below={
          exact?.text
            ? `${exact.sentence}, before tax.`
            : from
              ? "For the smallest use of one year in one country, before tax. What yours costs is worked out with every factor shown."
              : `${libraryName} has not published a rate card yet.`
        }
      >
        {head}
      </AsideTitle>
      {exact && !exact.text && <p className="mb-3">{exact.sentence}</p>}
      <ButtonLink href={`/cues/${number}/license${query}`} kind="main" wide>
        License this cue
      </ButtonLink>
      <p className="mt-3 text-small text-ink-soft">
        {libraryName} is the licensor. A licence is for one production and comes with a record that anybody{" "}
        <TextLink href="/check">can check</TextLink>.
      </p>
    </>
  );
}
