import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { InvoicePaper } from "@/components/licensing/invoice-paper";
import { TextLink } from "@/components/ui/button";
import { Empty } from "@/components/ui/empty";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence } from "@/components/ui/sentence";
import { NotFound } from "@/lib/kernel/errors";
import { getInvoices } from "@/lib/licensing";
import { viewer } from "@/lib/web";

type Props = { params: Promise<{ id: string }> };

export const metadata: Metadata = { title: "Invoice" };

async function read(id: string) {
  const { actor, person } = await viewer();
  if (!person) redirect(`/sign-in?to=/orders/${id}/invoice`);
  if (!["buyer", "owner", "accountant", "auditor"].includes(actor.kind)) notFound();
  try {
    return await getInvoices(actor, { orderId: id });
  } catch (error) {
    if (error instanceof NotFound) notFound();
    throw error;
  }
}

export default async function InvoiceScreen({ params }: Props) {
  const { id } = await params;
  const papers = await read(id);
  return (
    <Page>
      <HeadSentence place={<TextLink href={`/orders/${id}`}>The order</TextLink>}>
        {papers.length === 0
          ? "This order has no invoice yet."
          : `This order has ${fmt.countWord(papers.length, "paper")}; none is ever changed, a correction is a paper of its own.`}
      </HeadSentence>
      {papers.length === 0 && <Empty>The invoice stands here as soon as the payment has come.</Empty>}
      {papers.map(({ id: key, kind, body }) => (
        <InvoicePaper body={body} key={key} kind={kind} />
      ))}
    </Page>
  );
}
