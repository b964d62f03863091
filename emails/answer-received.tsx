import { z } from "zod";
import { countInWords, timeInWords } from "./parts/facts-in-words";
import { Action, Caution, Letter, Paragraph, Work } from "./parts/letter";
import { instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const answerReceived = defineTemplate({
  props: z.object({
    title: line,
    receivedAt: instant,
    papersCount: z.number().int().min(0),
    decisionBy: instant,
    url: link,
    zone,
  }),
  subject: ({ title }) => `Your answer about ${title} has arrived`,
  body: ({ title, receivedAt, papersCount, decisionBy, url, zone }, frame) => (
    <Letter
      head={
        <>
          We received your answer about <Work>{title}</Work> on {timeInWords(receivedAt, zone)}.
        </>
      }
      preview="A person reads it."
      frame={frame}
    >
      <Paragraph>
        {papersCount === 0
          ? "No paper was attached."
          : `${countInWords(papersCount, "paper is", "papers are")} attached to it.`}{" "}
        A person reads it and decides by {timeInWords(decisionBy, zone)}. Until then nothing changes.
      </Paragraph>
      <Action href={url}>See what you sent</Action>
      <Caution />
    </Letter>
  ),
});
