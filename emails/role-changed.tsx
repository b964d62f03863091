import { z } from "zod";
import { timeInWords } from "./parts/facts-in-words";
import { Action, Letter, Paragraph } from "./parts/letter";
import { instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const roleChanged = defineTemplate({
  props: z.object({
    change: z.enum(["given", "removed"]),
    roleInWords: line,
    organisationName: line,
    byName: line,
    changedAt: instant,
    url: link,
    zone,
  }),
  subject: ({ organisationName }) => `Your role at ${organisationName} has changed`,
  body: ({ change, roleInWords, organisationName, byName, changedAt, url, zone }, frame) => (
    <Letter
      head={
        change === "given"
          ? `You are now ${roleInWords} at ${organisationName}.`
          : `You are no longer ${roleInWords} at ${organisationName}.`
      }
      preview={`Changed by ${byName}.`}
      frame={frame}
    >
      <Paragraph>
        {byName} made this change on {timeInWords(changedAt, zone)}.{" "}
        {change === "given"
          ? "Your page shows what the role may do."
          : "Your other roles, if you have any, stay as they are."}
      </Paragraph>
      <Action href={url}>See your roles</Action>
      <Paragraph>If you think this is a mistake, please ask {byName}.</Paragraph>
    </Letter>
  ),
});
