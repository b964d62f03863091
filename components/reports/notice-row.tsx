import { TextLink } from "@/components/ui/button";
import { fmt } from "@/components/ui/format";
import { StatusSentence } from "@/components/ui/status-sentence";
import { Title } from "@/components/ui/title";
import type { ReportList } from "@/lib/reports";

type Notice = ReportList["notices"][number];

function stateWords(notice: Notice, isLate: boolean): string {
  switch (notice.state) {
    case "decided":
      return `Decided${notice.decidedAt ? ` on ${fmt.date(notice.decidedAt)}` : ""}: ${
        notice.outcome === "rejected" ? "nothing removed" : `accepted as ${notice.outcome}`
      }.`;
    case "incomplete":
      return "It waits for its reporter.";
    case "under review":
      return `It is being read; the first reading ${isLate ? "was" : "is"} due ${fmt.dateTime(notice.dueAt, "Europe/London")}.`;
    default:
      return `Nobody has read it yet; the first reading ${isLate ? "was" : "is"} due ${fmt.dateTime(notice.dueAt, "Europe/London")}.`;
  }
}

const MARKS = { decided: "done", incomplete: "half", "under review": "half" } as const;

export function NoticeRow({ notice, now }: { notice: Notice; now: Date }) {
  const isLate = notice.state !== "decided" && notice.state !== "incomplete" && notice.dueAt < now;
  const facts = [
    stateWords(notice, isLate),
    `Received ${fmt.dateTime(notice.receivedAt)}.`,
    notice.addressConfirmed ? "" : "The address is not confirmed.",
    notice.hasRecording ? "With a recording." : "",
  ];
  return (
    <StatusSentence
      as="li"
      below={facts.filter(Boolean).join(" ")}
      className="border-b border-line py-2.5"
      mark={isLate ? "held" : (MARKS[notice.state as keyof typeof MARKS] ?? "open")}
    >
      <TextLink href={`/reported-works/${notice.id}`}>
        {notice.receiptNumber}: <Title>{notice.workTitle}</Title>
      </TextLink>
    </StatusSentence>
  );
}
