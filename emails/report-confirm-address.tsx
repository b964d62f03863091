import { z } from "zod";
import { timeInWords } from "./parts/facts-in-words";
import { Action, Letter, Paragraph } from "./parts/letter";
import { instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const reportConfirmAddress = defineTemplate({
  props: z.object({ receiptNumber: line, url: link, expiresAt: instant, zone }),
  subject: ({ receiptNumber }) => `Report ${receiptNumber}: please confirm this address`,
  body: ({ receiptNumber, url, expiresAt, zone }, frame) => (
    <Letter
      head={`Somebody gave this address with report ${receiptNumber}. Was it you?`}
      preview="One button confirms it."
      frame={frame}
    >
      <Paragraph>
        The link opens a page with one button. Pressing it confirms that answers about the report reach you
        here. It can be used until {timeInWords(expiresAt, zone)}. The report is read either way.
      </Paragraph>
      <Action href={url}>Confirm this address</Action>
      <Paragraph>If it was not you, please ignore this mail; nothing else is sent here about it.</Paragraph>
    </Letter>
  ),
});
