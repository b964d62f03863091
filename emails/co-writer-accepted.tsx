import { z } from "zod";
import { listInWords, timeInWords } from "./parts/facts-in-words";
import { Action, Letter, Paragraph, Work } from "./parts/letter";
import { instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const coWriterAccepted = defineTemplate({
  props: z.object({
    title: line,
    writerName: line,
    acceptedAt: instant,
    waitingFor: z.array(line),
    url: link,
    zone,
  }),
  subject: ({ title, writerName }) => `${writerName} has accepted the shares of ${title}`,
  body: ({ title, writerName, acceptedAt, waitingFor, url, zone }, frame) => (
    <Letter
      head={
        <>
          {writerName} accepted the shares of <Work>{title}</Work> on {timeInWords(acceptedAt, zone)}.
        </>
      }
      preview={
        waitingFor.length === 0
          ? "Every writer has accepted."
          : `Still waiting for ${listInWords(waitingFor)}.`
      }
      frame={frame}
    >
      <Paragraph>
        {waitingFor.length === 0
          ? "Every writer has accepted now. You need do nothing."
          : `We are still waiting for ${listInWords(waitingFor)}.`}
      </Paragraph>
      <Action href={url}>See the delivery</Action>
    </Letter>
  ),
});
