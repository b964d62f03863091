import { Disclosure } from "@/components/ui/disclosure";
import { fmt } from "@/components/ui/format";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import type { Registers } from "@/lib/screening";

type Loop = Registers["loops"][number];
type Entry = Registers["entries"][number];

const CONDITIONS: Record<string, string> = {
  "with other musical content": "It explains a match where other music stands with it",
  "not as principal element": "It explains a match where it is not the principal element",
  "low information": "It carries little information",
};

export function LoopRow({ loop }: { loop: Loop }) {
  const facts = [fmt.seconds(loop.lengthS, 1), loop.bpm === null ? "" : fmt.bpm(loop.bpm)];
  const most =
    loop.coverageMaxBps >= 10_000
      ? "however much of a recording it makes up"
      : `up to ${fmt.percent(loop.coverageMaxBps / 100)} of a recording`;
  return (
    <StatusSentence
      as="li"
      below={
        <>
          {CONDITIONS[loop.condition] ?? loop.condition}, {most}, and only where the delivery declares it with
          a paper. {loop.conditionWords}
        </>
      }
      className="border-b border-line py-2.5"
      mark={loop.hasSound ? "done" : "open"}
    >
      {loop.code}, {loop.title}: {facts.filter(Boolean).join(" at ")}
    </StatusSentence>
  );
}

function Cues({ entry }: { entry: Entry }) {
  if (entry.cues.length === 0) return null;
  return (
    <>
      {" "}
      Cues:{" "}
      {entry.cues.map((cue, index) => (
        <span key={cue.catalogueNumber}>
          {index > 0 && ", "}
          {cue.catalogueNumber} <Title>{cue.title}</Title>
        </span>
      ))}
      .
    </>
  );
}

export function EntryRow({ entry }: { entry: Entry }) {
  return (
    <StatusSentence
      as="li"
      below={
        <>
          {entry.words}
          <Cues entry={entry} />
        </>
      }
      className="border-b border-line py-2.5"
      mark="done"
    >
      {entry.code && `${entry.code}: `}
      <Title>{entry.title}</Title>
    </StatusSentence>
  );
}

export function HowItExplains() {
  return (
    <Disclosure className="mt-3" words="What a register does">
      <ul className="max-w-measure list-disc space-y-1 pl-5">
        <li>
          A match that a register explains is not put before a person, and stays visible in the certificate.
        </li>
        <li>
          A loop explains nothing by itself: this delivery must declare it, with a paper, and its condition
          must hold.
        </li>
        <li>
          Another title counts for its own writer and the library that holds the contract, for nobody else.
        </li>
        <li>
          An old tune explains no shared recording. It tells people that two recordings may share a tune.
        </li>
      </ul>
    </Disclosure>
  );
}
