import { FactList } from "@/components/ui/facts";
import { Section } from "@/components/ui/sentence";
import { Table } from "@/components/ui/table";
import type { InvoiceBody } from "@/lib/licensing";

function Party({ name, address, taxNumber }: { name: string; address: string; taxNumber: string | null }) {
  return (
    <>
      {name}
      <span className="block whitespace-pre-line">{address}</span>
      {taxNumber && <span className="block text-small text-ink-soft">Tax number {taxNumber}</span>}
    </>
  );
}

/** One invoice or credit note, everything it says; made to be printed. */
export function InvoicePaper({ body, kind }: { body: InvoiceBody; kind: string }) {
  return (
    <Section
      className="mt-8"
      head={`${kind === "invoice" ? "Invoice" : "Credit note"} ${body.number}`}
      id={body.number}
      note={`in ${body.currency}`}
    >
      <FactList
        nameWidth="10rem"
        rows={[
          ...(body.refersToNumber
            ? [{ name: "Corrects", value: `Invoice ${body.refersToNumber}`, below: body.words }]
            : []),
          { name: "Date", value: body.issuedOn, below: `Date of supply ${body.suppliedOn}` },
          { name: "Seller", value: <Party {...body.seller} /> },
          { name: "Buyer", value: <Party {...body.buyer} /> },
          { name: "Licensor", value: body.licensor, below: `Order ${body.orderNumber}` },
        ]}
      />
      <div className="mt-4">
        <Table
          caption={`Lines of ${body.number}`}
          captionHidden
          columns={[
            {
              key: "what",
              head: "Description",
              cell: (line) => (
                <>
                  {line.description}
                  <span className="block text-small text-ink-soft">{line.licenceNumber}</span>
                </>
              ),
            },
            { key: "net", head: "Net", figures: true, cell: (line) => line.net },
            { key: "tax", head: "Tax", figures: true, cell: (line) => line.tax },
          ]}
          foot={["Sum", body.net, body.tax]}
          rowKey={(line) => line.licenceNumber}
          rows={body.lines}
          sentence={(line) => `${line.description}, ${line.licenceNumber}: ${line.net} and ${line.tax} tax`}
        />
      </div>
      <FactList
        nameWidth="10rem"
        rows={[
          { name: "Net", value: `${body.currency} ${body.net}` },
          {
            name: body.taxWords,
            value: `${body.currency} ${body.tax}`,
            below: "Tax computed once on the net.",
          },
          { name: "Total", value: <b>{`${body.currency} ${body.gross}`}</b> },
        ]}
      />
    </Section>
  );
}
