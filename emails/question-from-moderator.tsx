import { z } from "zod";
import { timeInWords } from "./parts/facts-in-words";
import { Action, Caution, Items, Letter, Paragraph, Prose, Subhead, Work } from "./parts/letter";
import { instant, line, link, prose, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

/** "0:48". */
const clock = z.string().regex(/^\d+(:\d{2})+$/);

export const questionFromModerator = defineTemplate({
  props: z.object({
    title: line,
    /** Places in the deliverer's own recording. */
    passages: z.array(z.object({ from: clock, to: clock })),
    question: prose,
    answerBy: instant,
    url: link,
    zone,
  }),
  subject: ({ title }) => `A question about ${title}`,
  body: ({ title, passages, question, answerBy, url, zone }, frame) => (
    <Letter
      head={
        <>
          We have a question about <Work>{title}</Work>. Nothing is decided yet.
        </>
      }
      preview="There is often an ordinary reason."
      frame={frame}
    >
      {passages.length > 0 && (
        <>
          <Paragraph>In these places your recording contains the same sound as another one:</Paragraph>
          <Items>{passages.map(({ from, to }) => `from ${from} to ${to}`)}</Items>
          <Paragraph>
            This often has an ordinary reason: a shared loop, an earlier take of your own, or a cleared
            sample.
          </Paragraph>
        </>
      )}
      <Subhead>The question</Subhead>
      <Prose>{question}</Prose>
      <Paragraph>
        Please answer by {timeInWords(answerBy, zone)}. A receipt, a licence or a session file helps most; you
        can attach them to your answer.
      </Paragraph>
      <Action href={url}>Listen and answer</Action>
      <Caution />
    </Letter>
  ),
});
