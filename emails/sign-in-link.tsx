import { z } from "zod";
import { timeInWords } from "./parts/facts-in-words";
import { Action, Letter, Paragraph } from "./parts/letter";
import { instant, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const signInLink = defineTemplate({
  props: z.object({ url: link, expiresAt: instant, zone }),
  subject: () => "Your link to sign in",
  body: ({ url, expiresAt, zone }, frame) => (
    <Letter head="Here is your link to sign in." preview="It works once." frame={frame}>
      <Paragraph>
        It opens a page with one button; pressing that button signs you in. The link works once, until{" "}
        {timeInWords(expiresAt, zone)}.
      </Paragraph>
      <Action href={url}>Open the sign-in page</Action>
      <Paragraph>
        If you did not ask for this, you need do nothing. Nobody is signed in until the button is pressed.
      </Paragraph>
    </Letter>
  ),
});
