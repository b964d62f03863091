import { Mark } from "@/components/ui/mark";
import { Section } from "@/components/ui/sentence";
import type { CaseView } from "@/lib/review";

const HEADS: Record<string, string> = {
  "own version": "Own version",
  "shared material": "Shared material",
  "licensed sample": "Licensed sample",
  "old tune": "Old tune",
  "other title": "Other title",
};

/** Innocent explanations come first. */
export function Explanations({
  facts,
  papersOpen,
}: {
  facts: CaseView["explanations"];
  papersOpen: boolean;
}) {
  return (
    <Section head="Innocent explanations come first">
      <ul>
        {facts.map((fact) => (
          <li className="grid grid-cols-[1.4rem_minmax(0,1fr)] py-1" key={fact.explanation}>
            <Mark
              className="mt-[0.3em]"
              kind={
                fact.declared ? "half" : fact.explanation === "other title" && !papersOpen ? "open" : "done"
              }
            />
            <span>
              {HEADS[fact.explanation]}: {fact.words}
            </span>
          </li>
        ))}
      </ul>
    </Section>
  );
}
