import { z } from "zod";
import { timeInWords } from "./parts/facts-in-words";
import { Action, Facts, Letter, Paragraph } from "./parts/letter";
import { instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const bankChangeNotice = defineTemplate({
  props: z.object({
    payeeName: line,
    changedAt: instant,
    bankLast4: z.string().regex(/^\w{4}$/),
    heldUntil: instant,
    url: link,
    zone,
  }),
  subject: ({ payeeName }) => `The bank account of ${payeeName} has been changed`,
  body: ({ payeeName, changedAt, bankLast4, heldUntil, url, zone }, frame) => (
    <Letter
      head={`The bank account for payments to ${payeeName} was changed.`}
      preview="Payments wait for some days."
      frame={frame}
    >
      <Facts
        facts={[
          ["Changed", timeInWords(changedAt, zone)],
          ["New account ends in", bankLast4],
          ["Payments wait until", timeInWords(heldUntil, zone)],
        ]}
      />
      <Paragraph>
        If you made this change, you need do nothing. Payments wait so that a change nobody wanted can be
        stopped; nothing is lost.
      </Paragraph>
      <Paragraph>
        If you did not, please tell us before that time. This mail went to the old and the new contact.
      </Paragraph>
      <Action href={url}>This was not me</Action>
    </Letter>
  ),
});
