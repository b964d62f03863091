import { Button } from "@/components/ui/button";
import { TextField } from "@/components/ui/field";
import { fmt } from "@/components/ui/format";
import { Mark } from "@/components/ui/mark";
import { HeadSentence, Sentence } from "@/components/ui/sentence";
import { Title } from "@/components/ui/title";
import type { Checked } from "@/lib/licensing";

const noon = (date: string) => fmt.date(`${date}T12:00:00Z`);

function inForceWords({ on, today }: Checked): string {
  if (on.date === today.date) {
    if (today.answer === "in force") return "It is in force today.";
    return today.answer === "not in force"
      ? "It is not in force today."
      : "It is in force for part of today.";
  }
  const past = on.date < today.date;
  const then =
    on.answer === "in force"
      ? `It ${past ? "was" : "will be"} in force on ${noon(on.date)}`
      : on.answer === "not in force"
        ? `It ${past ? "was" : "will"} not ${past ? "" : "be "}in force on ${noon(on.date)}`
        : `It ${past ? "was" : "will be"} in force for part of ${noon(on.date)}`;
  const now = today.answer === "not in force" ? "it is not in force today" : "it is in force today";
  return `${then}, and ${now}.`;
}

/** What the answer for the day says beyond the headline: why it is not in force, and questions that are open. */
function addedWords({ on }: Checked): string {
  return on.answer === "in force" ? on.sentence.split(". ").slice(1).join(". ") : on.sentence;
}

/** First whether it is genuine, then whether it is in force on the day asked about. */
export function CheckVerdict({ checked }: { checked: Checked }) {
  const { licence, verdict } = checked;
  const isGenuine = verdict === "genuine";
  const { licensee, production } = licence;
  return (
    <div className="grid grid-cols-[2.25rem_minmax(0,1fr)] gap-x-3 sm:grid-cols-[3rem_minmax(0,1fr)]">
      <Mark className="mt-8 sm:mt-9" kind={isGenuine ? "tick" : "warn"} sizePx={34} />
      <HeadSentence
        place={`Licence ${licence.number}, opened with its proof code. You need no account, and nothing about you is kept.${licence.demonstration ? " Demonstration." : ""}`}
        size="huge"
      >
        {isGenuine ? "This licence is genuine." : "This licence does not verify."}
        <br />
        {isGenuine ? inForceWords(checked) : checked.sentence}
      </HeadSentence>
      <div className="col-span-2 sm:col-span-1 sm:col-start-2">
        <Sentence className="mt-4" size="lead">
          {licence.licensor.legalName} lets {licensee ?? "a licensee, whose name is kept private,"} put{" "}
          <Title>{licence.cue.title}</Title> to{" "}
          {production.title ?? "a production whose title is kept private"}
          {production.parts ? ` (${production.parts})` : ""}. {addedWords(checked)}{" "}
          {isGenuine && "Nothing in the record has changed since it was signed."}
        </Sentence>
      </div>
    </div>
  );
}

/** Any other day, in the licence's own time zone. */
export function AskAboutDay({ date, zone }: { date: string; zone: string }) {
  return (
    <form className="mt-3 flex flex-wrap items-end gap-x-4 gap-y-2 print:hidden" method="get">
      <TextField className="w-56" defaultValue={date} label="Ask about another day" name="on" type="date" />
      <Button type="submit">Ask about this day</Button>
      <p className="pb-2 text-small text-ink-soft">Days begin and end in {zone.replaceAll("_", " ")}.</p>
    </form>
  );
}
