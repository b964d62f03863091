import { z } from "zod";
import { listInWords, timeInWords } from "./parts/facts-in-words";
import { Action, Letter, Paragraph, Work } from "./parts/letter";
import { instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

export const deliveryListed = defineTemplate({
  props: z.object({
    title: line,
    libraryName: line,
    listedAt: instant,
    versions: z.array(line).min(1),
    waitingVersions: z.array(line),
    url: link,
    zone,
  }),
  subject: ({ title }) => `${title} is listed`,
  body: ({ title, libraryName, listedAt, versions, waitingVersions, url, zone }, frame) => (
    <Letter
      head={
        <>
          <Work>{title}</Work> is listed with {libraryName} since {timeInWords(listedAt, zone)}.
        </>
      }
      preview="Buyers can find and license it."
      frame={frame}
    >
      <Paragraph>Buyers can find and license it. Listed now: {listInWords(versions)}.</Paragraph>
      {waitingVersions.length > 0 && (
        <Paragraph>
          Still to come: {listInWords(waitingVersions)}. Each joins as soon as it is clear.
        </Paragraph>
      )}
      <Action href={url}>See it as buyers do</Action>
    </Letter>
  ),
});
