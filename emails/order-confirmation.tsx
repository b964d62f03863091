import { z } from "zod";
import { amountInWords, countInWords, timeInWords } from "./parts/facts-in-words";
import { Action, Facts, Letter, Paragraph, Subhead, Work } from "./parts/letter";
import { amount, instant, line, link, zone } from "./parts/prop-types";
import { defineTemplate } from "./template";

const Licence = z.object({
  title: line,
  /** The use in words: "one advert, UK television, 1 year". */
  scopeInWords: line,
  recordNumber: line,
  proofCode: line,
  recordUrl: link,
  proofUrl: link,
  net: amount,
});

export const orderConfirmation = defineTemplate({
  props: z.object({
    orderNumber: line,
    paidAt: instant,
    sellerName: line,
    licensorName: line,
    companyName: line,
    invoiceNumber: line,
    invoiceUrl: link,
    licences: z.array(Licence).min(1),
    net: amount,
    taxInWords: line,
    tax: amount,
    gross: amount,
    orderUrl: link,
    zone,
  }),
  subject: ({ orderNumber, licences }) =>
    `Order ${orderNumber}: ${licences.length === 1 ? "your licence" : `your ${licences.length} licences`}`,
  body: (props, frame) => (
    <Letter
      head={`${props.companyName} holds ${countInWords(props.licences.length, "licence", "licences")} from ${props.licensorName}, paid on ${timeInWords(props.paidAt, props.zone)}.`}
      preview={`Invoice ${props.invoiceNumber}, ${amountInWords(props.gross)}.`}
      frame={frame}
    >
      <Action href={props.orderUrl}>Download the masters</Action>
      {props.licences.map((licence) => (
        <div key={licence.recordNumber}>
          <Subhead>
            <Work>{licence.title}</Work>
          </Subhead>
          <Facts
            facts={[
              ["Use", licence.scopeInWords],
              [
                "Licence record",
                <a key="record" href={licence.recordUrl}>
                  {licence.recordNumber}
                </a>,
              ],
              [
                "Proof code",
                <a key="proof" href={licence.proofUrl}>
                  {licence.proofCode}
                </a>,
              ],
              ["Price before tax", amountInWords(licence.net)],
            ]}
          />
        </div>
      ))}
      <Paragraph>
        Anybody to whom you give the proof code can check the record, without an account. The record number
        alone reveals nothing.
      </Paragraph>
      <Subhead>Invoice</Subhead>
      <Facts
        facts={[
          [
            "Invoice",
            <a key="invoice" href={props.invoiceUrl}>
              {props.invoiceNumber}
            </a>,
          ],
          ["Order", props.orderNumber],
          ["Seller", props.sellerName],
          ["Net", amountInWords(props.net)],
          [props.taxInWords, amountInWords(props.tax)],
          ["Paid", amountInWords(props.gross)],
        ]}
      />
    </Letter>
  ),
});
