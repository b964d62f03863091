import { z } from "zod";
import { dateInWords, timeInWords } from "./parts/facts-in-words";
import { Action, Caution, Letter, Paragraph, Prose, Subhead, Work } from "./parts/letter";
import { instant, line, link, prose, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const reportStatus = defineTemplate({
  props: z.object({
    receiptNumber: line,
    workTitle: line,
    /** "We have hidden the cue from new sale while the question is open." */
    state: prose,
    reasons: prose.optional(),
    decidedAt: instant,
    nextStep: prose.optional(),
    complaintUntil: instant.optional(),
    url: link,
    zone,
  }),
  subject: ({ receiptNumber }) => `News of your report ${receiptNumber}`,
  body: (props, frame) => (
    <Letter head={props.state} preview={`About report ${props.receiptNumber}.`} frame={frame}>
      <Paragraph>
        This is about report {props.receiptNumber}, <Work>{props.workTitle}</Work>, as of{" "}
        {timeInWords(props.decidedAt, props.zone)}. A person decided it.
      </Paragraph>
      {props.reasons && (
        <>
          <Subhead>Why</Subhead>
          <Prose>{props.reasons}</Prose>
        </>
      )}
      {props.nextStep && <Prose>{props.nextStep}</Prose>}
      <Action href={props.url}>See the report</Action>
      {props.complaintUntil && (
        <Paragraph>
          If you disagree, you can complain there until {dateInWords(props.complaintUntil, props.zone)}.
          Somebody else then looks at it again. Courts and, where one is open to you, an out-of-court dispute
          body remain open as well.
        </Paragraph>
      )}
      <Caution />
    </Letter>
  ),
});
