import { fmt } from "@/components/ui/format";
import { Section } from "@/components/ui/sentence";
import { type ItemActions, ShortlistEntry } from "./shortlist-entry";
import type { ShortlistLine } from "./shortlist-line";

const CURRENCY_WORDS: Record<string, string> = { GBP: "in pounds", EUR: "in euro", USD: "in US dollars" };

interface ShortlistTableProps {
  lines: readonly ShortlistLine[];
  actions: ItemActions;
  /** Note, version and removal at hand; else only picking. */
  inFull?: boolean;
}

/** A shortlist by library, since each library is a seller of its own. */
export function ShortlistTable({ lines, actions, inFull = false }: ShortlistTableProps) {
  const libraries = [...new Set(lines.map((line) => line.libraryName))];
  const scaleS = Math.max(30, ...lines.map((line) => line.version?.durationS ?? 0));
  return libraries.map((library) => {
    const own = lines.filter((line) => line.libraryName === library);
    return (
      <Section
        className="mb-6"
        head={library}
        key={library}
        level={3}
        note={CURRENCY_WORDS[own[0]?.currency ?? ""] ?? own[0]?.currency}
      >
        <ul>
          {own.map((line) => (
            <ShortlistEntry actions={actions} inFull={inFull} key={line.itemId} line={line} scaleS={scaleS} />
          ))}
        </ul>
      </Section>
    );
  });
}

/** What the prices are for, and until when they stand. */
export function PriceFooting({
  lines,
  useWords,
}: {
  lines: readonly ShortlistLine[];
  useWords: string | null;
}) {
  const priced = lines.find((line) => line.price?.text);
  const sellers = new Set(lines.filter((line) => !line.unavailable).map((line) => line.libraryName)).size;
  return (
    <div className="grid gap-1 text-small">
      {useWords && (
        <p>
          Each is for {useWords}
          {priced?.price ? `: ${priced.price.sentence.replaceAll(" × ", "\u00a0×\u00a0")}` : ""}.
        </p>
      )}
      {priced?.price && (
        <p className="text-ink-soft">
          {priced.price.pricedAt && `Prices of ${fmt.dayMonth(priced.price.pricedAt)}, `}
          {priced.price.until && `kept until ${fmt.dayMonth(priced.price.until)}, `}before tax.
          {sellers > 1 &&
            ` ${capital(fmt.countWord(sellers, "library is", "libraries are"))} ${fmt.countWord(sellers, "seller")}, so these are ${fmt.countWord(sellers, "order")}.`}
        </p>
      )}
    </div>
  );
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);
