import { fmt } from "@/components/ui/format";
import { formatMoney } from "@/lib/kernel/money";
import type { PayoutRunView } from "@/lib/ledger";
import { isToPay } from "./payout-run";

function sumOf(run: PayoutRunView): string {
  const minor = run.payouts.filter(isToPay).reduce((sum, one) => sum + one.amountMinor, 0n);
  return formatMoney({ minor, currency: run.currency });
}

/** The state of affairs: what waits for somebody, else what was paid last. */
export function payoutsHead(runs: readonly PayoutRunView[], isMarketplace: boolean): string {
  const released = runs.filter(({ state }) => state === "released");
  if (isMarketplace) {
    const [first] = released;
    if (!first) return "No run waits for a second person.";
    return released.length === 1
      ? `${sumOf(first)} to ${first.libraryName} and its writers waits for you, the second person.`
      : `${fmt.countWord(released.length, "run")} wait for you, the second person.`;
  }
  const run = runs.find(({ state }) => state !== "withdrawn");
  if (!run) return "Nothing has been paid out yet.";
  const payees = fmt.countWord(run.payouts.filter(isToPay).length, "payee");
  const carried = run.payouts.filter(({ state }) => state === "carried").length;
  const rest =
    carried > 0
      ? ` ${carried === 1 ? "One more is" : `${fmt.countWord(carried, "more", "more").replace(/^./, (letter) => letter.toUpperCase())} are`} carried forward.`
      : "";
  switch (run.state) {
    case "prepared":
      return run.payouts.some(isToPay)
        ? `${sumOf(run)} for ${payees} is prepared and waits for the library's accountant.${rest}`
        : `Nobody can be paid by the run of ${fmt.date(run.preparedAt)}.${rest}`;
    case "released":
      return `${sumOf(run)} for ${payees} is released once and waits for a second person.${rest}`;
    case "confirmed":
      return `${sumOf(run)} went to ${payees} on ${fmt.date(run.confirmed?.at ?? run.preparedAt)}.${rest}`;
    case "withdrawn":
      return "Nothing has been paid out yet.";
  }
}
