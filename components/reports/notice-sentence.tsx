import { fmt } from "@/components/ui/format";
import { Title } from "@/components/ui/title";
import type { NoticeStatus } from "@/lib/reports";

/** The state of a report, in one sentence. */
export function NoticeSentence({ notice }: { notice: NoticeStatus }) {
  const work = <Title>{notice.workTitle}</Title>;
  const at = notice.decidedAt ? ` on ${fmt.date(notice.decidedAt)}` : "";
  switch (notice.state) {
    case "decided":
      return notice.outcome === "rejected" ? (
        <>
          We read your report about {work} and decided{at}: we have not removed anything.
        </>
      ) : (
        <>
          We read your report about {work} and accepted it{at}.
        </>
      );
    case "incomplete":
      return <>To go on with your report about {work} we need something more from you.</>;
    case "under review":
      return <>A person is reading your report about {work}.</>;
    default:
      return (
        <>
          We received your report about {work} on {fmt.dateTime(notice.receivedAt)}; a person will read it.
        </>
      );
  }
}
