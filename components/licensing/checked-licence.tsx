import { Caution } from "@/components/ui/caution";
import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { Section } from "@/components/ui/sentence";
import { Title } from "@/components/ui/title";
import type { Checked } from "@/lib/licensing";
import { WITHHOLDABLE } from "@/lib/licensing/states";

const WORDS_SHOWN = [
  "Media",
  "Territory",
  "Term",
  "Productions, episodes and versions",
  "Audience",
  "Exclusivity",
  "Edits",
  "Context",
  "Credit",
  "Cue sheet",
  "Promotion",
  "Use",
];
const PRIVATE = <span className="text-ink-soft">kept private by the licensee</span>;

/** What it allows and does not, and what has happened to it: in the order a stranger asks. */
export function CheckedLicencePart({ checked }: { checked: Checked }) {
  const { licence } = checked;
  const { cue, production, scope } = licence;
  const rowsOfScope = scope.words
    .filter(({ row }) => WORDS_SHOWN.includes(row))
    .map(({ row, says }) => ({
      name: row === "Productions, episodes and versions" ? "How many" : row,
      value: says,
    }));
  return (
    <div className="mt-8 grid gap-x-12 gap-y-8 @wide:grid-cols-[minmax(0,1.25fr)_minmax(0,1fr)]">
      <Section head="What it allows">
        <FactList
          rows={[
            { name: "Licensor", value: licence.licensor.legalName, below: licence.licensor.capacity },
            {
              name: "Licensee",
              value: licence.licensee ?? PRIVATE,
              below: licence.endClient ? `for ${licence.endClient}` : undefined,
            },
            {
              name: "Production",
              value: production.title ?? PRIVATE,
              below: [production.type, production.parts].filter(Boolean).join("; "),
            },
            {
              name: "Cue",
              value: <Title>{cue.title}</Title>,
              below: `${cue.library} ${cue.catalogueNumber}; ${cue.versions.map(({ role }) => role).join(", ")}; by ${fmt.list(licence.writers)}`,
            },
            ...rowsOfScope,
          ]}
        />
      </Section>
      <div className="grid content-start gap-8">
        <Section head="What it does not include">
          <ul>
            {licence.notIncluded.map((words) => (
              <li className="border-b border-line py-2.5" key={words}>
                {words}
              </li>
            ))}
          </ul>
        </Section>
        <Section head="What has happened to it">
          <dl>
            {licence.history.map((event) => (
              <div
                className="grid grid-cols-1 gap-x-4 border-b border-line py-2 sm:grid-cols-[9rem_minmax(0,1fr)]"
                key={event.sequence}
              >
                <dt className="text-ink-soft">{fmt.date(event.at, licence.term.zone)}</dt>
                <dd>
                  {event.kind}
                  <span className="block text-small text-ink-soft">{event.words}</span>
                </dd>
              </div>
            ))}
          </dl>
          <p className="mt-2 text-small text-ink-soft">
            A change is added here with its date; none is ever taken away.
            {licence.origin === "brought in" &&
              ` ${licence.licensor.legalName} issued it before bringing it in; the record was signed on ${fmt.date(licence.signedAt)}.`}
          </p>
        </Section>
        <Section head="Screening on file">
          <p>
            Compared with the {fmt.count(licence.screening.recordingsCompared, "recording")} held on{" "}
            {fmt.date(licence.screening.screenedAt)}: {licence.screening.result}
          </p>
          <Caution className="mt-1" notCompared="Melody, harmony and lyrics were not compared." />
        </Section>
        {licence.withheld.length > 0 && (
          <p className="text-small text-ink-soft">
            Limited by the licensee for now: {fmt.list(licence.withheld.map((field) => WITHHOLDABLE[field]))}.
            The signed record holds them as hashes, so they can be shown later without signing again.
          </p>
        )}
      </div>
    </div>
  );
}
