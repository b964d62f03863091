import { z } from "zod";
import { amountInWords, timeInWords } from "./parts/facts-in-words";
import { Action, Facts, Letter, Paragraph } from "./parts/letter";
import { amount, instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const payoutSent = defineTemplate({
  props: z.object({
    payeeName: line,
    periodInWords: line,
    amount,
    sentAt: instant,
    reference: line,
    bankLast4: z
      .string()
      .regex(/^\w{4}$/)
      .optional(),
    statementUrl: link,
    zone,
  }),
  subject: ({ amount, periodInWords }) => `${amountInWords(amount)} is on its way, for ${periodInWords}`,
  body: (props, frame) => (
    <Letter
      head={`${amountInWords(props.amount)} for ${props.periodInWords} is on its way to ${props.payeeName}.`}
      preview="The statement explains every line."
      frame={frame}
    >
      <Facts
        facts={[
          ["Amount", amountInWords(props.amount)],
          ["Sent", timeInWords(props.sentAt, props.zone)],
          ["Reference", props.reference],
          ...(props.bankLast4 ? ([["To the account ending in", props.bankLast4]] as const) : []),
        ]}
      />
      <Paragraph>The statement shows which licences it comes from, and every deduction.</Paragraph>
      <Action href={props.statementUrl}>See the statement</Action>
    </Letter>
  ),
});
