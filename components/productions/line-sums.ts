import { formatMoney, money } from "@/lib/kernel/money";
import type { ShortlistLine } from "./shortlist-line";

/** What the lines come to together, before tax; all are of one library, so of one currency. */
export function sumOf(lines: readonly ShortlistLine[]): string {
  const [first] = lines;
  if (!first) return "";
  const minor = lines.reduce((sum, line) => sum + BigInt(line.price?.minor ?? "0"), 0n);
  return formatMoney(money(minor, first.currency));
}
