import { Disclosure } from "@/components/ui/disclosure";
import { fmt } from "@/components/ui/format";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import type { ReportList } from "@/lib/reports";
import { type LevelAct, LevelForm } from "./level-form";

type Work = ReportList["works"][number];

const CONCERNS: Record<string, string> = {
  work: "the work",
  recording: "the recording",
  both: "work and recording",
};
const MARKS = { claimed: "open", supported: "half", adjudicated: "done" } as const;

/** What the entry does to deliveries today. */
function effect(work: Work): string {
  if (work.level === "claimed") return "Deliveries are not held by it; a person looks.";
  if (!work.hasRecording) return "There is no recording to compare with; it is a note for people.";
  return work.fingerprinted
    ? "A delivery that contains its recording is held for a person."
    : "Its recording is being read, or cannot be compared; it holds nothing yet.";
}

export function BlocklistRow({ work, setLevel }: { work: Work; setLevel: LevelAct }) {
  return (
    <li className="border-b border-line py-2.5">
      <StatusSentence
        as="div"
        below={`Concerns ${CONCERNS[work.concerns] ?? work.concerns}; owned by ${work.owner}. Entered ${fmt.date(work.createdAt)}, looked at again by ${fmt.date(work.reviewAt)}.`}
        mark={MARKS[work.level as keyof typeof MARKS] ?? "open"}
      >
        {work.code}: <Title>{work.title}</Title>, {work.level}. {effect(work)}
      </StatusSentence>
      <Disclosure className="mt-1 ml-[1.4375rem]" words={`Change the level of ${work.code}`}>
        <div className="max-w-measure">
          <LevelForm level={work.level} reportedWorkId={work.id} setLevel={setLevel} />
        </div>
      </Disclosure>
    </li>
  );
}
