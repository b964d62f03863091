import { fmt } from "@/components/ui/format";
import type { OrderPage } from "@/lib/licensing";

/** The state of an order in one sentence. */
export function headOf(order: OrderPage, isPaidFor: boolean): string {
  const held = order.lines.filter(({ isRefunded }) => !isRefunded).length;
  const count = fmt.countWord(order.lines.length, "licence");
  switch (order.state) {
    case "proposed":
      return `Order ${order.number} is proposed: ${count} from ${order.libraryName} for ${order.production.title}, ${order.gross} with tax.`;
    case "awaiting payment":
      return isPaidFor
        ? `Order ${order.number}: the payment is being confirmed.`
        : `Order ${order.number} is approved and waits for its payment of ${order.gross}.`;
    case "paid":
      return `Order ${order.number} is paid. Its records are signed as soon as the masters are ready.`;
    case "licensed":
      return held === 0
        ? `Order ${order.number} has been refunded in full; its licences have ended.`
        : `${order.licensee.name} holds ${fmt.countWord(held, "licence")} of order ${order.number} from ${order.libraryName} for ${order.production.title}.`;
    case "refused":
      return `Order ${order.number} was not licensed, and its payment goes back in full.`;
    case "withdrawn":
      return `Order ${order.number} was withdrawn; nothing was licensed.`;
  }
}
