import { FactList } from "@/components/ui/facts";
import { Section } from "@/components/ui/sentence";
import { Table } from "@/components/ui/table";
import type { RateCard } from "@/lib/licensing/rate-card";

type CardClass = RateCard["classes"][number];

function sizeWords({ tier }: CardClass): string {
  if (tier.kind === "none") return "no scale";
  if (tier.kind === "quote") return "by quote";
  return `${tier.measure}: ${tier.bands.map(({ words, factor }) => `${words} × ${factor}`).join(", ")}`;
}

function notes(row: CardClass): string {
  return [
    row.worldIncluded && "World included",
    row.perEpisode && "by episodes",
    row.cutdowns && "cutdowns",
    row.studentOrCharity && "student and charity price",
  ]
    .filter(Boolean)
    .join(", ");
}

/** One version of a card, everything on it. */
export function CardTables({ card }: { card: RateCard }) {
  return (
    <>
      <Table
        caption="Base prices and sizes"
        captionHidden
        columns={[
          {
            key: "media",
            head: "Media",
            cell: (row) => (
              <>
                {row.words}
                {notes(row) && <span className="block text-small text-ink-soft">{notes(row)}</span>}
              </>
            ),
          },
          { key: "size", head: "Size of the use", cell: sizeWords },
          { key: "base", head: `Base, ${card.currency}`, figures: true, cell: (row) => row.base },
        ]}
        rowKey={(row) => row.code}
        rows={card.classes}
        sentence={(row) => `${row.words}: ${card.currency} ${row.base}; ${sizeWords(row)}`}
      />
      <Section className="mt-6" head="Factors">
        <FactList
          nameWidth="10rem"
          rows={[
            {
              name: "Territory",
              value: `one country × ${card.territory.country}, named region × ${card.territory.region}, World × ${card.territory.world}`,
              below: card.regions
                .map(({ words, countries }) => `${words} (${countries.join(", ")})`)
                .join("; "),
            },
            { name: "Term", value: card.terms.map(({ words, factor }) => `${words} × ${factor}`).join(", ") },
            {
              name: "Episodes",
              value: card.episodes.map(({ upTo, factor }) => `up to ${upTo} × ${factor}`).join(", "),
            },
            {
              name: "Versions of adverts",
              value: `each extra cutdown + ${card.cutdown}, a changed tag + ${card.tagChange}`,
            },
            { name: "Student or charity", value: `× ${card.studentOrCharity}, against proof` },
            { name: "Minimum fee", value: `${card.currency} ${card.minimumFee}` },
          ]}
        />
      </Section>
    </>
  );
}
