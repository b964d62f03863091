import { z } from "zod";
import { Action, Facts, Letter, Paragraph, Work } from "./parts/letter";
import { line, link } from "./parts/prop-types";
import { defineTemplate } from "./template";

/** "33.34". */
const percent = z.string().regex(/^\d{1,3}\.\d{2}$/);

export const splitAcceptanceRequest = defineTemplate({
  props: z.object({
    title: line,
    delivererName: line,
    libraryName: line,
    sharePercent: percent,
    shares: z.array(z.object({ writerName: line, percent })).min(1),
    url: link,
  }),
  subject: ({ title }) => `Your share in ${title}: please accept or decline`,
  body: (props, frame) => (
    <Letter
      head={
        <>
          {props.delivererName} names you as a writer of <Work>{props.title}</Work>, with {props.sharePercent}
          &nbsp;%.
        </>
      }
      preview="Nothing is listed before every writer has accepted."
      frame={frame}
    >
      <Paragraph>
        The cue was delivered to {props.libraryName}. It is not listed before every writer has accepted these
        shares.
      </Paragraph>
      <Facts facts={props.shares.map(({ writerName, percent }) => [writerName, `${percent}\u00a0%`])} />
      <Action href={props.url}>Accept or decline</Action>
      <Paragraph>
        If a share is wrong, decline and say what it should be. {props.delivererName} then corrects it and
        asks you again.
      </Paragraph>
    </Letter>
  ),
});
