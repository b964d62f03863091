import type { Act } from "@/components/account/use-act";
import { ButtonLink, TextLink } from "@/components/ui/button";
import { FactList } from "@/components/ui/facts";
import { fmt } from "@/components/ui/format";
import { AsideTitle } from "@/components/ui/page";
import { StatusSentence } from "@/components/ui/status-sentence";
import type { OrderPage } from "@/lib/licensing";
import { ApprovePanel, PayButton } from "./approve-panel";
import { RefundForm } from "./refund-form";

interface OrderAsideProps {
  order: OrderPage;
  /** The buyer has come back from the payment page and the message is still to come. */
  isPaidFor: boolean;
  acts: {
    approveOrder: (input: {
      orderId: string;
      termsVersion: string;
      mayAccept: true;
    }) => Promise<{ ok: true } | { ok: false; message: string }>;
    refundLines: Act<{ orderId: string; lineIds: string[]; words: string }, unknown>;
  };
}

/** The sum, and the one thing to do next in this order's state. */
export function OrderAside({ order, isPaidFor, acts }: OrderAsideProps) {
  return (
    <>
      <AsideTitle below={`${order.taxWords} included.`}>{order.gross}</AsideTitle>
      <FactList
        rows={[
          { name: "Net", value: order.net },
          { name: order.taxWords, value: order.tax },
          { name: order.paidAt ? "Paid" : "To pay", value: <b>{order.gross}</b> },
        ]}
      />
      <div className="mt-5 grid gap-5">
        <NextStep acts={acts} isPaidFor={isPaidFor} order={order} />
        <Papers order={order} />
        {order.mayRefund && order.state === "licensed" && <Refund order={order} refund={acts.refundLines} />}
      </div>
    </>
  );
}

function NextStep({ order, isPaidFor, acts }: OrderAsideProps) {
  if (isPaidFor)
    return (
      <StatusSentence below="This page looks again by itself; you may close it." mark="half">
        The payment service has sent you back; its confirmation is on the way.
      </StatusSentence>
    );
  if (!order.isBuyers) return null;
  if (order.state === "proposed" && order.mayApprove)
    return (
      <ApprovePanel approve={acts.approveOrder} gross={order.gross} orderId={order.id} terms={order.terms} />
    );
  if (order.state === "awaiting payment" && order.mayApprove)
    return <PayButton gross={order.gross} orderId={order.id} />;
  if (order.state === "proposed" || order.state === "awaiting payment")
    return (
      <p>
        Your seat may propose. Somebody of your company who may approve accepts the terms and pays; send them
        the address of this page.
      </p>
    );
  const [only] = order.lines;
  if (order.state === "licensed" && only?.licenceNumber)
    return (
      <ButtonLink href={`/records/${only.licenceNumber}`} kind="main" wide>
        Open the licence record
      </ButtonLink>
    );
  return null;
}

function Papers({ order }: { order: OrderPage }) {
  if (order.papers.length === 0 && order.refunds.length === 0) return null;
  return (
    <div className="grid gap-1.5">
      {order.papers.map(({ number, kind, issuedAt, gross, currency }) => (
        <p key={number}>
          <TextLink href={`/orders/${order.id}/invoice#${number}`}>
            {kind === "invoice" ? "Invoice" : "Credit note"} {number}
          </TextLink>
          <span className="block text-small text-ink-soft">
            {currency} {gross}, {fmt.date(issuedAt)}
          </span>
        </p>
      ))}
      {order.refunds.map((refund) => (
        <StatusSentence
          below={`${fmt.date(refund.at)}; ${refund.words}`}
          key={`${refund.amount} ${refund.at.toISOString()}`}
          mark={refund.state === "done" ? "done" : "half"}
        >
          {refund.amount} {refund.state === "done" ? "refunded" : "on its way back"}
        </StatusSentence>
      ))}
    </div>
  );
}

function Refund({ order, refund }: { order: OrderPage; refund: OrderAsideProps["acts"]["refundLines"] }) {
  const lines = order.lines
    .filter(({ isRefunded }) => !isRefunded)
    .map(({ id, title, licenceNumber, net }) => ({
      id,
      words: `${licenceNumber}, “${title}”, ${net} and its tax`,
    }));
  if (lines.length === 0) return null;
  return (
    <details>
      <summary className="link target inline-block min-h-6 list-none [&::-webkit-details-marker]:hidden">
        Refund licences of this order
      </summary>
      <div className="mt-4">
        <RefundForm lines={lines} orderId={order.id} refund={refund} />
      </div>
    </details>
  );
}
