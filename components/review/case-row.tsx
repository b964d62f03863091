import { TextLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { Mark } from "@/components/ui/mark";
import { Title } from "@/components/ui/title";
import type { QueueRow } from "@/lib/review";

const MARKS = {
  open: "open",
  "waiting on composer": "half",
  "waiting on second person": "half",
  closed: "done",
} as const;

function stateWords(row: QueueRow): string {
  if (row.state === "closed")
    return `Answered${row.outcome ? `: ${row.outcome}` : ""}, ${row.closedAt ? fmt.date(row.closedAt) : ""}.`;
  if (row.state === "waiting on composer") return "A question is with the deliverer.";
  if (row.state === "waiting on second person") return "A refusal waits for a second person.";
  if (row.isYours) return "You hold this case.";
  return row.holderName ? `${row.holderName} holds it.` : "Nobody holds it yet.";
}

export function CaseRow({ row, now }: { row: QueueRow; now: Date }) {
  const late = row.state === "open" && row.dueAt < now;
  return (
    <li className="grid grid-cols-[1.25rem_minmax(0,1fr)] border-b border-line py-3">
      <Mark
        className="mt-[0.3em]"
        kind={late ? "warn" : (MARKS[row.state as keyof typeof MARKS] ?? "open")}
      />
      <div>
        <p>
          <TextLink href={`/cases/${row.id}`}>
            Case {row.number}: <Title>{row.title}</Title>
          </TextLink>{" "}
          {row.relations.length > 0 && <>looks like {fmt.list(row.relations)}.</>}
        </p>
        <p className="text-small text-ink-soft">
          {stateWords(row)}{" "}
          {row.state === "open" &&
            (late
              ? `The first look was due ${fmt.dateTime(row.dueAt)}.`
              : `First look due ${fmt.dateTime(row.dueAt)}.`)}
          {row.forMarketplace && " It concerns more than one library."}
        </p>
      </div>
    </li>
  );
}
