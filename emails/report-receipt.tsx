import { z } from "zod";
import { timeInWords } from "./parts/facts-in-words";
import { Action, Items, Letter, Paragraph, Subhead, Work } from "./parts/letter";
import { instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const reportReceipt = defineTemplate({
  props: z.object({
    receiptNumber: line,
    workTitle: line,
    receivedAt: instant,
    missing: z.array(line),
    nextNewsBy: instant,
    url: link,
    zone,
  }),
  subject: ({ receiptNumber, missing }) =>
    missing.length === 0
      ? `We have your report ${receiptNumber}`
      : `Your report ${receiptNumber}: something is still missing`,
  body: ({ receiptNumber, workTitle, receivedAt, missing, nextNewsBy, url, zone }, frame) => (
    <Letter
      head={
        <>
          We received your report {receiptNumber} about <Work>{workTitle}</Work> on{" "}
          {timeInWords(receivedAt, zone)}.
        </>
      }
      preview={missing.length === 0 ? "A person reads it." : "To act we still need something from you."}
      frame={frame}
    >
      {missing.length === 0 ? (
        <Paragraph>A person reads it. You hear from us by {timeInWords(nextNewsBy, zone)}.</Paragraph>
      ) : (
        <>
          <Subhead>To act we still need</Subhead>
          <Items>{missing}</Items>
          <Paragraph>The form holds what you have told us already; only these are to be added.</Paragraph>
        </>
      )}
      <Action href={url}>{missing.length === 0 ? "Follow the report" : "Complete the report"}</Action>
    </Letter>
  ),
});
