import { z } from "zod";
import { timeInWords } from "./parts/facts-in-words";
import { Action, Letter, Paragraph } from "./parts/letter";
import { instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const invitation = defineTemplate({
  props: z.object({
    inviterName: line,
    organisationName: line,
    /** As it reads after "as": "a composer", "a buyer who may also approve and pay". */
    roleInWords: line,
    url: link,
    expiresAt: instant,
    zone,
  }),
  subject: ({ organisationName }) => `An invitation from ${organisationName}`,
  body: (props, frame) => (
    <Letter
      head={`${props.inviterName} invites you to join ${props.organisationName} as ${props.roleInWords}.`}
      preview="Accept or leave it; nothing happens until you do."
      frame={frame}
    >
      <Paragraph>
        The link shows what the role may do before you accept. It can be used until{" "}
        {timeInWords(props.expiresAt, props.zone)} and only with this address.
      </Paragraph>
      <Action href={props.url}>See the invitation</Action>
      <Paragraph>If you do not know {props.inviterName}, you can leave this mail unanswered.</Paragraph>
    </Letter>
  ),
});
