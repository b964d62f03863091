import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { ActButton } from "@/components/account/act-button";
import { OrderAside } from "@/components/licensing/order-aside";
import { OrderLine } from "@/components/licensing/order-line";
import { headOf } from "@/components/licensing/order-words";
import { Watch } from "@/components/licensing/watch";
import { TextLink } from "@/components/ui/button";
import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { Page } from "@/components/ui/page";
import { HeadSentence, Section } from "@/components/ui/sentence";
import { StatusSentence } from "@/components/ui/status-sentence";
import { NotFound } from "@/lib/kernel/errors";
import { getOrder, type OrderPage } from "@/lib/licensing";
import { viewer } from "@/lib/web";
import { approveOrder, refundLines, withdrawOrder } from "../actions";

type Props = { params: Promise<{ id: string }>; searchParams: Promise<{ paid?: string }> };

export const metadata: Metadata = { title: "Order" };

const SEEN_BY = ["buyer", "owner", "accountant", "auditor"];

async function read(id: string): Promise<OrderPage> {
  const { actor, person } = await viewer();
  if (!person) redirect(`/sign-in?to=/orders/${id}`);
  if (!SEEN_BY.includes(actor.kind)) notFound();
  try {
    return await getOrder(actor, { orderId: id });
  } catch (error) {
    if (error instanceof NotFound) notFound();
    throw error;
  }
}

const MARKS = {
  proposed: "half",
  "awaiting payment": "half",
  paid: "half",
  licensed: "tick",
  refused: "warn",
  withdrawn: "open",
} as const;

export default async function OrderScreen({ params, searchParams }: Props) {
  const order = await read((await params).id);
  const isPaidFor = (await searchParams).paid === "1" && order.state === "awaiting payment";
  const isOpen = order.state === "proposed" || order.state === "awaiting payment";
  return (
    <Page
      aside={<OrderAside acts={{ approveOrder, refundLines }} isPaidFor={isPaidFor} order={order} />}
      asideLabel="What comes next"
    >
      {(isPaidFor || order.state === "paid") && <Watch />}
      <HeadSentence
        place={
          order.isBuyers ? <TextLink href="/records">Licences and orders</TextLink> : `Order ${order.number}`
        }
      >
        {headOf(order, isPaidFor)}
      </HeadSentence>
      <StatusSentence
        below={`Placed by ${order.placedBy} on ${fmt.dateTime(order.placedAt)}`}
        className="mt-4"
        mark={MARKS[order.state]}
      >
        {order.words}
      </StatusSentence>
      {order.lines.map((line) => (
        <OrderLine key={line.id} line={line} mayFetch={order.isBuyers} />
      ))}
      <Section className="mt-8" head="The order">
        <FactList
          nameWidth="10rem"
          rows={[
            { name: "Order", value: order.number },
            { name: "Licensee", value: order.licensee.name },
            ...(order.licensee.endClient ? [{ name: "Its client", value: order.licensee.endClient }] : []),
            { name: "Licensor", value: order.libraryName },
            ...(order.acceptance
              ? [
                  {
                    name: "Accepted",
                    value: `${order.acceptance.name}, ${fmt.dateTime(order.acceptance.acceptedAt)}`,
                    below: `Terms ${order.acceptance.termsVersion}`,
                  },
                ]
              : []),
            ...(order.paidAt ? [{ name: "Paid", value: fmt.dateTime(order.paidAt) }] : []),
          ]}
        />
      </Section>
      {order.isBuyers && isOpen && !isPaidFor && (
        <p className="mt-6">
          <ActButton
            act={withdrawOrder}
            busyWords="Withdrawing"
            input={{ orderId: order.id }}
            question={{
              title: `Withdraw order ${order.number}?`,
              consequence: "Nothing is licensed and nothing is paid.",
            }}
            words="Withdraw this order"
          />
        </p>
      )}
    </Page>
  );
}
