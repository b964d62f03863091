import { z } from "zod";
import { amountInWords, timeInWords } from "./parts/facts-in-words";
import { Action, Facts, Items, Letter, Paragraph, Prose, Subhead, Work } from "./parts/letter";
import { amount, instant, line, link, prose, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const refundNotice = defineTemplate({
  props: z.object({
    orderNumber: line,
    amount,
    refundedAt: instant,
    reason: prose,
    creditNoteNumber: line.optional(),
    licences: z.array(z.object({ title: line, recordNumber: line, effect: line })),
    orderUrl: link,
    zone,
  }),
  subject: ({ orderNumber, amount }) => `Order ${orderNumber}: ${amountInWords(amount)} refunded`,
  body: (props, frame) => (
    <Letter
      head={`We refunded ${amountInWords(props.amount)} of order ${props.orderNumber}.`}
      preview="It goes back the way it was paid."
      frame={frame}
    >
      <Prose>{props.reason}</Prose>
      <Facts
        facts={[
          ["Refunded", amountInWords(props.amount)],
          ["On", timeInWords(props.refundedAt, props.zone)],
          ...(props.creditNoteNumber ? ([["Credit note", props.creditNoteNumber]] as const) : []),
        ]}
      />
      <Paragraph>
        The money goes back the way it was paid. Banks often take 5 to 10 days to show it.
      </Paragraph>
      {props.licences.length > 0 && (
        <>
          <Subhead>What happens to the licences</Subhead>
          <Items>
            {props.licences.map(({ title, recordNumber, effect }) => (
              <>
                <Work>{title}</Work>, {recordNumber}: {effect}
              </>
            ))}
          </Items>
        </>
      )}
      <Action href={props.orderUrl}>See the order</Action>
    </Letter>
  ),
});
