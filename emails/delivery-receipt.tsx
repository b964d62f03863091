import { z } from "zod";
import { countInWords, sizeInWords, timeInWords } from "./parts/facts-in-words";
import { Action, Items, Letter, Paragraph, Subhead, Work } from "./parts/letter";
import { instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

const File = z.object({
  name: line,
  sizeBytes: z.number().int().min(0),
  sha256: z.string().regex(/^[0-9a-f]{64}$/),
});

export const deliveryReceipt = defineTemplate({
  props: z.object({
    title: line,
    receivedAt: instant,
    files: z.array(File).min(1),
    nextNewsBy: instant,
    url: link,
    zone,
  }),
  subject: ({ title, files }) =>
    `Received: ${title}, ${files.length === 1 ? "1 file" : `${files.length} files`}`,
  body: ({ title, receivedAt, files, nextNewsBy, url, zone }, frame) => (
    <Letter
      head={
        <>
          We received {countInWords(files.length, "file", "files")} for <Work>{title}</Work> on{" "}
          {timeInWords(receivedAt, zone)}.
        </>
      }
      preview="Keep this as proof of delivery."
      frame={frame}
    >
      <Paragraph>
        Below are the SHA-256 values of the exact files. Please keep this message: it is your proof of what
        was delivered, and when. Screening normally takes minutes. You hear from us again by{" "}
        {timeInWords(nextNewsBy, zone)}.
      </Paragraph>
      <Action href={url}>See the delivery</Action>
      <Subhead>Files</Subhead>
      <Items>
        {files.map(({ name, sizeBytes, sha256 }) => (
          <>
            {name}, {sizeInWords(sizeBytes)}
            <br />
            SHA-256 {sha256}
          </>
        ))}
      </Items>
    </Letter>
  ),
});
