import { z } from "zod";
import { Action, Letter, Paragraph, Work } from "./parts/letter";
import { line, link } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const coWriterNotAccepted = defineTemplate({
  props: z.object({
    title: line,
    writerName: line,
    answer: z.enum(["declined", "no answer"]),
    url: link,
  }),
  subject: ({ title, writerName, answer }) =>
    answer === "declined"
      ? `${writerName} has declined the shares of ${title}`
      : `${writerName} has not answered about the shares of ${title}`,
  body: ({ title, writerName, answer, url }, frame) => (
    <Letter
      head={
        answer === "declined" ? (
          <>
            {writerName} declined the shares of <Work>{title}</Work>.
          </>
        ) : (
          <>
            {writerName} did not answer within fourteen days about the shares of <Work>{title}</Work>.
          </>
        )
      }
      preview="It is not listed before every writer has accepted. Everything else is kept."
      frame={frame}
    >
      <Paragraph>
        The delivery waits for you; it is not listed before every writer has accepted. The files, the
        screening and all you wrote are kept.
      </Paragraph>
      <Paragraph>Agree with {writerName} first, then ask again on the delivery's page.</Paragraph>
      <Action href={url}>See the delivery</Action>
    </Letter>
  ),
});
